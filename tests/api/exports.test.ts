import { createHash } from 'node:crypto';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import excel from 'exceljs';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { enqueueExport } from '../../server/exports/export-queue.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { EXPORT_TABLES } from '../../shared/exports/export.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { exportRequests, until } from '../support/export-requests.ts';
import { type Ledger, startLedger, weighIn } from '../support/ledger.ts';
import { readCsv } from '../support/read-csv.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-exports-'));
let app: TestApp;
let ledger: Ledger;
let unitId: string;
let cylinderId: string;
let worker: ExportWorker | null = null;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  ledger = await startLedger(app);
  cylinderId = (await ledger.cylinder('9500', { tag: '=HYPERLINK("http://example.test")' })).id;
  unitId = (await ledger.unit('1250', '1500', { tag: '@unit, "quoted"' }, 'factory')).id;
  const group = weighIn(ledger, { cylinderId, unitId, beforeG: 9500, afterG: 9410 });
  const answer = await ledger.post({ ...group, reason: '+1+1' });
  if (answer.status !== 201) throw new Error(JSON.stringify(answer.body));
  await ledger.made('/jobs', {
    id: uuid(),
    unitId,
    kind: 'serviceWithLeak',
    title: '=1+1',
    openedAt: '2026-03-02T10:00:00Z',
  });
  const { default: pg } = await import('pg');
  const loader = new pg.Client({ connectionString: app.database.urls.superuser });
  await loader.connect();
  // As a replica does: rows without the triggers that ask for their records.
  await loader.query('set session_replication_role = replica');
  await loader.query(
    `insert into charge_sheet (firm_id, id, unit_id, made_at, made_by, request, result, manual_document)
       values ($1, gen_random_uuid(), $2, now(), $3, '{"kind":"install","refrigerant":"R-410A"}',
         '{"extraG":-12,"totalG":1250.5,"weighInG":0,"recoverG":12}', '=manual')`,
    [ledger.firm.id, unitId, ledger.owner.id],
  );
  await loader.query(
    `insert into period (firm_id, id, month, closed_at, closed_by, record_sequence)
       values ($1, gen_random_uuid(), '2026-02', now(), $2, 1)`,
    [ledger.firm.id, ledger.owner.id],
  );
  await loader.end();
});
afterAll(async () => {
  await app.close();
  rmSync(home, { recursive: true, force: true });
});
afterEach(async () => {
  await worker?.stop();
  worker = null;
});

const startWorker = async (): Promise<ExportWorker> => {
  const options = { parts: app.parts, jobsUrl: app.database.urls.jobs, writeDocument, pollEverySeconds: 0.5 };
  worker = await startExportWorker(options);
  return worker;
};
const { ask, asked, ended, download, set } = exportRequests(
  () => app,
  () => ledger.client,
);

