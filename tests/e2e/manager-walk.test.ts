import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import excel from 'exceljs';
import type { Locator, Page } from 'playwright-core';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { bench, FILES, runVerifier, unpack } from '../proof/packages.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { type FullWorld, startFullWorld } from '../support/browser-full-world.ts';
import { drawPdf } from '../support/draw-pdf.ts';
import { groupOf, inCylinder, inUnit, massOf, posted, readingOf } from '../support/ledger.ts';
import { readCsv } from '../support/read-csv.ts';
import { readPdf } from '../support/read-pdf.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-manager-'));
/** Where the papers of this walk are left for somebody to look at. */
const pictures = process.env.PICTURE_FOLDER;
let app: TestApp;
let browser: TestBrowser;
let worker: ExportWorker;
let world: FullWorld;

beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home }, parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  world = await startFullWorld(app);
  await takeOutOfService(world);
  worker = await startExportWorker({
    parts: app.parts,
    jobsUrl: app.database.urls.jobs,
    writeDocument,
    pollEverySeconds: 0.5,
  });
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await worker?.stop();
  await app?.close();
  rmSync(home, { recursive: true, force: true });
  rmSync(bench, { recursive: true, force: true });
});

/** A unit of 3,000 g, 6.6 lb, emptied in a job for good, and what was recovered sent to the reclaimer. */
async function takeOutOfService({ ledger, recovery }: FullWorld) {
  const { client, made, scale } = ledger;
  const unit = await ledger.unit('3000', '3000', { tag: '0187', name: 'dental lab, roof' }, 'factory');
  const jobId = uuid();
  await made('/jobs', {
    id: jobId,
    unitId: unit.id,
    kind: 'decommission',
    title: 'roof unit goes',
    openedAt: '2026-11-25T08:00:00Z',
  });
  await posted(client, {
    ...groupOf('recovery', '2026-11-25T10:00:00Z', {
      unitId: unit.id,
      jobId,
      readings: [
        readingOf(recovery.id, scale.id, 'before', 9000),
        readingOf(recovery.id, scale.id, 'after', 11_900, { id: uuid() }),
      ],
      entries: [massOf('2900', inUnit(unit.id), inCylinder(recovery.id))],
      statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      reason: 'past the limit of the cylinder, nearest at hand',
    }),
  });
  const parties = (await client.get('/parties?kind=reclaimer')).body.items;
  await posted(client, {
    ...groupOf('reclaim', '2026-11-28T10:00:00Z', {
      entries: [massOf('2900', inCylinder(recovery.id), { place: 'reclaimer', id: parties[0].id })],
    }),
  });
}

async function fileOf(page: Page, link: Locator): Promise<Buffer> {
  const [download] = await Promise.all([page.waitForEvent('download'), link.click()]);
  return readFileSync(await download.path());
}

/** On the page of the exports, which a link has led to: begun, waited for, taken home. */
async function makeFile(page: Page): Promise<Buffer> {
  await page.getByRole('heading', { name: 'Exports' }).waitFor();
  const links = page.getByRole('link', { name: /^Download / });
  await links.first().or(page.getByText('Nothing has been taken out yet')).waitFor();
  const hrefs = () => links.evaluateAll((found) => found.map((link) => link.getAttribute('href')));
  const before = await hrefs();
  await page.getByRole('button', { name: 'Make the file' }).click();
  // By its address: the tests' clock stands, so that newest first says nothing here.
  const made = async () => (await hrefs()).find((href) => !before.includes(href));
  await expect.poll(made, { timeout: 15_000 }).toBeTruthy();
  return fileOf(page, page.locator(`a[href="${await made()}"]`));
}

/** Opened as a reader does: its words, and every page drawn and not empty. */
async function textOf(name: string, bytes: Buffer): Promise<string> {
  const { pages } = await readPdf(bytes);
  const drawn = await drawPdf(bytes);
  expect(drawn).toHaveLength(pages.length);
  for (const [index, { ink, filled, png }] of drawn.entries()) {
    if (pictures) writeFileSync(path.join(pictures, `manager-${name}-${index + 1}.png`), png);
    expect(ink, `${name}, page ${index + 1}`).toBeGreaterThan(0.003);
    expect(filled, `${name}, page ${index + 1}`).toBeGreaterThan(0.15);
  }
  return pages.map(({ text }) => text).join('\n');
}

/** What the page of the books says of November, in the order in which the report says it. */
async function balancesAsReported(refrigerant: string): Promise<RegExp> {
  const { body } = await world.ledger.client.get(`/books?from=2026-11&to=2026-11&refrigerant=${refrigerant}`);
  const held = (kind: string, end: 'startG' | 'endG') => {
    const place = body.places.find((each: { kind: string }) => each.kind === kind);
    return `${Number(place?.[end] ?? 0).toLocaleString('en-GB')}\\sg`;
  };
  const facts = [
    ['In cylinders before', held('cylinder', 'startG')],
    ['In cylinders after', held('cylinder', 'endG')],
    ['In units before', held('unit', 'startG')],
    ['In units after', held('unit', 'endG')],
  ];
  return new RegExp([refrigerant, ...facts.flat()].join('\\s+'));
}

