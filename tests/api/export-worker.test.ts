import { createHash } from 'node:crypto';
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { inFirm } from '../../server/database/firm-scope.ts';
import { enqueueExport } from '../../server/exports/export-queue.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import type { WriteDocument } from '../../server/exports/run-export.ts';
import { problemOfRefusals } from '../../server/http/problem.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { exportRequests, until } from '../support/export-requests.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-export-worker-'));
let app: TestApp;
let ledger: Ledger;
let worker: ExportWorker | null = null;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  ledger = await startLedger(app);
});
afterAll(async () => {
  await app.close();
  rmSync(home, { recursive: true, force: true });
});
afterEach(async () => {
  await worker?.stop();
  worker = null;
});
const requests = exportRequests(
  () => app,
  () => ledger.client,
);
const askPaper = () => requests.asked('periodReport', 'pdf', { from: '2026-03', to: '2026-03' });
const rowOf = async (id: string) =>
  (
    await app.database.query<{ state: string; attempts: number }>(
      'superuser',
      'select state, attempts from export where id = $1',
      [id],
    )
  )[0];
const jobsOf = async (id: string): Promise<string[]> => {
  const select = `select state from pgboss.job where data ->> 'exportId' = $1`;
  return (await app.database.query<{ state: string }>('superuser', select, [id])).map(({ state }) => state);
};
const enqueued = async (id: string) => (await jobsOf(id)).filter((state) => state === 'created').length;
const enqueue = (exportId: string) =>
  inFirm(app.parts.dataSource, { firmId: ledger.firm.id, personId: ledger.owner.id, siteIds: null }, (manager) =>
    enqueueExport(manager, { firmId: ledger.firm.id, exportId }),
  );
const filesOf = (id: string) =>
  readdirSync(path.join(home, 'exports', ledger.firm.id)).filter((name) => name.startsWith(id));
const holding = async <T>(statements: string, work: (holder: pg.Client) => Promise<T>): Promise<T> => {
  const holder = new pg.Client({ connectionString: app.database.urls.superuser });
  await holder.connect();
  try {
    await holder.query(statements);
    return await work(holder);
  } finally {
    await holder.end();
  }
};
const waiting = (what: string) =>
  app.database.query<{ began: Date }>(
    'superuser',
    `select xact_start as began from pg_stat_activity where datname = current_database()
       and application_name = 'tarewright exports' and query ilike '%' || $1 || '%' and wait_event_type = 'Lock'`,
    [what],
  );

/** A paper that each attempt begins, and ends with its own words when the test lets it go. */
function heldPapers() {
  const attempts: { end(words: string): void }[] = [];
  const writeDocument: WriteDocument = async (_parts, _manager, _request, _actor, stream) => {
    stream.write('begun\n');
    const words = await new Promise<string>((resolve) => attempts.push({ end: resolve }));
    stream.end(words);
    return 1;
  };
  return { attempts, writeDocument };
}
const start = async (writeDocument: WriteDocument, change: { now?: () => Date } = {}): Promise<ExportWorker> => {
  const parts = { ...app.parts, ...change };
  worker = await startExportWorker({
    parts,
    jobsUrl: app.database.urls.jobs,
    writeDocument,
    pollEverySeconds: 0.5,
    stopWithinMs: 1_000,
  });
  return worker;
};

describe('A server that stops', () => {
  it('ends also when an export outlives what the queue waits for, and gives that export back', async () => {
    const { attempts, writeDocument } = heldPapers();
    const { id } = await askPaper();
    const stopped = (await start(writeDocument)).stop.bind(worker);
    await until(() => attempts.length === 1);
    const stopping = stopped();
    await until(async () => !(await jobsOf(id)).some((state) => state === 'created' || state === 'active'));
    attempts[0]?.end('too late');
    await stopping;
    worker = null;

    expect(await rowOf(id)).toEqual({ state: 'queued', attempts: 0 });
    expect(await enqueued(id)).toBe(1);
    await requests.set(id, `state = 'cancelled'`);
  });
});

