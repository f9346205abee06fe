import PgBoss from 'pg-boss';
import type { DataSource } from 'typeorm';
import { THE_PROGRAM } from '../../shared/proof/seal-record.schema.ts';
import { createDataSource } from '../database/data-source.ts';
import { inFirm } from '../database/firm-scope.ts';
import { exportsRepository } from './export.repository.ts';
import { exportFolder } from './export-folder.ts';
import { EXPORT_QUEUE, type ExportTask, enqueueExport } from './export-queue.ts';
import { type ExportParts, isTriedAgain, runExport, type WriteDocument } from './run-export.ts';

export interface ExportWorker {
  /** One round: takes over what nobody works on any more, removes files that have expired. It also runs by itself. */
  tend(): Promise<void>;
  /** Resolves when nothing runs at this moment. */
  idle(): Promise<void>;
  /** Gives what runs back to the queue and stops. */
  stop(): Promise<void>;
}

const TEND_EVERY_MS = 15_000;
/** Who works on an export says so twice a second; after so long its server is gone. */
const GONE_AFTER_MS = 30_000;
/** Exports at a time: each takes one connection and one CPU of the database. */
const AT_A_TIME = 2;

/** Works on the queue of exports until it is stopped. Several servers may. */
export async function startExportWorker(options: {
  parts: ExportParts;
  jobsUrl: string;
  writeDocument: WriteDocument;
  pollEverySeconds?: number;
}): Promise<ExportWorker> {
  const { parts, jobsUrl, writeDocument, pollEverySeconds = 1 } = options;
  const jobs = createDataSource({ url: jobsUrl, poolSize: 2 * AT_A_TIME + 1, applicationName: 'tarewright exports' });
  await jobs.initialize();
  const boss = new PgBoss({ connectionString: jobsUrl, max: 2, migrate: false, schedule: false, supervise: true });
  boss.on('error', (error) => parts.log.error({ err: error }, 'the queue of exports'));
  const stopping = new AbortController();
  const running = new Set<Promise<unknown>>();
  const run = async ([task]: PgBoss.Job<ExportTask>[]): Promise<void> => {
    if (!task) return;
    const work = runExport(parts, jobs, task.data, writeDocument, stopping.signal);
    running.add(work);
    try {
      if ((await work) === 'released') await requeue(jobs, task.data);
    } finally {
      running.delete(work);
    }
  };
  await boss.start();
  for (let at = 0; at < AT_A_TIME; at++)
    await boss.work<ExportTask>(EXPORT_QUEUE, { pollingIntervalSeconds: pollEverySeconds, batchSize: 1 }, run);
  const tend = () => tendExports(parts, jobs);
  const tendQuietly = () =>
    void tend().catch((error: unknown) => parts.log.error({ err: error }, 'exports could not be tended'));
  tendQuietly();
  const timer = setInterval(tendQuietly, TEND_EVERY_MS);
  timer.unref();
  return {
    tend,
    async idle() {
      while (running.size > 0) await Promise.all(running);
    },
    async stop() {
      clearInterval(timer);
      stopping.abort();
      await boss.stop({ graceful: true, timeout: 10_000 });
      while (running.size > 0) await Promise.allSettled(running);
      await jobs.destroy();
    },
  };
}

const requeue = (jobs: DataSource, task: ExportTask): Promise<void> =>
  inFirm(jobs, { firmId: task.firmId, personId: THE_PROGRAM, siteIds: null }, (manager) =>
    enqueueExport(manager, task),
  );

async function tendExports(parts: ExportParts, jobs: DataSource): Promise<void> {
  const at = parts.now();
  const found = await jobs.query<{ firmId: string; id: string; whatToDo: 'takeOver' | 'removeFile' }[]>(
    'select firm_id as "firmId", id, what_to_do as "whatToDo" from exports_to_tend($1, $2)',
    [new Date(at.getTime() - GONE_AFTER_MS), at],
  );
  for (const { firmId, id, whatToDo } of found) {
    if (whatToDo === 'removeFile') await exportFolder(parts.settings.home).remove(firmId, id);
    else await takeOver(parts, jobs, { firmId, exportId: id });
  }
}

/** Its server is gone, or its task was lost: once more, and after three attempts said to be failed. */
function takeOver(parts: ExportParts, jobs: DataSource, task: ExportTask): Promise<void> {
  const program = { firmId: task.firmId, personId: THE_PROGRAM, siteIds: null };
  return inFirm(jobs, program, async (manager) => {
    const exports = exportsRepository(manager);
    const row = await exports.find(task.exportId);
    if (!row) return;
    const wasRunning = row.state === 'running';
    if (wasRunning) parts.log.warn({ ...task, attempts: row.attempts }, 'an export was interrupted');
    if (wasRunning && !isTriedAgain(row)) await exports.fail(row.id, 'interrupted', parts.now());
    else if (await exports.release(row.id, parts.now(), true)) await enqueueExport(manager, task);
  });
}
