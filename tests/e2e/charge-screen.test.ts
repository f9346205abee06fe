import { AxeBuilder } from '@axe-core/playwright';
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp, type TestPerson } from '../support/app.ts';
import { type ledgerOf, SINCE, startLedger } from '../support/ledger.ts';
import { CHROMIUM } from '../support/pictures.ts';

let app: TestApp;
let browser: Browser;
let ledger: Awaited<ReturnType<typeof ledgerOf>>;
let technician: TestPerson;
let unitId: string;

beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  ledger = await startLedger(app, { jurisdiction: 'EU', locale: 'en-GB', gwpSet: 'EU-2024-573' });
  technician = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'M. Oduya' });
  const unit = await ledger.unit('1200', '1290', { refrigerant: 'R-32', tag: '0412' }, 'factory');
  unitId = unit.id;
  // The invented unit of the issue: R-32, 1,200 g factory charge, 7.5 m pre-charged, 20 g/m.
  await ledger.made(`/units/${unitId}/charge-bases`, {
    id: uuid(),
    validFrom: SINCE,
    basis: {
      refrigerant: 'R-32',
      factoryChargeG: 1200,
      precharge: { scope: 'system', lengthM: 7.5 },
      rate: { kind: 'flat', gPerM: 20 },
      limits: { maxLengthM: 25 },
      rounding: { toG: 1, direction: 'nearest' },
    },
    manual: { document: 'Installation manual', page: '14' },
  });
  await ledger.made(`/units/${unitId}/line-sets`, {
    id: uuid(),
    validFrom: SINCE,
    branches: [{ name: 'A', liquidOdMm: 6.35, gasOdMm: 9.52, lengthM: 12, riseM: 3 }],
  });
  browser = await chromium.launch(CHROMIUM);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

let context: BrowserContext;
let complaints: string[];
afterEach(async () => {
  await context?.close();
  expect(complaints).toEqual([]);
});

