import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { type History, startHistory } from '../proof/history.ts';
import { bench, editFile, pack, runVerifier, unpack } from '../proof/packages.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { wordsIn } from '../support/browser-words.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-proof-screen-'));
/** Where pictures of this walk are left for somebody to look at. */
const pictures = process.env.PICTURE_FOLDER;
let app: TestApp;
let browser: TestBrowser;
let history: History;
let worker: ExportWorker | undefined;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home }, parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  history = await startHistory(app);
  worker = await startExportWorker({ parts: app.parts, jobsUrl: app.database.urls.jobs, writeDocument });
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

describe.each(['en-GB', 'es-ES'] as const)('The page of the proof, in %s', (locale) => {
  const say = wordsIn(locale);
  beforeAll(async () => {
    const { version } = (await history.client.get('/me')).body;
    const changed = await history.client.patch('/me', version, { preferences: { locale } });
    expect(changed.status).toBe(200);
  });
  const open = async (width: 'desk' | 'phone' = 'desk') => {
    const visit = await browser[width]({ locale, as: history.ledger.owner });
    await visit.page.goto(`${app.url}/log/proof?unitId=${history.unit.id}`);
    await visit.atRest();
    const { page } = visit;
    const button = (key: string) => page.getByRole('button', { name: say(`proof.${key}`), exact: true });
    const picture = async (name: string) => {
      if (pictures)
        await page.screenshot({ path: path.join(pictures, `proof-${name}-${width}-${locale}.png`), fullPage: true });
    };
    return { ...visit, button, picture };
  };
  const verdict = (key: 'intact' | 'notIntact') => say(`proof.${key}`);

  it('seals, checks the whole log, and hands over a package that it and the verifier find intact', async () => {
    const { page, button, picture } = await open();
    await picture('before');
    await history.ledger.made('/parties', { id: app.parts.newId(), kind: 'supplier', name: 'Copper & Co' });
    await page.reload();
    await button('sealNow').click();
    await page.getByText(say('proof.nothingUnsealed'), { exact: true }).waitFor();

    await button('log.check').click();
    await page.getByRole('status').getByText(verdict('intact')).waitFor();

    await button('make.start').click();
    await page.waitForURL('**/exports');
    const made = page
      .getByRole('row')
      .filter({ hasText: say('exports.what.proofPackage') })
      .first()
      .getByRole('link');
    await made.waitFor();
    await picture('made');
    const [download] = await Promise.all([page.waitForEvent('download'), made.click()]);
    const zip = path.join(home, `package-${locale}.zip`);
    await download.saveAs(zip);
    expect((await runVerifier(zip)).status).toBe(0);
    const { about } = JSON.parse(readFileSync(path.join(await unpack(zip), 'proof.json'), 'utf8'));
    expect(about).toMatchObject({ kind: 'unit', id: history.unit.id });

    await page.goto(`${app.url}/log/proof`);
    const file = page.locator('input[type=file]');
    await file.setInputFiles(zip);
    await page.getByText(about.label).waitFor();
    await picture('after');

    const folder = await unpack(zip);
    editFile(folder, 'records.jsonl', (text) =>
      text.replace('"massMicrograms":"140000000"', '"massMicrograms":"141000000"'),
    );
    await file.setInputFiles(await pack(folder));
    await page.getByRole('alert').getByText(verdict('notIntact')).waitFor();
    await picture('changed');
    const nothing = path.join(home, 'nothing.zip');
    writeFileSync(nothing, 'no zip');
    await file.setInputFiles(nothing);
    await page.getByText(say('proof.fault.notReadable', { file: 'zip' }), { exact: true }).waitFor();
  });

  it('holds both checks against what was known before, and says what is no head', async () => {
    const { page, button } = await open('phone');
    await page.getByText(say('proof.before.title'), { exact: true }).click();
    const head = page.getByRole('textbox', { name: say('proof.before.head') });
    await head.fill('12');
    await page.getByText(say('proof.before.headWrong')).waitFor();
    expect(await button('log.check').isDisabled()).toBe(true);
    await head.fill(`${history.seals.first.sequence}:${'ab'.repeat(32)}`);
    await button('log.check').click();
    await page.getByRole('alert').getByText(verdict('notIntact')).waitFor();
    await head.fill(`${history.seals.first.sequence}:${history.seals.first.hash}`);
    await button('log.check').click();
    await page.getByRole('status').getByText(verdict('intact')).waitFor();
  });

  it('replaces the key only after asking', async () => {
    const { page, button, picture } = await open();
    const before = (await history.client.get('/journal/keys')).body.items.length;
    await button('keys.change').click();
    await picture('key');
    await button('keys.changeNot').click();
    await button('keys.change').click();
    await button('keys.changeDo').click();
    await page.getByText(say('proof.keys.changed'), { exact: true }).waitFor();
    expect((await history.client.get('/journal/keys')).body.items).toHaveLength(before + 1);
  });
});

describe('The page of the proof', () => {
  it('offers a technician the check of a package, and nothing that a technician may not do', async () => {
    const say = wordsIn('en-GB');
    const technician = await app.addPerson(['technician'], { firmId: history.firm.id });
    const { page, atRest } = await browser.phone({ as: technician });
    await page.goto(`${app.url}/log/proof`);
    await atRest();
    expect(await page.getByRole('heading', { name: say('proof.package.title') }).isVisible()).toBe(true);
    for (const key of ['sealNow', 'log.check', 'keys.change'])
      expect(await page.getByRole('button', { name: say(`proof.${key}`), exact: true }).count()).toBe(0);
    expect(await page.getByRole('heading', { name: say('proof.make.title') }).count()).toBe(0);
  });
});
