import { readFileSync } from 'node:fs';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { type Connection, connect, refusalOf } from '../database/test-firm.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { walkOf } from '../support/browser-walk.ts';
import { wordsIn } from '../support/browser-words.ts';
import { CONTENT_G, startWorld, type World } from '../support/browser-world.ts';
import { linesByName } from '../support/read-csv.ts';

let app: TestApp;
let browser: TestBrowser;
let database: Connection;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  database = connect(app.database);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await database?.close();
  await app?.close();
});

const MICROGRAMS = 1_000_000;
const HOSE_G = 28;

describe.each(['en-GB', 'es-ES'] as const)('The main job in %s', (locale) => {
  const say = wordsIn(locale);
  const figure = (value: number) => new Intl.NumberFormat(locale).format(value);
  const grams = (massG: number) => `${figure(massG)} g`;
  let world: World;
  beforeAll(async () => {
    world = await startWorld(app, locale);
  });

  it('is done by a technician on a 360 px phone: sign in, unit, charge, sheet, scale, posted', async () => {
    const { page } = await browser.phone({ locale });
    const walk = walkOf(page, say);
    await page.goto(app.url);
    await walk.signIn(world.technician);
    await walk.heading(say('today.title')).waitFor();
    await walk.openUnit('0412');
    await page
      .getByRole('main')
      .getByRole('link', { name: say('units.charge'), exact: true })
      .click();

    const run = walk.box(say('chargeScreen.run'));
    await page.getByRole('combobox', { name: say('chargeScreen.liquidPipe') }).selectOption('6.35');
    const total = page.locator('output');
    const weighIn = (massG: number) => page.getByText(say('chargeScreen.weighIn', { mass: grams(massG) }));
    for (const short of ['7.5', '5']) {
      await run.fill(`${short} m`);
      await page.getByText(say('chargeScreen.nothing')).waitFor();
      expect(plain(await total.textContent())).toBe(grams(1200));
    }
    await run.fill('25.1 m');
    const error = page.getByRole('alert').filter({ hasText: /25[.,]1/ });
    await error.waitFor();
    expect(plain(await error.textContent())).toMatch(/25 m/);
    expect(await total.textContent()).toBe('–');
    expect(await walk.button(say('chargeScreen.unit.start')).count()).toBe(0);

    await run.fill('12.0 m');
    await weighIn(90).waitFor();
    expect(plain(await total.textContent())).toBe(grams(1290));
    await walk.button(say('chargeScreen.unit.start')).click();

    await walk.startOnScale('7741', '17105');
    await page.getByText(say('weighIn.charging.toGo', { mass: grams(90), stop: grams(17_015) })).waitFor();
    await walk.endOnScale('17015');
    await page.getByText(say('weighIn.review.exact', { target: grams(90) })).waitFor();
    await walk.button(say('weighIn.review.post', { mass: grams(90) })).click();
    await page.getByRole('status').getByText(grams(90)).waitFor();
  });

  it('is found by the compliance manager on a desk: in the log, with its sheet, and as CSV', async () => {
    const { page } = await browser.desk({ locale });
    const walk = walkOf(page, say);
    await page.goto(`${app.url}/log`);
    await walk.signIn(world.manager);
    const row = page.getByRole('row').filter({ hasText: '0412' }).filter({ hasText: 'M. Oduya' }).first();
    await row.waitFor();
    expect(plain(await row.textContent())).toContain('90');
    await row.getByRole('link').first().click();
    const sheet = page.getByRole('complementary').or(page.getByRole('dialog')).first();
    await sheet.getByText(grams(90)).first().waitFor();
    const text = plain(await sheet.textContent());
    const readings = `${figure(17_105)} → ${figure(17_015)} g`;
    for (const part of ['7741', '0412', 'M. Oduya', readings, grams(HOSE_G)]) expect(text).toContain(part);
    expect(await row.isVisible()).toBe(true); // the list stays in view

    const download = page.waitForEvent('download');
    await page.getByRole('link', { name: say('log.export') }).click();
    const csv = readFileSync(await (await download).path(), 'utf8');
    const charged = { kind: 'extraCharge', refrigerant: 'R-32', from: '7741', recordedBy: 'M. Oduya', reason: '' };
    expect(linesByName(csv).filter(({ kind }) => kind === 'extraCharge')).toMatchObject([
      { ...charged, massG: '28', to: 'atmosphere (hose)', howKnown: 'estimated' },
      { ...charged, massG: '90', to: '0412', howKnown: 'weighed', typedValue: '90', typedUnit: 'g' },
    ]);
  });

  it('stands in PostgreSQL as it was done, read by plain SQL as the application’s role', async () => {
    const { firm, owner } = world.ledger;
    await database.as({ firmId: firm.id, personId: owner.id }, async (query) => {
      const [who] = await query('select current_user as role');
      expect(who).toEqual({ role: 'tarewright_app' });
      const sheets = await query('select unit_id, result from charge_sheet');
      expect(sheets).toHaveLength(1);
      expect(sheets[0]).toMatchObject({
        unit_id: world.unit.id,
        result: { extraG: 90, totalG: 1290, weighInG: 90, recoverG: 0 },
      });
      const entries = await query(
        `select mass_micrograms, from_place, from_id, to_place, to_id, how_known, recorded_by from entry
          where group_id = (select id from entry_group where kind = 'extraCharge') order by sequence`,
      );
      const posted = { from_place: 'cylinder', from_id: world.cylinder.id, recorded_by: world.technician.id };
      expect(entries).toMatchObject([
        { ...posted, mass_micrograms: String(90 * MICROGRAMS), to_place: 'unit', to_id: world.unit.id },
        { ...posted, mass_micrograms: String(HOSE_G * MICROGRAMS), to_place: 'atmosphere', how_known: 'estimated' },
      ]);
      const balanceOf = async (id: string) =>
        (await query<{ mass_micrograms: string }>('select mass_micrograms from balance where place_id = $1', [id]))[0]
          ?.mass_micrograms;
      expect(await balanceOf(world.cylinder.id)).toBe(String((CONTENT_G - 90 - HOSE_G) * MICROGRAMS));
      expect(await balanceOf(world.unit.id)).toBe(String(1290 * MICROGRAMS));
    });
  });

  it('cannot be added to by a plain INSERT that skips the posting function', async () => {
    const { firm, owner } = world.ledger;
    const insert = (table: string) =>
      refusalOf(
        database.as({ firmId: firm.id, personId: owner.id }, (query) =>
          query(`insert into ${table} select * from ${table} limit 1`),
        ),
      );
    // 42501: insufficient privilege.
    for (const table of ['entry', 'entry_group', 'journal_record', 'balance', 'reading'])
      expect([table, (await insert(table)).code]).toEqual([table, '42501']);
  });
});

/** No-break spaces as plain ones. */
const plain = (text: string | null): string => (text ?? '').replace(/\s/g, ' ').trim();
