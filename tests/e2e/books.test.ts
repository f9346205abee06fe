import { readFile } from 'node:fs/promises';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { type FullWorld, startFullWorld } from '../support/browser-full-world.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
let browser: TestBrowser;
let world: FullWorld;

beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  world = await startFullWorld(app);
  // November is over, and everybody signs in anew.
  app.clock.set('2026-12-02T09:00:00.000Z');
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

/** Months before the last one are closed as the screens would, everything carried by the owner. */
async function closeUpTo(client: TestClient, month: string): Promise<void> {
  for (;;) {
    const { next } = (await client.get('/periods')).body;
    if (next === month) return;
    const { items } = (await client.get(`/periods/checklist?month=${next}`)).body;
    const waiting = items.filter(({ needsDecision }: { needsDecision: boolean }) => needsDecision);
    if (waiting.length > 0) {
      const carried = await client.post('/periods/carried', {
        month: next,
        carriedBy: world.ledger.owner.id,
        reason: 'looked at in the last month',
        items: waiting.map(({ key }: { key: string }) => ({ id: uuid(), key })),
      });
      expect(carried.status).toBe(201);
    }
    const { sumsHash } = (await client.get(`/periods/checklist?month=${next}`)).body;
    expect((await client.post('/periods', { id: uuid(), month: next, sumsHash })).status).toBe(201);
  }
}

describe('The owner', () => {
  it('finds first what does not balance, sees in whose hands it was, settles it and closes the month under a seal', async () => {
    const { owner } = world.ledger;
    await closeUpTo(await app.signIn(owner), '2026-11');
    const { page, atRest } = await browser.desk({ as: owner });
    await page.goto(`${app.url}/`);
    await page.getByRole('navigation', { name: 'Areas' }).getByRole('link', { name: 'Books' }).click();
    await page.getByRole('heading', { name: 'November 2026' }).waitFor();
    const differences = page.getByRole('table', { name: 'What the scales say otherwise' });
    const first = differences.getByRole('row').nth(1);
    expect(await first.textContent()).toMatch(/^cyl\. 7702.*R-32.*5,000.*4,870.*−130.*not explained/s);

    await first.getByRole('link', { name: 'cyl. 7702' }).click();
    await page.getByRole('heading', { name: 'Statement, cylinder 7702' }).waitFor();
    await page.getByRole('heading', { name: 'Differences, and whose hands it was in' }).waitFor();
    await page.goBack();

    await page.getByRole('link', { name: 'Close November 2026' }).click();
    const signOff = page.getByRole('button', { name: 'Close November 2026 for good' });
    expect(await signOff.isDisabled()).toBe(true);
    await page.getByRole('button', { name: /^Settle cyl\. 7702/ }).click();
    const dialog = page.getByRole('dialog');
    await dialog.getByRole('radio', { name: /^Lost to the atmosphere/ }).check();
    await dialog.getByLabel('reason').fill('the valve was found open');
    await dialog.getByRole('button', { name: /^Post 130.g as lost to the atmosphere$/ }).click();
    await page.getByRole('heading', { name: '1 settled' }).waitFor();

    for (;;) {
      await atRest();
      const carry = page.getByRole('button', { name: /^Carry (?!by)/ }).first();
      if ((await page.getByText(/still waits? for a decision/).count()) === 0) break;
      await carry.click();
      await dialog.getByLabel('reason').fill('done next week');
      await dialog.getByRole('button', { name: /^Carry by/ }).click();
      await dialog.waitFor({ state: 'hidden' });
    }
    await signOff.click();
    await page.getByText('November 2026 is closed.').waitFor();
    const facts = page.getByRole('heading', { name: 'Signed off' }).locator('xpath=ancestor::section');
    expect(await facts.textContent()).toMatch(/seal[0-9a-f]{64}/);

    await page.reload();
    await page.getByRole('heading', { name: 'November 2026, closed' }).waitFor();
    expect(await page.getByRole('button', { name: /Settle|Carry|for good/ }).count()).toBe(0);
  });

  it('takes the tables of the books home as files, and reads in them what the screen says', async () => {
    const { page } = await browser.desk({ as: world.ledger.owner });
    await page.goto(`${app.url}/books?from=2026-11&to=2026-11&table=people`);
    const file = async (section: string) => {
      const region = page.getByRole('region', { name: section, exact: true });
      const [download] = await Promise.all([
        page.waitForEvent('download'),
        region.getByRole('link', { name: 'As CSV' }).click(),
      ]);
      return readFile(await download.path(), 'utf8');
    };
    expect(await file('What the scales say otherwise')).toContain('7702');
    expect((await file('In and out')).split(/\r\n/)[0]).toMatch(/mass/i);
    expect(await file('The books by')).toContain(world.ledger.owner.name);
  });

  it('reads every flow of the picture by touch on a phone', async () => {
    const { page, atRest } = await browser.phone({ as: world.ledger.owner });
    await page.goto(`${app.url}/books?from=2026-11&to=2026-11`);
    await atRest();
    const flow = page.getByRole('button', { name: /^less on the scale: / });
    await flow.locator('text').first().tap();
    expect(await flow.getAttribute('aria-pressed')).toBe('true');
    await page.getByRole('link', { name: 'In the log' }).waitFor();
  });
});

describe('A technician', () => {
  it('is not led to the books, and finds nothing there', async () => {
    const { page, expectRefusal } = await browser.desk({ as: world.technician });
    expectRefusal(403, '/api/v1/periods');
    await page.goto(`${app.url}/`);
    await page.getByRole('navigation', { name: 'Areas' }).getByRole('link', { name: 'Log' }).waitFor();
    expect(await page.getByRole('link', { name: 'Books' }).count()).toBe(0);
    await page.goto(`${app.url}/books`);
    await page.getByRole('alert').waitFor();
  });
});
