import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { exportRequests } from '../support/export-requests.ts';
import { type Ledger, posted, startLedger, weighIn } from '../support/ledger.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-exports-journalled-'));
const ADDRESS = 'ada.quill@example.test';
let app: TestApp;
let ledger: Ledger;
let worker: ExportWorker;
let cylinderId: string;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  ledger = await startLedger(app);
  cylinderId = (await ledger.cylinder('9500')).id;
  const unitId = (await ledger.unit('1250', '1500', {}, 'factory')).id;
  await posted(ledger.client, weighIn(ledger, { cylinderId, unitId, beforeG: 9500, afterG: 9410 }));
  worker = await startExportWorker({
    parts: app.parts,
    jobsUrl: app.database.urls.jobs,
    writeDocument,
    pollEverySeconds: 0.5,
  });
});
afterAll(async () => {
  await worker?.stop();
  await app.close();
  rmSync(home, { recursive: true, force: true });
});
const { asked, ended } = exportRequests(
  () => app,
  () => ledger.client,
);
const lastRecord = async (): Promise<Record<string, unknown>> => {
  const [row] = await app.database.query<{ content: string }>(
    'superuser',
    'select content from journal_record where firm_id = $1 order by sequence desc limit 1',
    [ledger.firm.id],
  );
  return JSON.parse(String(row?.content));
};

const FILES: [name: string, address: () => string, document: string, about: () => object][] = [
  [
    'the log',
    () => '/entries.csv?month=2026-03',
    'entries',
    () => ({ filters: { month: '2026-03', sort: '-sequence' } }),
  ],
  [
    'a table of the books',
    () => '/books.csv?table=places&from=2026-03&to=2026-03',
    'books',
    () => ({ filters: { table: 'places', from: '2026-03', to: '2026-03' } }),
  ],
  [
    'a cylinder’s statement',
    () => `/cylinders/${cylinderId}/statement.csv?from=2026-03-01&to=2026-03-31`,
    'cylinderStatement',
    () => ({ filters: { cylinderId, from: '2026-03-01', to: '2026-03-31' } }),
  ],
  [
    'the emissions',
    () => '/emissions.csv?from=2026-03&to=2026-03',
    'emissions',
    () => ({ filters: { from: '2026-03', to: '2026-03' } }),
  ],
];

describe.each(FILES)('%s as CSV', (_name, address, document, about) => {
  it('is a record of the journal, each time it is sent', async () => {
    const before = await ledger.sequence();
    const answer = await ledger.client.get(address());
    expect(answer.status).toBe(200);
    expect(await ledger.sequence()).toBe(before + 1);
    const record = await lastRecord();
    expect(record).toMatchObject({
      type: 'export',
      document,
      format: 'csv',
      recordedBy: ledger.owner.id,
      about: about(),
    });
    const { sha256 } = record.about as { sha256?: string };
    if (document !== 'entries') expect(sha256).toBe(createHash('sha256').update(String(answer.body)).digest('hex'));
  });

  it('is no record for a look ahead (HEAD), another site’s link, or what is refused', async () => {
    const before = await ledger.sequence();
    const head = await fetch(`${app.url}/api/v1${address()}`, {
      method: 'HEAD',
      headers: { Cookie: String(ledger.client.cookie) },
    });
    expect(head.status).toBe(405);
    const linked = await ledger.client.get(address(), { headers: { 'Sec-Fetch-Site': 'cross-site' } });
    expect([linked.status, linked.body.code]).toEqual([403, 'otherOrigin']);
    expect((await app.visitor().get(address())).status).toBe(401);
    expect((await ledger.client.get(`${address()}&colour=red`)).status).toBe(422);
    expect(await ledger.sequence()).toBe(before);
  });
});

describe('What a person typed to find something', () => {
  it('stands beside the record of the export, which holds its salted hash alone', async () => {
    await ledger.made('/customers', { id: uuid(), name: ADDRESS, email: ADDRESS });
    const { id } = await asked('customers', 'csv', { search: ADDRESS });
    expect(await ended(id)).toMatchObject({ state: 'done', rowsDone: 1 });
    const record = await lastRecord();
    expect(JSON.stringify(record)).not.toContain('ada.quill');
    const { filters } = record.about as { filters: Record<string, string> };
    expect(filters).toEqual({ sort: 'name', searchHash: expect.stringMatching(/^[0-9a-f]{64}$/) });
    const words = await app.database.query<{ field: string; content: string; salt: Buffer }>(
      'superuser',
      'select field, content, salt from personal_text where record_id = $1',
      [record.id],
    );
    expect(words).toEqual([{ field: 'search', content: ADDRESS, salt: expect.anything() }]);
    const salt = words[0]?.salt ?? Buffer.alloc(0);
    expect(filters.searchHash).toBe(createHash('sha256').update(salt).update(ADDRESS).digest('hex'));
  });

  it('is checked with the log like any other words', async () => {
    const headers = { Cookie: String(ledger.client.cookie) };
    const answer = await fetch(`${app.url}/api/v1/journal/verification`, { headers });
    expect(await answer.text()).toContain('"intact"');
  });
});