describe('An export that was taken over', () => {
  it('is the file of the attempt that finished it: an earlier one that goes on harms nothing', async () => {
    const { attempts, writeDocument } = heldPapers();
    const { id } = await askPaper();
    await start(writeDocument);
    await until(() => attempts.length === 1);
    // As another server does that thinks this one is gone.
    await requests.set(id, `state = 'queued'`);
    await enqueue(id);
    await until(() => attempts.length === 2);
    attempts[1]?.end('of the second');
    const view = await requests.ended(id);
    expect(view).toMatchObject({ state: 'done', problem: null });
    attempts[0]?.end('of the first');
    await worker?.idle();

    const { status, bytes } = await requests.download(id);
    expect([status, bytes.toString()]).toEqual([200, 'begun\nof the second']);
    expect(view.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    expect(await rowOf(id)).toEqual({ state: 'done', attempts: 2 });
    expect(filesOf(id)).toHaveLength(1);
  });

  it('is not said to have failed by an earlier attempt that fails', async () => {
    const failures: ((error: Error) => void)[] = [];
    const { id } = await askPaper();
    await start(() => new Promise((_, reject) => failures.push(reject)));
    await until(() => failures.length === 1);
    await requests.set(id, `state = 'queued'`);
    await enqueue(id);
    await until(() => failures.length === 2);
    failures[0]?.(new Error('of the first'));
    await until(async () => (await jobsOf(id)).includes('completed'));

    expect(await rowOf(id)).toEqual({ state: 'running', attempts: 2 });
    await ledger.client.post(`/exports/${id}/cancel`);
    failures[1]?.(new Error('of the second'));
    await worker?.idle();
  });

  it('is never this server’s own, however long the machine slept', async () => {
    let leap = 0;
    const { attempts, writeDocument } = heldPapers();
    const { id } = await askPaper();
    await start(writeDocument, { now: () => new Date(app.parts.now().getTime() + leap) });
    await until(() => attempts.length === 1);
    // The timer of the tending comes first after the sleep.
    leap = 31_000;
    const tended = worker?.tend();
    leap = 0;
    await tended;

    expect(await rowOf(id)).toEqual({ state: 'running', attempts: 1 });
    attempts[0]?.end('once');
    expect(await requests.ended(id)).toMatchObject({ state: 'done' });
  });

  it('is taken over once, however many servers find it at the same time', async () => {
    const { id } = await askPaper();
    const { attempts, writeDocument } = heldPapers();
    const taker = await start(writeDocument);
    await until(() => attempts.length === 1);
    await ledger.client.post(`/exports/${id}/cancel`);
    attempts[0]?.end('');
    await taker.idle();
    await requests.set(id, `state = 'running', attempts = 1, finished_at = null, touched_at = '2026-01-01'`);
    // Another server requeued it, and it runs again, between this one's look and its update.
    await holding('begin', async (holder) => {
      await holder.query(`update export set attempts = 2, touched_at = $2 where id = $1`, [id, app.parts.now()]);
      const tended = taker.tend();
      await until(async () => (await waiting('update export')).length > 0);
      await holder.query('commit');
      await tended;
    });

    expect(await rowOf(id)).toEqual({ state: 'running', attempts: 2 });
    await requests.set(id, `state = 'cancelled'`);
  });
});

describe('A statement of a cylinder as a paper', () => {
  const statement = (from: string, to: string) =>
    requests.ask('cylinderStatement', 'pdf', { cylinderId: uuid(), from, to });

  it('over more days than a statement covers is refused when it is asked for', async () => {
    const refused = await statement('2020-01-01', '2026-03-01');
    expect(refused.status).toBe(422);
    expect((refused.body as unknown as { errors: object[] }).errors).toEqual([
      expect.objectContaining({ code: 'statementPeriodTooLong', path: '/filters/from', allowed: 1_100 }),
    ]);
  });

  it('over more entries than a statement holds says so', async () => {
    const { status, body } = await statement('2026-01-01', '2026-03-01');
    expect(status).toBe(201);
    await start(() => Promise.reject(problemOfRefusals([{ code: 'statementTooLong', path: '/from', allowed: 2_000 }])));
    expect(await requests.ended(body.id)).toMatchObject({
      state: 'failed',
      problem: { code: 'statementTooLong', message: expect.stringContaining('2,000') },
    });
  });
});

describe('An export that waits', () => {
  it('stands in the queue once, however long it waits', async () => {
    const { attempts, writeDocument } = heldPapers();
    const taker = await start(writeDocument);
    const running = [await askPaper(), await askPaper()];
    await until(() => attempts.length === 2);
    const { id } = await askPaper();
    for (let round = 0; round < 3; round++) {
      app.clock.advance(31_000);
      await taker.tend();
    }

    expect(await enqueued(id)).toBe(1);
    for (const one of [...running, { id }]) await ledger.client.post(`/exports/${one.id}/cancel`);
    for (const { end } of attempts) end('');
    await taker.idle();
  });
});

describe('A finished file', () => {
  it('is not thrown away while somebody else holds the head of the log for long', async () => {
    const { attempts, writeDocument } = heldPapers();
    const { id } = await askPaper();
    await start(writeDocument);
    await until(() => attempts.length === 1);
    await holding('begin; select from firm_head for update', async () => {
      attempts[0]?.end('kept');
      await until(async () => (await waiting('lock_head')).length > 0);
      const first = String((await waiting('lock_head'))[0]?.began);
      // It gives up waiting after five seconds, and has to ask again.
      await until(async () => {
        if ((await rowOf(id))?.state !== 'running') return true;
        return (await waiting('lock_head')).some(({ began }) => String(began) !== first);
      });
    });

    expect(await requests.ended(id)).toMatchObject({ state: 'done', problem: null });
    expect((await requests.download(id)).bytes.toString()).toBe('begun\nkept');
  });

  it('goes when nothing speaks for it any more, whatever the server was doing when it should have gone', async () => {
    const cancelled = await askPaper();
    await ledger.client.post(`/exports/${cancelled.id}/cancel`);
    const taker = await start(async (_parts, _manager, _request, _actor, stream) => {
      stream.end('a paper');
      return 1;
    });
    const kept = await askPaper();
    const late = await askPaper();
    await requests.ended(kept.id);
    await requests.ended(late.id);
    await requests.set(late.id, `expires_at = '2026-01-01'`);
    const folder = path.join(home, 'exports', ledger.firm.id);
    for (const name of [`${cancelled.id}.1.part`, `${uuid()}.1`, late.id])
      writeFileSync(path.join(folder, name), 'left');
    writeFileSync(path.join(home, 'exports', 'a-note-of-the-owner.txt'), 'kept');
    await taker.tend();

    expect(filesOf(late.id)).toEqual([]);
    expect(filesOf(cancelled.id)).toEqual([]);
    expect(filesOf(kept.id)).toHaveLength(1);
    expect((await requests.download(kept.id)).status).toBe(200);
    expect(readdirSync(path.join(home, 'exports'))).toContain('a-note-of-the-owner.txt');
  });
});