describe('The compliance manager', () => {
  it('goes from what contradicts to its entry, and sees a correction tied to what it corrects', async () => {
    const { page, atRest } = await browser.desk({ as: world.manager });
    await page.goto(`${app.url}/`);
    await page.getByRole('link', { name: /^Cylinder 7702: the reading and the book differ by 130/ }).click();
    await page.getByRole('heading', { name: 'Cylinder 7702' }).waitFor();
    await page.getByRole('link', { name: /^Cylinder 7702: the reading and the book differ by 130/ }).click();
    await page.getByRole('heading', { name: /^Entry / }).waitFor();
    expect(await page.getByRole('dialog').or(page.getByRole('complementary')).first().textContent()).toMatch(
      /130.*cyl\. 7702.*cylinder difference/s,
    );

    await page.goto(`${app.url}/log?kind=putBack`);
    await page.getByRole('row').filter({ hasText: 'unit 0355' }).getByRole('link').first().click();
    await page.getByRole('button', { name: 'Reverse and correct' }).click();
    await page.getByRole('textbox', { name: 'Why is it wrong?' }).fill('the scale was read wrongly');
    await page.getByRole('checkbox', { name: 'Enter it right at once' }).check();
    await page.getByRole('textbox', { name: 'Reading after' }).fill('16200');
    await page.getByRole('button', { name: /^Reverse 450.g, record 500.g$/ }).click();
    await page.getByText('Reversed and corrected.').waitFor();
    const tied = page.getByRole('region').filter({ has: page.getByRole('link', { name: 'Open' }) });
    expect(await tied.count()).toBeGreaterThanOrEqual(1);

    await page.goto(`${app.url}/log?kind=putBack`);
    const rows = page.getByRole('table', { name: 'Entries' }).getByRole('row');
    await rows.filter({ hasText: '500' }).first().waitFor();
    await atRest();
    const said = (await rows.allTextContents()).join('\n');
    expect(said).toMatch(/500.*unit 0355.*corrects \d/);
    expect(said).toMatch(/450.*unit 0355.*cyl\. R-09.*reverses \d/);
    expect(said).toMatch(/450.*cyl\. R-09.*unit 0355.*put back.*reversed by \d/);
  });

  it('takes the log out as filtered, the same entries as CSV and as XLSX', async () => {
    const { page, atRest } = await browser.desk({ as: world.manager });
    await page.goto(`${app.url}/log`);
    await page.getByRole('combobox', { name: 'refrigerant' }).selectOption('R-32');
    await page.getByRole('combobox', { name: 'why' }).selectOption('extraCharge');
    await atRest();
    const links = page.getByRole('table', { name: 'Entries' }).locator('tbody a');
    const numbers = (await links.allTextContents()).filter((text) => /^\d/.test(text));
    const csv = (await fileOf(page, page.getByRole('link', { name: 'Download as CSV' }))).toString('utf8');
    const { lines } = readCsv(csv);
    expect(lines.map((line) => line['no.'])).toEqual(numbers);
    expect(new Set(lines.map(({ refrigerant }) => refrigerant))).toEqual(new Set(['R-32']));
    expect(new Set(lines.map(({ late }) => late))).toEqual(new Set(['no']));

    await page.getByRole('link', { name: 'As XLSX' }).click();
    await page.getByText('As filtered: refrigerant: R-32, kind: extra charge').waitFor();
    const book = new excel.Workbook();
    await book.xlsx.load((await makeFile(page)) as unknown as ArrayBuffer);
    const sheet = book.worksheets[0];
    expect(sheet?.getRow(1).values).toContain('mass (g)');
    const read: unknown[] = [];
    sheet?.eachRow((row, number) => void (number > 1 && read.push(String(row.getCell(1).value))));
    expect(read).toEqual(numbers);
    expect(read.length).toBeGreaterThan(2);
  });

  it('takes the papers from the pages that they are about, and reads in them what the screens say', async () => {
    const { page } = await browser.desk({ as: world.manager });
    await page.goto(`${app.url}/units/${world.unit.id}`);
    await page.getByRole('link', { name: 'Log as PDF' }).click();
    const log = await textOf('unit-log', await makeFile(page));
    expect(log).toMatch(/Unit log/);
    expect(log).toMatch(/0412, back bedroom/);
    expect(log).toMatch(/cyl\. 7741\s+unit 0412/);

    await page.goto(`${app.url}/cylinders/${world.short.id}/statement?from=2026-11-01&to=2026-11-30`);
    await page.getByText('Not explained').first().waitFor();
    await page.getByRole('link', { name: 'As PDF' }).click();
    expect(await page.getByLabel('From').inputValue()).toBe('2026-11-01');
    const statement = await textOf('statement', await makeFile(page));
    expect(statement).toMatch(/7702/);
    expect(statement).toMatch(/4[,.]870/);
    expect(statement).toMatch(/Not explained/);

    await page.goto(`${app.url}/books?from=2026-11&to=2026-11`);
    await page.getByRole('link', { name: 'Period report' }).click();
    const report = await textOf('period', await makeFile(page));
    expect(report).toMatch(/November 2026/);
    expect(report).toMatch(/cylinder difference\s+130/);
    for (const refrigerant of ['R-32', 'R-410A']) expect(report).toMatch(await balancesAsReported(refrigerant));

    await page.goto(`${app.url}/books?from=2026-11&to=2026-11`);
    await page.getByRole('link', { name: 'Disposal report' }).click();
    const disposal = await textOf('disposal', await makeFile(page));
    expect(disposal).toMatch(/0187,\s+dental lab,\s+roof/);
    expect(disposal).toMatch(/2[,.]900/);
    expect(disposal).toMatch(/Clean Gas\s+R-410A\s+2[,.]900/);

    await page.goto(`${app.url}/books?from=2026-11&to=2026-11&table=jobs`);
    await page.getByRole('link', { name: 'Record as PDF roof unit goes' }).click();
    const job = await textOf('job', await makeFile(page));
    expect(job).toMatch(/roof unit goes, 0187/);
    expect(job).toMatch(/2[,.]900/);
  });

  it('hands over a package of a unit whose own verifier says intact, run with nothing but Node.js', async () => {
    const { page, atRest } = await browser.desk({ as: world.manager });
    await page.goto(`${app.url}/units/${world.unit.id}`);
    await page.getByRole('main').getByRole('link', { name: 'Proof', exact: true }).click();
    await atRest();
    const zip = path.join(home, 'package.zip');
    await page.getByRole('button', { name: 'Make the package' }).click();
    const row = page.getByRole('row').filter({ hasText: 'Proof package' });
    writeFileSync(zip, await fileOf(page, row.getByRole('link', { name: /^Download / })));
    const folder = await unpack(zip);
    for (const name of FILES) expect(readFileSync(path.join(folder, name)).length, name).toBeGreaterThan(0);
    const { about } = JSON.parse(readFileSync(path.join(folder, 'proof.json'), 'utf8'));
    expect(about).toMatchObject({ kind: 'unit', id: world.unit.id });
    const { status, lines } = await runVerifier(folder, [], path.join(folder, 'verify.mjs'));
    expect(lines[0]).toMatch(/intact/i);
    expect(lines[0]).not.toMatch(/not intact/i);
    expect(status).toBe(0);
    await textOf('summary', readFileSync(path.join(folder, 'summary.pdf')));
  });

  it.each([
    ['customer', () => `/sites`, 'Proof for the customer Wexcombe Mill'],
    ['period', () => '/books?from=2026-11&to=2026-11', 'Proof'],
  ])('is led from what it is about to the package of a %s', async (kind, from, name) => {
    const { page, atRest } = await browser.desk({ as: world.manager });
    await page.goto(app.url + from());
    await page.getByRole('main').getByRole('link', { name, exact: true }).first().click();
    await atRest();
    const [asked] = await Promise.all([
      page.waitForRequest((request) => request.method() === 'POST' && request.url().endsWith('/api/v1/exports')),
      page.getByRole('button', { name: 'Make the package' }).click(),
    ]);
    await page.getByRole('heading', { name: 'Exports' }).waitFor();
    expect(asked.postDataJSON().filters).toMatchObject(
      kind === 'customer' ? { customerId: world.ledger.customer.id } : { from: '2026-11-01', to: '2026-11-30' },
    );
  });
});

describe('Every list', () => {
  it.each([
    ['/units?search=0412', /\/exports\?what=units&filter\.search=0412/],
    ['/cylinders?refrigerant=R-32', /\/exports\?what=cylinders&filter\.refrigerant=R-32/],
    ['/sites?search=Mill', /\/exports\?what=sites&filter\.search=Mill/],
    ['/tools?kind=scale', /\/exports\?what=tools&filter\.kind=scale/],
    ['/parties?kind=supplier', /\/exports\?what=parties&filter\.kind=supplier/],
    ['/people', /\/exports\?what=people/],
  ])('leads to itself as CSV or XLSX, as filtered: %s', async (list, href) => {
    const { page, atRest } = await browser.desk({ as: world.manager });
    await page.goto(app.url + list);
    await atRest();
    const link = page.getByRole('link', { name: 'CSV or XLSX' });
    expect(await link.getAttribute('href')).toMatch(href);
    await link.click();
    const asked = page.waitForResponse((answer) => answer.url().endsWith('/api/v1/exports') && answer.status() === 201);
    await page.getByRole('button', { name: 'Make the file' }).click();
    await asked;
  });
});
