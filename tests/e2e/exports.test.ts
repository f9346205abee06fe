import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import excel from 'exceljs';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { walkOf } from '../support/browser-walk.ts';
import { wordsIn } from '../support/browser-words.ts';
import { startWorld } from '../support/browser-world.ts';
import { readPdf } from '../support/read-pdf.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-exports-screen-'));
/** Where pictures of this walk are left for somebody to look at. */
const pictures = process.env.PICTURE_FOLDER;
let app: TestApp;
let browser: TestBrowser;
let worker: ExportWorker | undefined;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home }, parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await worker?.stop();
  await app?.close();
  rmSync(home, { recursive: true, force: true });
});
const work = async () => {
  worker = await startExportWorker({ parts: app.parts, jobsUrl: app.database.urls.jobs, writeDocument });
};
const rest = async () => {
  await worker?.stop();
  worker = undefined;
};

describe.each(['en-GB', 'es-ES'] as const)('Taking out what was recorded, in %s', (locale) => {
  const say = wordsIn(locale);

  it('begins on a list as filtered, waits, is cancelled, and ends in files that open', async () => {
    const world = await startWorld(app, locale);
    const { page } = await browser.desk({ locale });
    const walk = walkOf(page, say);
    const picture = async (name: string) => {
      if (pictures)
        await page.screenshot({ path: path.join(pictures, `exports-${name}-${locale}.png`), fullPage: true });
    };
    const row = (what: string) =>
      page
        .getByRole('row')
        .filter({ hasText: say(`exports.what.${what}`) })
        .first();
    const start = () => walk.button(say('exports.start')).click();
    const what = page.getByRole('combobox', { name: say('exports.what'), exact: true });
    const format = page.getByRole('combobox', { name: say('exports.format'), exact: true });
    await page.goto(`${app.url}/exports?what=units&filter.search=0412`);
    await walk.signIn(world.manager);
    await page.getByText(say('exports.none')).waitFor();
    expect(await what.inputValue()).toBe('units');
    await page.getByText(say('exports.filtered', { filters: `${say('exports.filter.search')}: 0412` })).waitFor();
    await picture('first');
    await format.selectOption('xlsx');
    await start();
    await row('units').getByText(say('exports.state.queued')).waitFor();
    await what.selectOption('entries');
    await start();
    await row('entries').getByRole('button').click();
    await row('entries').getByText(say('exports.state.cancelled')).waitFor();
    await picture('waiting');

    await work();
    try {
      await what.selectOption('periodReport');
      await start();
      const fileOf = async (of: string) => {
        const link = row(of).getByRole('link');
        await link.waitFor();
        const download = page.waitForEvent('download');
        await link.click();
        return readFileSync(await (await download).path());
      };
      const sheet = await fileOf('units');
      const book = new excel.Workbook();
      await book.xlsx.load(sheet as unknown as ArrayBuffer);
      expect(book.getWorksheet('units')?.getCell('A2').value).toBe('0412');
      const { pages } = await readPdf(await fileOf('periodReport'));
      expect(pages[0]?.text).toContain(say('exports.what.periodReport'));
      await picture('ready');
      const shown = await row('units').textContent();
      expect(shown).toContain(createHash('sha256').update(sheet).digest('hex').slice(0, 12));
    } finally {
      await rest();
    }
  });
});