describe('An export that goes wrong', () => {
  it('is cancelled while it waits, and then never made', async () => {
    const { id } = await asked('entries');
    expect((await ledger.client.post(`/exports/${id}/cancel`)).body).toMatchObject({ state: 'cancelled' });
    await startWorker();
    const after = await asked('sites');
    await ended(after.id);

    expect((await ledger.client.get(`/exports/${id}`)).body).toMatchObject({ state: 'cancelled', sha256: null });
    expect((await download(id)).status).toBe(409);
  });

  it('really stops its statement when it is cancelled in the middle, and leaves no file and no record', async () => {
    // A lock on the firm's sites holds the statement where it is, for as long as this test likes.
    const { default: pg } = await import('pg');
    const holder = new pg.Client({ connectionString: app.database.urls.superuser });
    await holder.connect();
    try {
      await holder.query('begin; lock table site in access exclusive mode');
      const before = await ledger.sequence();
      const { id } = await asked('entries');
      await startWorker();
      const running = `select pid from pg_stat_activity where datname = current_database()
        and application_name = 'tarewright exports' and query like '%copy (select%' and wait_event_type = 'Lock'`;
      await until(async () => (await app.database.query('superuser', running)).length > 0);
      expect((await ledger.client.get(`/exports/${id}`)).body).toMatchObject({ state: 'running' });

      await ledger.client.post(`/exports/${id}/cancel`);
      await worker?.idle();
      expect(await app.database.query('superuser', running)).toEqual([]);
      expect(await ledger.sequence()).toBe(before);
      expect(readdirSync(path.join(home, 'exports', ledger.firm.id)).filter((name) => name.startsWith(id))).toEqual([]);
      expect((await ledger.client.get(`/exports/${id}`)).body).toMatchObject({ state: 'cancelled', problem: null });
    } finally {
      await holder.end();
    }
  });

  it('goes back into the queue when the server stops, and is made by the next one', async () => {
    const { default: pg } = await import('pg');
    const holder = new pg.Client({ connectionString: app.database.urls.superuser });
    await holder.connect();
    await holder.query('begin; lock table site in access exclusive mode');
    const { id } = await asked('entries');
    const first = await startWorker();
    await until(async () => (await ledger.client.get(`/exports/${id}`)).body.state === 'running');
    await first.stop();
    worker = null;
    await holder.end();
    expect((await ledger.client.get(`/exports/${id}`)).body).toMatchObject({ state: 'queued' });

    await startWorker();
    expect(await ended(id)).toMatchObject({ state: 'done', problem: null });
  });

  it('is taken over when its server was killed, and said to be failed after three attempts', async () => {
    const once = await asked('entries');
    const thrice = await asked('entries');
    await set(once.id, `state = 'running', attempts = 1`);
    await set(thrice.id, `state = 'running', attempts = 3`);
    await app.database.query('superuser', 'delete from pgboss.job');
    const taker = await startWorker();
    await taker.tend();
    expect((await ledger.client.get(`/exports/${once.id}`)).body).toMatchObject({ state: 'running' });

    app.clock.advance(31_000);
    await taker.tend();
    expect(await ended(once.id)).toMatchObject({ state: 'done' });
    expect(await ended(thrice.id)).toMatchObject({
      state: 'failed',
      problem: { code: 'interrupted', message: expect.stringContaining('The server stopped in the middle') },
      record: null,
    });
  });

  it('says that the folder refuses, and makes no record', async () => {
    const folder = path.join(home, 'exports', ledger.firm.id);
    rmSync(folder, { recursive: true, force: true });
    writeFileSync(folder, 'a file where the folder should be');
    try {
      const before = await ledger.sequence();
      const { id } = await asked('entries');
      await startWorker();

      expect(await ended(id)).toMatchObject({ state: 'failed', problem: { code: 'folder' } });
      expect(await ledger.sequence()).toBe(before);
    } finally {
      rmSync(folder);
    }
  });

  it('is gone after 24 hours, file and all', async () => {
    const taker = await startWorker();
    const { id } = await asked('tools');
    expect(await ended(id)).toMatchObject({ state: 'done', mayDownload: true });
    expect((await download(id)).status).toBe(200);

    app.clock.advance(24 * 3600 * 1000);
    expect((await ledger.client.get(`/exports/${id}`)).body).toMatchObject({ state: 'expired', mayDownload: false });
    expect((await download(id)).status).toBe(410);
    await taker.tend();
    expect(existsSync(path.join(home, 'exports', ledger.firm.id, `${id}.1`))).toBe(false);
  });

  it('is refused before it begins: twice the id, too many at once, an unknown filter', async () => {
    const manager = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));
    const request = { id: uuid(), what: 'sites', format: 'csv', filters: {} };
    expect((await manager.post('/exports', request)).status).toBe(201);
    expect((await manager.post('/exports', request)).status).toBe(200);
    expect((await manager.post('/exports', { ...request, format: 'xlsx' })).body).toMatchObject({ code: 'idReused' });
    expect((await ask('sites', 'csv', { colour: 'red' }, manager)).status).toBe(422);
    for (let count = 1; count < 5; count++) await asked('sites', 'csv', {}, manager);
    expect((await ask('sites', 'csv', {}, manager)).body).toMatchObject({ status: 429, code: 'tooManyExports' });
  });
});