/** A phone. Whatever its console complains about, and whatever it asks of another site, fails the test. */
async function phone(options: { theme?: 'light' | 'dark'; width?: number } = {}): Promise<Page> {
  const width = options.width ?? 360;
  context = await browser.newContext({
    viewport: { width, height: 780 },
    colorScheme: options.theme ?? 'light',
    locale: 'en-GB',
    hasTouch: width < 600,
    isMobile: width < 600,
    reducedMotion: 'reduce',
  });
  complaints = [];
  const page = await context.newPage();
  page.on('console', (message) => {
    // That nobody is signed in is an answer; the browser logs every 401.
    if (message.type() === 'error' && !/401/.test(message.text())) complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(String(error)));
  page.on('request', (request) => {
    if (!request.url().startsWith(app.url) && !/^(data|blob):/.test(request.url())) complaints.push(request.url());
  });
  return page;
}

async function enterCharge(page: Page, runM: string): Promise<void> {
  await page.getByRole('combobox', { name: 'refrigerant' }).selectOption('R-32');
  await page.getByRole('textbox', { name: 'factory charge' }).fill('1200');
  await page.getByRole('combobox', { name: 'liquid pipe' }).selectOption('6.35');
  await page.getByRole('textbox', { name: 'pipe run, one way' }).fill(runM);
  await page.getByRole('textbox', { name: 'pre-charged by the factory' }).fill('7.5');
  await page.getByRole('textbox', { name: 'rate in the manual' }).fill('20');
}

describe('Charge without signing in', () => {
  it('gives 1,290 g and 90 g for 12.0 m on a small phone, and keeps it over a reload', async () => {
    const page = await phone();
    await page.goto(`${app.url}/charge`);
    await enterCharge(page, '12.0');
    await page.getByText('weigh in 90 g').waitFor();
    expect(await page.locator('output').textContent()).toMatch(/^1,290\s*g$/);

    await page.reload();
    await page.getByText('weigh in 90 g').waitFor();
    expect(await page.getByRole('textbox', { name: 'pipe run, one way' }).inputValue()).toBe('12.0');
  });
});

describe('Charge of a unit on record', () => {
  it('comes back to the place after sign-in, keeps the sheet, and goes on to the scale', async () => {
    const page = await phone();
    await page.goto(`${app.url}/units/${unitId}/charge`);
    await page.getByRole('textbox', { name: 'E-mail address' }).fill(technician.email);
    await page.getByLabel('Password', { exact: true }).fill('not the password');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByText('do not belong together').waitFor();
    await page.getByLabel('Password', { exact: true }).fill(TEST_PASSWORD);
    await page.getByRole('button', { name: 'Sign in' }).click();

    await page.getByRole('heading', { name: '0412, charge' }).waitFor();
    await page.getByText('weigh in 90 g').waitFor();
    await page.getByRole('button', { name: 'Start weighing in' }).click();
    await page.waitForURL(/\/weigh-in\?sheet=/);

    const sheetId = new URL(page.url()).searchParams.get('sheet');
    const sheets = (await ledger.client.get(`/units/${unitId}/charge-sheets`)).body.items;
    expect(sheets).toHaveLength(1);
    expect(sheets[0]).toMatchObject({
      id: sheetId,
      madeByName: 'M. Oduya',
      manual: { document: 'Installation manual', page: '14' },
      result: { extraG: 90, totalG: 1290, weighInG: 90 },
    });
    complaints = complaints.filter((text) => !/422|400/.test(text)); // the refused password
  });

  it('names the limit beside the run that breaks it, shows no figure and no button', async () => {
    const page = await phone();
    const person = await app.signIn(technician);
    await context.addCookies([cookieOf(person.cookie ?? '')]);
    await page.goto(`${app.url}/units/${unitId}/charge`);
    await page.getByText('weigh in 90 g').waitFor();
    await page.getByRole('textbox', { name: 'pipe run, one way' }).fill('26 m');
    await page.getByRole('alert').getByText('the manual allows 25 m').waitFor();
    expect(await page.locator('output').textContent()).toBe('–');
    expect(await page.getByRole('button', { name: 'Start weighing in' }).count()).toBe(0);
  });
});

describe('The charge screen and the pages around signing in', () => {
  const cases = ['/charge', '/sign-in', '/forgotten-password', '/preferences', '/more', '/no-such-page'].flatMap(
    (path) => (['light', 'dark'] as const).map((theme) => ({ path, theme })),
  );

  it.each(cases)('pass axe, fit 360 px and have targets of 48 px: $path in $theme', async ({ path, theme }) => {
    const page = await phone({ theme });
    await page.goto(app.url + path, { waitUntil: 'networkidle' });
    if (path === '/charge') {
      await enterCharge(page, '50');
      await page.getByText('Cylinder on the scale').click();
      await page.getByText('More figures').click();
      await page.getByText('Smallest room served', { exact: true }).click();
      await page.getByRole('textbox', { name: 'floor area' }).fill('3');
      await page.getByText('DANGER').waitFor();
    }
    const found = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze();
    expect(found.violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(' ')}`)).toEqual([]);
    expect(await sidewaysOverflow(page)).toBe(0);
    expect(await smallTargets(page)).toEqual([]);
    complaints = complaints.filter((text) => !(path === '/no-such-page' && /404/.test(text)));
  });
});

const sidewaysOverflow = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);

/** Controls lower than 48 px or narrower than 44; a radio or checkbox is as large as its label. */
function smallTargets(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const small: string[] = [];
    for (const element of document.querySelectorAll('button, a[href], input, select, summary')) {
      const isTick = element.matches('input[type=radio], input[type=checkbox]');
      const box = ((isTick && element.closest('label')) || element).getBoundingClientRect();
      const isShown = box.width > 1 && box.height > 1 && !element.classList.contains('sr-only');
      // A link inside a sentence is as high as its line (WCAG 2.2, 2.5.8, inline).
      const isInline = element.matches('p a');
      if (isShown && !isInline && (box.height < 47.5 || box.width < 44)) {
        small.push(`${element.outerHTML.slice(0, 120)} ${box.width}x${box.height}`);
      }
    }
    return small;
  });
}

function cookieOf(header: string) {
  const [name = '', value = ''] = header.split('=');
  return { name, value, url: app.url };
}
