import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { type History, startHistory } from '../proof/history.ts';
import { bench, newFolder, runVerifier, unpack } from '../proof/packages.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { exportRequests } from '../support/export-requests.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-package-exports-'));
let app: TestApp;
let history: History;
let worker: ExportWorker;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  history = await startHistory(app);
  const options = { parts: app.parts, jobsUrl: app.database.urls.jobs, writeDocument, pollEverySeconds: 0.5 };
  worker = await startExportWorker(options);
});
afterAll(async () => {
  await worker?.stop();
  await app.close();
  rmSync(home, { recursive: true, force: true });
  rmSync(bench, { recursive: true, force: true });
});
const { ask, asked, ended, download } = exportRequests(
  () => app,
  () => history.client,
);
const period = { from: '2026-01-01', to: '2026-12-31' };

describe('A proof package as an export', () => {
  it('is intact to the verifier, is one record of the journal that it holds itself, and its seal is mailed', async () => {
    const before = await history.ledger.sequence();
    const { id } = await asked('proofPackage', 'zip', { unitId: history.unit.id });
    const view = await ended(id);
    expect(view).toMatchObject({ state: 'done', problem: null, fileName: expect.stringMatching(/^proof-.*\.zip$/) });
    expect([view.record, view.rowsDone, await history.ledger.sequence()]).toEqual([before + 1, before + 2, before + 2]);

    const { bytes } = await download(id);
    expect(view.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    const zip = path.join(newFolder(), 'package.zip');
    writeFileSync(zip, bytes);
    expect(await runVerifier(zip)).toMatchObject({ status: 0 });
    const lines = readFileSync(path.join(await unpack(zip), 'records.jsonl'), 'utf8')
      .trim()
      .split('\n');
    expect(JSON.parse(String(lines.at(-2))).content).toMatchObject({
      type: 'export',
      document: 'proofPackage',
      recordedBy: history.ledger.owner.id,
      about: { kind: 'unit', id: history.unit.id, words: false, exportId: id },
    });
    const [mail] = await app.mails();
    expect(mail?.to).toContain(history.ledger.owner.email);
    expect(JSON.stringify(mail)).toContain(`${before + 1}:`);
  });

  it('is refused at once where it is about nothing, about two things, or about what is not there', async () => {
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: history.firm.id }));
    const before = await history.ledger.sequence();
    const elsewhere = '018f0000-0000-7000-8000-000000000001';
    for (const [filters, code] of [
      [{}, 'proofSubject'],
      [{ ...period, unitId: history.unit.id }, 'proofSubject'],
      [{ from: '2026-01-01' }, 'required'],
      [{ unitId: elsewhere }, 'notKnownHere'],
    ] as const)
      expect((await ask('proofPackage', 'zip', filters)).body).toMatchObject({ status: 422, code });
    expect((await ask('proofPackage', 'csv', period)).status).toBe(422);
    expect((await ask('proofPackage', 'zip', period, technician)).status).toBe(403);
    expect(await history.ledger.sequence()).toBe(before);
  });

  it('says so when the log cannot be sealed, and records no export', async () => {
    const before = await history.ledger.sequence();
    const file = path.join(home, 'keys', 'seal.key');
    renameSync(file, `${file}.away`);
    try {
      const { id } = await asked('proofPackage', 'zip', period);
      expect(await ended(id)).toMatchObject({ state: 'failed', problem: { code: 'sealKeyLost' }, record: null });
      expect(await history.ledger.sequence()).toBe(before);
    } finally {
      renameSync(`${file}.away`, file);
    }
  });

  it('sent at once has its seal mailed too', async () => {
    const before = (await app.mails()).length;
    const { status } = await history.client.get(`/proof-packages?unitId=${history.unit.id}`);
    expect(status).toBe(200);
    expect((await app.mails()).length).toBe(before + 1);
  });
});
