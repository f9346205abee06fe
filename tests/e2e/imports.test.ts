import { readFileSync } from 'node:fs';
import path from 'node:path';
import excel from 'exceljs';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { walkOf } from '../support/browser-walk.ts';
import { wordsIn } from '../support/browser-words.ts';
import { startWorld } from '../support/browser-world.ts';

/** Where pictures of this walk are left for somebody to look at. */
const pictures = process.env.PICTURE_FOLDER;
let app: TestApp;
let browser: TestBrowser;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

type Cells = readonly string[];
const HEADS: Cells = ['Tag', 'Kind', 'Refrigerant', 'Tare', 'Content', 'Re-test'];
const WRONG: readonly Cells[] = [
  HEADS,
  ['K1', 'refillable', 'R-32', '7.6', '9', '2028-05-01'],
  ['K2', 'bucket', 'R-32', '7.6', '', ''],
  ['K3', 'recovery', 'R-410A', 'heavy', '', '46508'],
];
const MENDED: readonly Cells[] = [
  ...WRONG.slice(0, 2),
  ['K2', 'recovery', 'R-32', '7.6', '', ''],
  ['K3', 'recovery', 'R-410A', '9.1', '', '2027-05-01'],
];

const FORMATS = {
  csv: async (rows: readonly Cells[]) => Buffer.from(rows.map((cells) => cells.join(';')).join('\r\n')),
  xlsx: async (rows: readonly Cells[]) => {
    const book = new excel.Workbook();
    const sheet = book.addWorksheet('stock');
    for (const cells of rows) sheet.addRow(cells.map((cell) => (/^\d+(\.\d+)?$/.test(cell) ? Number(cell) : cell)));
    return Buffer.from(await book.xlsx.writeBuffer());
  },
};

describe.each([
  ['csv', 'en-GB'],
  ['xlsx', 'es-ES'],
] as const)('Bringing in a table as %s, in %s', (format, locale) => {
  const say = wordsIn(locale);

  it('is told what is wrong, mended, brought in whole, and changes nothing when it comes again', async () => {
    const world = await startWorld(app, locale);
    const { page } = await browser.desk({ locale });
    const walk = walkOf(page, say);
    const picture = async (name: string) => {
      if (pictures)
        await page.screenshot({ path: path.join(pictures, `imports-${name}-${locale}.png`), fullPage: true });
    };
    const read = async (name: string, rows: readonly Cells[]) => {
      await page.getByRole('radio', { name: say('imports.kind.cylinders'), exact: true }).check();
      await page
        .getByLabel(say('imports.file'), { exact: true })
        .setInputFiles({ name: `${name}.${format}`, mimeType: '', buffer: await FORMATS[format](rows) });
      await walk.button(say('imports.read')).click();
      await page.getByText(`${name}.${format}`).waitFor();
      await page.getByLabel(say('imports.massUnit'), { exact: true }).selectOption('kg');
      await page.getByLabel(say('imports.decimal'), { exact: true }).selectOption('point');
    };
    await page.goto(`${app.url}/imports`);
    await walk.signIn(world.manager);
    const began = await world.ledger.sequence();
    await read('stock', WRONG);
    await picture('read');
    await walk.button(say('imports.check')).click();
    const wrong = page.getByText(say('imports.wrong_other', { count: 2 }));
    await wrong.waitFor();
    // The button was at the end of a long form: what it came to stands where the eye is, and nothing hangs over the edge.
    expect(await wrong.evaluate((element) => element.getBoundingClientRect().top)).toBeGreaterThan(0);
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
    await picture('wrong');
    const download = page.waitForEvent('download');
    await walk.link(say('imports.errorsFile')).click();
    const errors = readFileSync(await (await download).path(), 'utf8')
      .trim()
      .split('\r\n');
    expect(errors.map((line) => line.split(',').slice(0, 4))).toEqual([
      ['row', 'column', 'given', 'code'],
      ['3', 'Kind', 'bucket', 'importWord'],
      ['4', 'Tare', 'heavy', 'notANumber'],
      ['4', 'Re-test', '46508', 'importDateSerial'],
    ]);
    expect(await world.ledger.sequence()).toBe(began);

    await walk.button(say('imports.another')).click();
    await read('mended', MENDED);
    await walk.button(say('imports.check')).click();
    await page.getByText(say('imports.right_other', { count: 3 })).waitFor();
    await picture('right');
    await walk.button(say('imports.run_other', { count: 3 })).click();
    await page.getByText(say('imports.done_other', { count: 3 })).waitFor();
    await picture('done');
    // Two records a cylinder, an opening of two, and the record of the import.
    expect(await world.ledger.sequence()).toBe(began + 9);

    await walk.button(say('imports.another')).click();
    await read('mended', MENDED);
    await walk.button(say('imports.check')).click();
    await page.getByText(say('imports.already_other', { count: 3 })).waitFor();
    await page.getByText(say('imports.nothingNew')).waitFor();
    await picture('again');
    expect(await world.ledger.sequence()).toBe(began + 9);
    await page.goto(`${app.url}/cylinders`);
    await page.getByText('K3', { exact: true }).first().waitFor();
  });
});
