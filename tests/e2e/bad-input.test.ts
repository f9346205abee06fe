import type { Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { type FullWorld, startFullWorld } from '../support/browser-full-world.ts';

let app: TestApp;
let browser: TestBrowser;
let world: FullWorld;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  world = await startFullWorld(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

interface BadForm {
  form: string;
  path: (world: FullWorld) => string;
  /** The button that opens it, where it is not the page itself. */
  opens?: string;
  /** Field and what is typed into it. */
  types: readonly (readonly [label: string, text: string])[];
  act: RegExp;
  /** What has to be said: the value that was given and the one that is allowed. */
  says: readonly RegExp[];
  signedOut?: true;
  /** Passwords are typed again. */
  forgets?: true;
}

const unit = (page: string) => (w: FullWorld) => `/units/${w.unit.id}/${page}`;
const cylinder = (w: FullWorld) => `/cylinders/${w.short.id}`;

const FORMS: readonly BadForm[] = [
  {
    form: 'a new cylinder',
    path: () => '/cylinders/new',
    types: [
      ['number on its collar', '8001'],
      ['tare', '0'],
      ['water capacity', 'about 12'],
    ],
    act: /^Register/,
    says: [/“about 12” is not a value/, /0 g is below the least, 0.001 g/],
  },
  {
    form: 'the reading of a cylinder',
    path: cylinder,
    opens: 'Weigh it',
    types: [['the scale shows', '12 litres']],
    act: /^Record/,
    says: [/“litres” is not a unit.*g, kg/],
  },
  {
    form: 'a purchase',
    path: cylinder,
    opens: 'Buy into it',
    types: [['mass bought', '-3']],
    act: /^Record/,
    says: [/-3 is below zero/],
  },
  {
    form: 'a revised tare',
    path: cylinder,
    opens: 'Revise the tare',
    types: [
      ['revised tare', '7 stone'],
      ['Reason', 'first gross less the invoice'],
    ],
    act: /^Revise the tare/,
    says: [/“stone” is not a unit.*g, kg/],
  },
  {
    form: 'the facts of a cylinder',
    path: cylinder,
    opens: 'Change its facts',
    types: [
      ['service pressure', '90000 bar'],
      ['batch', 'B-17'],
    ],
    act: /^Record the change/,
    says: [/90,?000 bar is above the most, 300 bar/],
  },
  {
    form: 'a new unit',
    path: () => '/units/new',
    types: [
      ['tag', '0500'],
      ['full charge', '20 t'],
      ['mass in it', '0'],
    ],
    act: /^Register the unit/,
    says: [/20,000,000 g is above the most, 10,000,000 g/, /0 g is below the least, 0.001 g/],
  },
  {
    form: 'a changed unit',
    path: unit('edit'),
    types: [
      ['name', 'back bedroom, east'],
      ['design pressure, high side', '-4'],
    ],
    act: /^Save the changes/,
    says: [/-4 is below zero/],
  },
  {
    form: 'a full charge',
    path: unit('full-charge'),
    types: [
      ['full charge', '20000 kg'],
      ['why', 'name plate'],
    ],
    act: /^Set the full charge/,
    says: [/20,000,000 g is above the most, 10,000,000 g/],
  },
  {
    form: 'a charge basis',
    path: unit('charge-basis'),
    types: [
      ['rate', '200 kg/m'],
      ['longest line', '25 parsec'],
      ['page', '15'],
    ],
    act: /^Record the charge basis/,
    says: [/200,000 g\/m is above the most, 100,000 g\/m/, /“parsec” is not a unit.*m, ft/],
  },
  {
    form: 'a line set',
    path: unit('line-set'),
    types: [
      ['length, one way', '12 km'],
      ['bends', '2.5'],
    ],
    act: /^Record the line set/,
    says: [/“km” is not a unit.*m, ft/, /2\.5|whole/],
  },
  {
    form: 'a new site',
    path: () => '/sites/new',
    types: [
      ['site', 'Old Maltings'],
      ['altitude', '90000 m'],
    ],
    act: /^Add the site/,
    says: [/90,000 m is above the most, [\d,]+ m/],
  },
  {
    form: 'a changed site',
    path: (w) => `/sites/${w.ledger.site.id}/edit`,
    types: [['altitude', 'high']],
    act: /^Save the changes/,
    says: [/“high” is not a value/],
  },
  {
    form: 'an invitation',
    path: () => '/people',
    opens: 'Invite somebody',
    types: [
      ['name', 'A. Tansy'],
      ['e-mail address', 'a.tansy(at)example'],
    ],
    act: /^Mail the invitation/,
    says: [/e-mail address/],
  },
  {
    form: 'a scale',
    path: () => '/tools',
    opens: 'Add a tool',
    types: [
      ['name', 'Scale 2'],
      ['step of the display', '0'],
    ],
    act: /^Add it/,
    says: [/0 (g )?is (below|not)/],
  },
  {
    form: 'signing in',
    path: () => '/sign-in',
    signedOut: true,
    types: [
      ['E-mail address', 'm.oduya'],
      ['Password', 'some words'],
    ],
    act: /^Sign in/,
    says: [/not an e-mail address/],
    forgets: true,
  },
  {
    form: 'a forgotten password',
    path: () => '/forgotten-password',
    signedOut: true,
    types: [['E-mail address', 'm.oduya@']],
    act: /^Mail me the link/,
    says: [/not an e-mail address/],
    forgets: true,
  },
  {
    form: 'a changed password',
    path: () => '/preferences',
    opens: 'Change the password',
    types: [
      ['Password now', 'correct horse battery'],
      ['New password', 'short'],
    ],
    act: /^Change it/,
    says: [/too short/],
    forgets: true,
  },
];

describe('Bad input', () => {
  it.each(FORMS)('is named with its limit beside the field, and nothing typed is lost: $form', async (bad) => {
    const { page, atRest } = await browser.phone(bad.signedOut ? {} : { as: world.ledger.owner });
    await page.goto(app.url + bad.path(world));
    await atRest();
    const before = await world.ledger.sequence();
    const form = await opened(page, bad);
    for (const [label, text] of bad.types) await field(form, label).fill(text);
    const act = form.getByRole('button', { name: bad.act });
    await ((await act.count()) > 0 ? act : page.getByRole('button', { name: bad.act })).last().click();
    await form.getByRole('alert').first().waitFor();
    const said = (await form.getByRole('alert').allTextContents()).join(' ').replace(/\s/g, ' ');
    for (const words of bad.says) expect(said).toMatch(words);
    for (const [label, text] of bad.types)
      expect([label, await field(form, label).inputValue()]).toEqual([label, text]);
    expect(await world.ledger.sequence()).toBe(before);
    if (bad.forgets) return;
    await page.reload();
    await atRest();
    const again = await opened(page, bad);
    for (const [label, text] of bad.types)
      expect([label, await field(again, label).inputValue()]).toEqual([label, text]);
  });
});

/** The dialog that the button opens, or the page. */
async function opened(page: Page, { opens }: BadForm) {
  if (!opens) return page.getByRole('main');
  await page
    .getByRole('button', { name: opens, exact: true })
    .or(page.locator('summary', { hasText: opens }))
    .last()
    .click();
  return page.getByRole('dialog').or(page.getByRole('main')).first();
}

const field = (form: ReturnType<Page['getByRole']>, label: string) => form.getByLabel(label, { exact: true });