describe('Who may take out what', () => {
  it('is the firm alone: another firm finds no export of ours', async () => {
    await startWorker();
    const { id } = await asked('entries');
    await ended(id);
    const other = await startLedger(app);
    for (const answer of [
      await other.client.get(`/exports/${id}`),
      await other.client.get(`/exports/${id}/file`),
      await other.client.post(`/exports/${id}/cancel`),
    ])
      expect(answer.status).toBe(404);
    expect((await other.client.get('/exports')).body.items).toEqual([]);
    const taken = { id, what: 'entries', format: 'csv', filters: {} };
    expect((await other.client.post('/exports', taken)).status).toBe(201);
  });

  it('is all for a manager, the own entries and the papers of the work for a technician', async () => {
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    const me = (await technician.get('/session')).body.person.id;
    expect((await ask('entries', 'csv', {}, technician)).status).toBe(403);
    expect((await ask('people', 'csv', {}, technician)).status).toBe(403);
    expect((await ask('entries', 'csv', { personId: me }, technician)).status).toBe(201);
    expect((await ask('unitLog', 'pdf', { unitId }, technician)).status).toBe(201);
    expect((await technician.get('/exports')).body.items).toHaveLength(2);
  });

  it('is what a reader sees, row by row, and the reader alone downloads it', async () => {
    const siteIds = [ledger.site.id];
    const seeing = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds }));
    const elsewhere = await ledger.made('/sites', { ...ledger.site, id: uuid(), name: 'Another' });
    const blind = await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [elsewhere.id] });
    const blindClient = await app.signIn(blind);
    await startWorker();
    const [seen, unseen] = [await asked('entries', 'csv', {}, seeing), await asked('entries', 'csv', {}, blindClient)];

    expect((await ended(seen.id, seeing)).rowsDone).toBeGreaterThan(0);
    expect(await ended(unseen.id, blindClient)).toMatchObject({ state: 'done', rowsDone: 0 });
    expect((await seeing.get(`/exports/${unseen.id}`)).status).toBe(404);
    expect((await download(seen.id, ledger.client)).status).toBe(404);
    expect((await download(seen.id, seeing)).bytes.toString()).not.toContain('HYPERLINK');
    expect((await ask('people', 'csv', {}, seeing)).status).toBe(403);
  });

  it('is asked again when the job runs: who left meanwhile gets nothing', async () => {
    const leaving = await app.addPerson(['complianceManager'], { firmId: ledger.firm.id });
    const { id } = await asked('people', 'csv', {}, await app.signIn(leaving));
    const { body } = await ledger.client.get(`/people/${leaving.id}`);
    expect((await ledger.client.patch(`/people/${leaving.id}`, body.version, { active: false })).status).toBe(200);
    await startWorker();

    expect(await ended(id)).toMatchObject({ state: 'failed', problem: { code: 'noRights' } });
  });
});

