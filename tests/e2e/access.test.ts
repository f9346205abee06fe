import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { walkOf } from '../support/browser-walk.ts';
import { wordsIn } from '../support/browser-words.ts';
import { startWorld, type World } from '../support/browser-world.ts';
import { siteOf } from '../support/ledger.ts';

const say = wordsIn('en-GB');
let app: TestApp;
let browser: TestBrowser;
let world: World;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  world = await startWorld(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

describe('Signing in', () => {
  it('says the same of an unknown address and a wrong password, keeps the address, and leads back to the place', async () => {
    const { page, expectRefusal } = await browser.phone();
    const walk = walkOf(page, say);
    expectRefusal(401, '/api/v1/session');
    await page.goto(`${app.url}/units/${world.unit.id}`);
    const refused = page.getByRole('alert').getByText('do not belong together');
    for (const [email, password] of [
      ['nobody@example.test', TEST_PASSWORD],
      [world.technician.email, 'not the password'],
    ] as const) {
      await walk.signIn({ email }, password);
      await refused.waitFor();
      expect(await walk.box(say('session.email')).inputValue()).toBe(email);
    }
    await walk.signIn(world.technician);
    await walk.heading(say('units.unit.title', { tag: '0412' })).waitFor();
  });

  it('ends with signing out: the way back into a page asks again', async () => {
    const { page } = await browser.phone({ as: await app.addPerson(['technician'], { firmId: world.ledger.firm.id }) });
    const walk = walkOf(page, say);
    await page.goto(`${app.url}/more`);
    await walk.button(say('session.signOut')).click();
    await walk.heading(say('session.signIn.title')).waitFor();
    await page.goto(`${app.url}/units`);
    await walk.heading(say('session.signIn.title')).waitFor();
  });
});

describe('A reader', () => {
  it('sees the units and entries of their own site, and nothing of another, nor any way to write', async () => {
    const { ledger } = world;
    const other = await ledger.made('/sites', { ...siteOf(ledger.customer.id), name: 'Old Maltings' });
    const hidden = await ledger.unit('900', '900', { tag: '0999', siteId: other.id, refrigerant: 'R-32' }, 'factory');
    const reader = await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [ledger.site.id] });
    const { page, atRest, expectRefusal } = await browser.desk({ as: reader });

    await page.goto(`${app.url}/units`);
    await atRest();
    const main = page.getByRole('main');
    expect(await main.getByText('0412').first().isVisible()).toBe(true);
    expect(await main.getByText('0999').count()).toBe(0);
    expect(await main.getByRole('link', { name: say('units.register') }).count()).toBe(0);

    await page.goto(`${app.url}/log`);
    await atRest();
    const log = await main.textContent();
    expect(log).toContain('0412');
    expect(log).not.toContain('0999');

    await page.goto(`${app.url}/units/${world.unit.id}`);
    await atRest();
    for (const name of ['units.charge', 'units.weighIn', 'units.edit', 'units.lineSet.record'])
      expect([name, await main.getByRole('link', { name: say(name), exact: true }).count()]).toEqual([name, 0]);

    expectRefusal(404, `/units/${hidden.id}`);
    await page.goto(`${app.url}/units/${hidden.id}`);
    await page.getByRole('heading', { name: say('frame.problem.notFound.title') }).waitFor();
  });

  it('of another firm sees nothing here', async () => {
    const { owner } = await app.addFirm();
    const { page, expectRefusal } = await browser.desk({ as: owner });
    expectRefusal(404, `/units/${world.unit.id}`);
    await page.goto(`${app.url}/units/${world.unit.id}`);
    await page.getByRole('heading', { name: say('frame.problem.notFound.title') }).waitFor();
  });
});
