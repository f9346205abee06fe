import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';

let app: TestApp;
let browser: TestBrowser;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  ledger = await startLedger(app, { jurisdiction: 'EU', locale: 'en-GB', gwpSet: 'EU-2024-573' });
  browser = await startBrowser(app);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});

describe('A form whose answer got lost on the way', () => {
  it('says what stands in the log when something else is tried, and can be started over', async () => {
    const unit = await ledger.unit('1290', '1290');
    const { page, expectRefusal, forgive } = await browser.desk({ as: ledger.owner, locale: 'en-GB' });
    const groups = async () =>
      Number((await app.database.query<{ n: string }>('superuser', 'select count(*) as n from entry_group'))[0]?.n);
    const post = page.getByRole('button', { name: 'Post', exact: true });
    await page.goto(`${app.url}/record/foundEmpty?unit=${unit.id}`);
    const fill = async (at: string) => {
      await page.getByRole('radio', { name: /^Flat/ }).check();
      await page.getByLabel('Day and time').fill(at);
      await page.getByText('1,290 g before, 0 g after').waitFor();
    };
    await fill('2026-11-29T10:00');
    const before = await groups();
    await page.route('**/api/v1/entry-groups', async (route) => {
      await route.fetch();
      await route.abort();
    });
    await post.click();
    await page.locator('[role=alert]').first().waitFor();
    await page.unroute('**/api/v1/entry-groups');
    expect(await groups()).toBe(before + 1);
    forgive(/entry-groups|ERR_FAILED/);

    await page.reload();
    expectRefusal(409, '/entry-groups');
    await page.getByLabel('Day and time').fill('2026-11-29T09:00');
    await page.getByText('It is recorded already, with other figures').waitFor();
    expect(await page.getByRole('link', { name: 'See what was recorded' }).getAttribute('href')).toMatch(/^\/log\//);
    expect(await groups()).toBe(before + 1);

    await page.getByRole('button', { name: 'Start over' }).click();
    await page.getByText('It is recorded already').waitFor({ state: 'detached' });
    expect(await page.getByRole('radio', { name: /^Flat/ }).isChecked()).toBe(false);
    // With ids of its own, the server takes it for something new.
    const shown = page.waitForResponse(
      (answer) => answer.url().endsWith('/entry-groups/preview') && answer.status() === 200,
    );
    await page.getByRole('radio', { name: /^Open/ }).check();
    await shown;
    expect(await page.getByText('It is recorded already').count()).toBe(0);
  });
});
