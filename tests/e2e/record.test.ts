import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp, type TestPerson } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, siteOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
let browser: TestBrowser;
let ledger: Ledger;
let technician: TestPerson;

beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  ledger = await startLedger(app, { jurisdiction: 'EU', locale: 'en-GB', gwpSet: 'EU-2024-573' });
  technician = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'M. Oduya' });
  browser = await startBrowser(app);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});

const next = (page: Page) => page.getByRole('button', { name: 'Next' }).click();
const post = (page: Page) => page.getByRole('button', { name: 'Post', exact: true }).click();
const heading = (page: Page, name: string) => page.getByRole('heading', { name }).waitFor();

/** Nothing scrolls sideways, everything to press is large enough, and no rule of WCAG 2.2 AA is broken. */
async function looksWell(page: Page): Promise<void> {
  await page.waitForLoadState('networkidle');
  const sideways = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(sideways).toBeLessThanOrEqual(0);
  const small = await page.evaluate(() =>
    [...document.querySelectorAll('main button, main a, main select, main input:not([type=radio], [type=checkbox])')]
      .map((element) => ({ element, box: element.getBoundingClientRect() }))
      .filter(({ element, box }) => box.width > 1 && box.height > 1 && !element.matches('p a') && box.height < 47.5)
      .map(({ element, box }) => `${element.outerHTML.slice(0, 100)} ${box.height}`),
  );
  expect(small).toEqual([]);
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa'])
    .analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' ')}`)).toEqual([]);
}

const BUSY = {
  status: 503,
  contentType: 'application/problem+json',
  body: JSON.stringify({ status: 503, code: 'busy', title: 'Busy', detail: 'Somebody else is posting.', errors: [] }),
};

describe('On a phone', () => {
  /** Source: the masses of case S13.2; the level by 40 CFR 82.156(a) Table 1 for R-410A below 200 lb: 0 in Hg. */
  it('a technician recovers a unit into two cylinders, sees what would be posted, and posts it once', async () => {
    const unit = await ledger.unit('1340', '1340');
    const one = await ledger.cylinder(null, { kind: 'recovery' });
    const two = await ledger.cylinder('100', { kind: 'recovery' });
    const { page } = await browser.phone({ as: technician, locale: 'en-GB' });
    await page.goto(`${app.url}/units/${unit.id}`);
    await page.getByRole('link', { name: 'Record something else' }).click();
    await heading(page, `Record for unit ${unit.tag}`);
    await looksWell(page);
    await page.getByRole('link', { name: /^Recovery/ }).click();
    await heading(page, 'Which unit?');
    await page.getByText('Never pump down a unit that leaks').waitFor();
    await looksWell(page);
    await next(page);

    await heading(page, 'Into which cylinders?');
    await next(page);
    await page.getByText('Choose the cylinder.').waitFor();
    expect(await page.getByText('Enter what the scale shows.').count()).toBe(2);
    await page.getByLabel('Cylinder on the scale').selectOption(one.id);
    await page.getByRole('textbox', { name: 'On the scale before' }).fill('7700');
    await page.getByRole('textbox', { name: 'On the scale after' }).fill('8600');
    await page.getByText('900 g came in').waitFor();
    await page.getByRole('button', { name: 'Another cylinder' }).click();
    const second = page.getByRole('region', { name: 'Cylinder 2' });
    await second.getByLabel('Cylinder on the scale').selectOption(two.id);
    await second.getByRole('textbox', { name: 'On the scale before' }).fill('8180');
    await second.getByRole('textbox', { name: 'On the scale after' }).fill('7800');
    await next(page);
    await second.getByText('8180 g, but this cylinder was filled').waitFor();
    await second.getByRole('textbox', { name: 'On the scale before' }).fill('7800');
    await second.getByRole('textbox', { name: 'On the scale after' }).fill('8180');
    await looksWell(page);
    await next(page);

    await heading(page, 'Is the recovery completed?');
    await page.getByRole('radio', { name: /^Completed/ }).check();
    await next(page);
    await heading(page, 'To which level was it evacuated?');
    await page.getByText('high-pressure, 40 CFR 82.156(a), Table 1').waitFor();
    await page.getByText('0 in Hg vacuum').waitFor();
    await page.getByLabel('Level reached').fill('4');
    await looksWell(page);
    await next(page);
    await heading(page, 'When was it done?');
    await page.reload();
    await heading(page, 'Which unit?');
    for (const title of ['Into which', 'completed', 'level', 'When']) {
      await next(page);
      await heading(page, title);
    }
    await next(page);

    await heading(page, 'What will be posted');
    const entries = page.getByRole('region', { name: 'Entries' });
    await entries.getByText('atmosphere, inferred').waitFor();
    expect(await entries.getByRole('listitem').allInnerTexts()).toEqual(
      expect.arrayContaining([
        expect.stringContaining('900'),
        expect.stringContaining('380'),
        expect.stringContaining('60'),
      ]),
    );
    await page.getByText('1,340 g before, 0 g after').waitFor();
    await looksWell(page);
    expect(await ledger.bookG(unit.id)).toBe(1340);
    await post(page);
    await page.getByText('Posted. It stands in the log.').waitFor();
    expect([await ledger.bookG(unit.id), await ledger.contentG(one.id), await ledger.contentG(two.id)]).toEqual([
      0, 900, 480,
    ]);
  });

  /** Source: case S17.2. */
  it('a refill of a non-refillable cylinder is stopped while it is planned, and recorded with its reason once done', async () => {
    const giver = await ledger.cylinder('9500');
    const taker = await ledger.cylinder(null, { kind: 'nonRefillable' });
    const { page } = await browser.phone({ as: technician, theme: 'dark' });
    await page.goto(`${app.url}/record/transfer?cylinder=${giver.id}`);
    const from = page.getByRole('region', { name: 'From', exact: true });
    const into = page.getByRole('region', { name: 'Into', exact: true });
    await from.getByRole('textbox', { name: 'On the scale before' }).fill('17200');
    await from.getByRole('textbox', { name: 'On the scale after' }).fill('16800');
    await into.getByLabel('Cylinder on the scale').selectOption(taker.id);
    await into.getByText(`Cylinder ${taker.tag} is non-refillable`).waitFor();
    await into.getByRole('textbox', { name: 'On the scale before' }).fill('7700');
    await into.getByRole('textbox', { name: 'On the scale after' }).fill('8100');
    await next(page);
    await page.getByRole('alert').getByText('Do not do it: choose another cylinder.').waitFor();
    await looksWell(page);
    await page.getByRole('radio', { name: 'It has happened' }).check();
    await page.getByLabel('Why, for the record').fill('no recovery cylinder on the van');
    await next(page);
    await next(page);
    await heading(page, 'What will be posted');
    await page.getByRole('region', { name: 'This comes before the manager' }).waitFor();
    await looksWell(page);
    await post(page);
    await page.getByText('Posted. It stands in the log.').waitFor();
    expect(await ledger.contentG(taker.id)).toBe(400);
  });
});

describe('On a desk', () => {
  /** Source: case S6.1: 300 g on a book at full charge, said to be full, is a loss of 300 g before. */
  it('one sheet shows the beams beside the questions, asks its one question, and changes with the answer', async () => {
    const unit = await ledger.unit('1290', '1290');
    const cylinder = await ledger.cylinder('9500');
    const { page } = await browser.desk({ as: ledger.owner });
    await page.goto(`${app.url}/record/refill?unit=${unit.id}`);
    await page.getByLabel('Cylinder on the scale').selectOption(cylinder.id);
    await page.getByRole('textbox', { name: 'On the scale before' }).fill('17200');
    await page.getByRole('textbox', { name: 'On the scale after' }).fill('16900');
    const review = page.getByRole('region', { name: 'What will be posted' });
    await review.getByRole('heading', { name: 'How full is the unit now?' }).waitFor();
    await review.getByRole('radio', { name: /^More than full/ }).check();
    await review.getByText('1,290 g before, 1,590 g after').waitFor();
    await review.getByRole('radio', { name: /^Full/ }).check();
    await review.getByText('1,290 g before, 1,290 g after').waitFor();
    await looksWell(page);
    await post(page);
    await page.getByText('Posted. It stands in the log.').waitFor();
    expect([await ledger.bookG(unit.id), await ledger.contentG(cylinder.id)]).toEqual([1290, 9200]);
  });

  /** Source: case S16.1: the charge travels behind its valves, no mass moves, the site is dated. */
  it('a relocation shows site, customer and beam before and after, and the unit stands there once it is posted', async () => {
    const unit = await ledger.unit('1340', '1340');
    const bakery = await ledger.made('/customers', { id: uuid(), name: 'Harbour Bakery' });
    const quay = await ledger.made('/sites', { ...siteOf(bakery.id), name: 'Quay 4', jurisdiction: 'EU' });
    const { page, expectRefusal } = await browser.desk({ as: technician, locale: 'en-GB' });
    await page.goto(`${app.url}/record/relocation?unit=${unit.id}`);
    await page.getByText('It stands at Mill Lane, Wexcombe Mill.').waitFor();
    await post(page);
    await page.getByText('Choose the site.').waitFor();
    await page.getByRole('radio', { name: /^Recovered first/ }).check();
    await page.getByText('record the recovery first, then the move').waitFor();
    await page.getByRole('radio', { name: /^Behind the service valves/ }).check();
    await page.getByLabel('New site').selectOption({ label: 'Quay 4, Harbour Bakery' });
    await page.getByLabel('Number').fill('W 12');
    const review = page.getByRole('region', { name: 'What will be posted' });
    const register = review.getByRole('region', { name: 'In the register' });
    await register.getByText('Quay 4').waitFor();
    expect(await register.getByRole('definition').allTextContents()).toEqual([
      'Mill Lane →to Quay 4',
      'Wexcombe Mill →to Harbour Bakery',
    ]);
    await review.getByText('Other rules hold at the new site: EU.').waitFor();
    await review.getByText('1,340 g before, 1,340 g after').waitFor();
    await review.getByText('No mass moves.').waitFor();
    await looksWell(page);
    expect((await ledger.client.get(`/units/${unit.id}`)).body.siteId).toBe(ledger.site.id);

    // The group is refused after the site was recorded: the next try records nothing twice.
    expectRefusal(503, '/entry-groups');
    await page.route('**/api/v1/entry-groups', (route) => route.fulfill(BUSY), { times: 1 });
    await post(page);
    await page.getByText('Somebody else is posting.').waitFor();
    await post(page);
    await page.getByText('Posted. It stands in the log.').waitFor();
    const { body } = await ledger.client.get(`/units/${unit.id}`);
    expect(body).toMatchObject({ siteId: quay.id, version: 2, book: { massG: 1340 } });
    expect((await ledger.client.get(`/units/${unit.id}/sites`)).body.items).toHaveLength(2);
    await page.getByRole('link', { name: 'Enter the new line set' }).waitFor();
  });

  /** Source: 40 CFR 82.152 "Retrofit"; case S16.2: R-22 recovered, then R-407C with a full charge of 1,400 g. */
  it('a retrofit waits until the old refrigerant is out, then dates the new one with its full charge', async () => {
    const unit = await ledger.unit('1450', '1450', { refrigerant: 'R-22' });
    const recovery = await ledger.cylinder(null, { kind: 'recovery', refrigerant: 'R-22' });
    const { page } = await browser.desk({ as: technician, locale: 'en-GB' });
    await page.goto(`${app.url}/record/retrofit?unit=${unit.id}`);
    await page.getByText('Its book does not say that R-22 is out').waitFor();
    await page.getByLabel('New refrigerant', { exact: true }).selectOption('R-407C');
    await page.getByRole('textbox', { name: 'Full charge of the new refrigerant' }).fill('1400');
    await page.getByRole('button', { name: 'Record it' }).click();
    await page.getByText('Its book is not empty').waitFor();
    await looksWell(page);
    await ledger.post({
      ...groupOf('recovery', '2026-11-30T09:00:00Z', {
        unitId: unit.id,
        entries: [massOf('1450', inUnit(unit.id), inCylinder(recovery.id), { refrigerant: 'R-22' })],
        statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      }),
    });
    await page.reload();
    await page.getByText('its book holds no R-22 any more').waitFor();
    const register = page.getByRole('region', { name: 'In the register' });
    await register.getByText('R-407C').waitFor();
    await register.getByText('1,400 g').waitFor();
    await looksWell(page);
    expect((await ledger.client.get(`/units/${unit.id}`)).body.refrigerant).toBe('R-22');
    await page.getByRole('button', { name: 'Record it' }).click();
    await page.getByText('Recorded. The unit shows it from now on.').waitFor();
    expect((await ledger.client.get(`/units/${unit.id}`)).body).toMatchObject({
      refrigerant: 'R-407C',
      fullCharge: { massG: 1400, refrigerant: 'R-407C', reason: 'Retrofit from R-22 to R-407C' },
      book: { known: true, massG: 0 },
    });
    await page.getByRole('link', { name: 'Weigh in the full charge' }).click();
    await page.waitForURL(`**/units/${unit.id}/weigh-in**`);
  });

  /** Source: case S19.3: label 11,340 g, invoice 11,260 g. */
  it('an invoice that differs withdraws the pick-up and posts it as invoiced, after showing both', async () => {
    const cylinder = await ledger.cylinder(null);
    await ledger.post({
      groupId: uuid(),
      schema: 1,
      kind: 'purchase',
      occurredAt: '2026-11-28T10:00:00Z',
      entries: [
        {
          id: uuid(),
          refrigerant: 'R-410A',
          mass: { value: '11340', unit: 'g' },
          from: { place: 'supplier', id: ledger.supplier.id },
          to: { place: 'cylinder', id: cylinder.id },
          howKnown: 'label',
        },
      ],
    });
    const { page } = await browser.desk({ as: ledger.owner });
    await page.goto(`${app.url}/record/invoice?cylinder=${cylinder.id}`);
    await page.getByRole('radio', { name: /11,340 g, Fallow Gas/ }).check();
    await page.getByLabel('Number').fill('20871');
    await page.getByRole('textbox', { name: 'Mass on the invoice' }).fill('11260');
    await page.getByText('The invoice differs from the pick-up').waitFor();
    const entries = page.getByRole('region', { name: 'Entries' });
    await entries.getByText('withdrawn').waitFor();
    expect(await entries.getByRole('listitem').count()).toBe(2);
    await looksWell(page);
    await post(page);
    await page.getByText('Posted. It stands in the log.').waitFor();
    expect(await ledger.contentG(cylinder.id)).toBe(11_260);
  });

  it('a refusal of the server stands at its blank and what was typed stays', async () => {
    const unit = await ledger.unit('1290', '1290');
    const { page, expectRefusal } = await browser.desk({ as: ledger.owner });
    expectRefusal(422, '/entry-groups/preview');
    await page.goto(`${app.url}/record/foundEmpty?unit=${unit.id}`);
    await page.getByRole('radio', { name: /^Flat/ }).check();
    await page.getByLabel('Day and time').fill('2027-01-01T10:00');
    await page.locator('[aria-invalid=true]').waitFor();
    expect(await page.getByLabel('Day and time').inputValue()).toBe('2027-01-01T10:00');
    await page.getByLabel('Day and time').fill('2026-11-29T10:00');
    await page.getByText('1,290 g before, 0 g after').waitFor();
  });
});