describe('The right to a file', () => {
  it('is asked once more at the download: who may no longer take it out gets nothing', async () => {
    await startWorker();
    const manager = await app.addPerson(['complianceManager'], { firmId: ledger.firm.id });
    const client = await app.signIn(manager);
    const { id } = await asked('people', 'csv', {}, client);
    expect(await ended(id, client)).toMatchObject({ state: 'done', mayDownload: true });
    const { body } = await ledger.client.get(`/people/${manager.id}`);
    const demoted = await ledger.client.patch(`/people/${manager.id}`, body.version, { roles: ['technician'] });
    expect(demoted.status).toBe(200);

    expect((await download(id, client)).status).toBe(403);
    expect((await client.get(`/exports/${id}`)).body).toMatchObject({ state: 'done', mayDownload: false });
  });

  it('is narrowed by the scopes of a token', async () => {
    await startWorker();
    const { id } = await asked('people');
    await ended(id);
    const { body } = await ledger.client.post('/tokens', {
      id: uuid(),
      name: 'reads',
      scopes: ['read'],
      expiresOn: '2026-12-31',
    });
    const headers = { Authorization: `Bearer ${body.secret}` };
    expect((await fetch(`${app.url}/api/v1/exports/${id}/file`, { headers })).status).toBe(403);
    expect((await download(id)).status).toBe(200);
  });

  it('is the technician’s for who both reads and works: not the whole log', async () => {
    const both = await app.signIn(await app.addPerson(['reader', 'technician'], { firmId: ledger.firm.id }));
    expect((await ask('entries', 'csv', {}, both)).status).toBe(403);
    expect((await both.get('/entries.csv')).status).toBe(403);
    expect((await ask('unitLog', 'pdf', { unitId }, both)).status).toBe(201);
  });
});

describe('A finished export', () => {
  it('is a record of the journal: who, what, which filters, how many rows, the SHA-256 of the very file', async () => {
    await startWorker();
    const { id } = await asked('entries', 'csv', { unitId });
    const view = await ended(id);
    const { bytes } = await download(id);
    const [record] = await app.database.query<{ content: string; sequence: string }>(
      'superuser',
      'select content, sequence from journal_record where firm_id = $1 and sequence = $2',
      [ledger.firm.id, view.record],
    );

    expect(view).toMatchObject({
      rowsDone: 2,
      rowsTotal: 2,
      fileName: expect.stringMatching(/^log-2026-\d\d-\d\d\.csv$/),
    });
    expect(JSON.parse(String(record?.content))).toMatchObject({
      type: 'export',
      recordedBy: ledger.owner.id,
      document: 'entries',
      format: 'csv',
      about: {
        exportId: id,
        filters: { unitId, sort: '-sequence' },
        rows: '2',
        sha256: createHash('sha256').update(bytes).digest('hex'),
        sizeBytes: String(bytes.length),
      },
    });
    expect(view.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
  });

  it('holds as CSV the same bytes as the log that is sent at once', async () => {
    await startWorker();
    const { id } = await asked('entries', 'csv', { sort: 'sequence' });
    await ended(id);

    expect((await download(id)).bytes.toString()).toBe((await ledger.client.get('/entries.csv?sort=sequence')).body);
  });

  it.each(EXPORT_TABLES)(
    'holds %s as CSV and XLSX, the same cells, in CSV defused and in XLSX as they were typed',
    async (what) => {
      await startWorker();
      // That the first is recorded is no difference between the two.
      const filters = what === 'journal' ? { type: 'register' } : {};
      const [csv, xlsx] = [await asked(what, 'csv', filters), await asked(what, 'xlsx', filters)];
      const views = [await ended(csv.id), await ended(xlsx.id)];
      expect(views.map(({ state }) => state)).toEqual(['done', 'done']);
      const text = (await download(csv.id)).bytes.toString();
      const book = new excel.Workbook();
      await book.xlsx.load((await download(xlsx.id)).bytes as unknown as ArrayBuffer);
      const rows = (book.worksheets[0]?.getSheetValues() ?? []).slice(1) as unknown[][];

      const { head, lines } = readCsv(text);
      expect(rows[0]?.slice(1)).toEqual(head);
      expect(lines.flatMap((line) => Object.values(line)).filter((cell) => cell === 't' || cell === 'f')).toEqual([]);
      expect(rows.length - 1).toBe(views[0]?.rowsDone);
      expect(views[1]?.rowsDone).toBe(views[0]?.rowsDone);
      const cells = rows.flatMap((row) => row.slice(1)).filter((cell) => typeof cell === 'string');
      for (const cell of lines.flatMap((line) => Object.values(line))) expect(cell).not.toMatch(/^[=+@\t\r]/);
      expect(cells.filter((cell) => cell.startsWith("'"))).toEqual([]);
      for (const cell of rows.flat()) expect(cell).not.toHaveProperty('formula');
      if (what === 'units') {
        expect(text).toContain(`"'@unit, ""quoted"""`);
        expect(cells).toContain('@unit, "quoted"');
        expect(rows[1]).toContain(1500);
      }
      if (what === 'chargeSheets') expect(rows[1]).toEqual(expect.arrayContaining(['=manual', 'R-410A', 1250.5, -12]));
      if (['jobs', 'chargeSheets', 'journal', 'periods'].includes(what)) expect(rows.length).toBeGreaterThan(1);
    },
  );

  it('holds of a cylinder the stamped fill limit apart from the one that counts', async () => {
    await startWorker();
    // 0.8 x 47.7 lb x 1.0589.
    const ruled = await ledger.cylinder(null, { kind: 'recovery', waterCapacity: { value: '47.7', unit: 'lb' } });
    const stamped = await ledger.cylinder(null, { kind: 'recovery', stampedLimit: { value: '9', unit: 'kg' } });
    const { id } = await asked('cylinders');
    await ended(id);
    const { lines } = readCsv((await download(id)).bytes.toString());
    const limitsOf = (tag: string) => {
      const line = lines.find((each) => Object.values(each).includes(tag));
      return [line?.['stamped fill limit (g)'], line?.['fill limit that counts (g)']];
    };
    expect(limitsOf(ruled.tag)).toEqual(['', '18328.59']);
    expect(limitsOf(stamped.tag)).toEqual(['9000', '9000']);
  });

  it('is refused as XLSX above 100,000 rows, with the way out, and made as CSV', async () => {
    const big = await startLedger(app);
    const { default: pg } = await import('pg');
    const loader = new pg.Client({ connectionString: app.database.urls.superuser });
    await loader.connect();
    // As a replica does: rows without the triggers that ask for their records.
    await loader.query('set session_replication_role = replica');
    await loader.query(
      `insert into customer (firm_id, id, name, version)
         select $1, gen_random_uuid(), 'Customer ' || n, 1 from generate_series(1, 100000) n`,
      [big.firm.id],
    );
    await loader.end();
    const counted = await app.database.query<{ n: string }>(
      'superuser',
      'select count(*) as n from customer where firm_id = $1',
      [big.firm.id],
    );
    expect(Number(counted[0]?.n)).toBeGreaterThan(100_000);
    const refused = await ask('customers', 'xlsx', {}, big.client);
    expect(refused.body).toMatchObject({
      status: 422,
      code: 'tooManyRowsForXlsx',
      detail: expect.stringContaining('CSV'),
    });

    await startWorker();
    const { id } = await asked('customers', 'csv', {}, big.client);
    expect(await ended(id, big.client)).toMatchObject({ state: 'done', rowsDone: Number(counted[0]?.n) });
  });

  it('is made once, however often its task stands in the queue', async () => {
    const { id } = await asked('entries');
    const { inFirm } = await import('../../server/database/firm-scope.ts');
    const actor = { firmId: ledger.firm.id, personId: ledger.owner.id, siteIds: null };
    for (let again = 0; again < 3; again++)
      await inFirm(app.parts.dataSource, actor, (manager) =>
        enqueueExport(manager, { firmId: actor.firmId, exportId: id }),
      );
    const before = await ledger.sequence();
    await startWorker();
    await ended(id);
    const tasks = `select from pgboss.job where data ->> 'exportId' = $1 and state <> 'completed'`;
    await until(async () => (await app.database.query('superuser', tasks, [id])).length === 0);

    expect(await ledger.sequence()).toBe(before + 1);
    expect(readFileSync(path.join(home, 'exports', ledger.firm.id, `${id}.1`)).length).toBeGreaterThan(0);
  });
});
