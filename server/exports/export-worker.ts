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
  /** One round: takes over what nobody works on any more, removes files that nothing speaks for. It also runs by itself. */
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
/** What runs is given back within milliseconds; what cannot be stopped is waited for, but not by the queue. */
const STOP_WITHIN_MS = 10_000;

/** Works on the queue of exports until it is stopped. Several servers may. */
export async function startExportWorker(options: {
  parts: ExportParts;
  jobsUrl: string;
  writeDocument: WriteDocument;
  pollEverySeconds?: number;
  stopWithinMs?: number;
}): Promise<ExportWorker> {
  const { parts, jobsUrl, writeDocument, pollEverySeconds = 1, stopWithinMs = STOP_WITHIN_MS } = options;
  const jobs = createDataSource({ url: jobsUrl, poolSize: 2 * AT_A_TIME + 1, applicationName: 'tarewright exports' });
  await jobs.initialize();
  const boss = new PgBoss({ connectionString: jobsUrl, max: 2, migrate: false, schedule: false, supervise: true });
  boss.on('error', (error) => parts.log.error({ err: error }, 'the queue of exports'));
  const stopping = new AbortController();
  /** What this server works on, each with the whole of its work: whoever waits for these waits for the requeueing too. */
  const running = new Map<Promise<void>, ExportTask>();
  const run = ([task]: PgBoss.Job<ExportTask>[]): Promise<void> => {
    if (!task) return Promise.resolve();
    const work = workOn(task.data).finally(() => running.delete(work));
    running.set(work, task.data);
    return work;
  };
  const workOn = async (task: ExportTask): Promise<void> => {
    if ((await runExport(parts, jobs, task, writeDocument, stopping.signal)) === 'released') await requeue(jobs, task);
  };
  const atRest = async () => {
    while (running.size > 0) await Promise.allSettled(running.keys());
  };
  await boss.start();
  for (let at = 0; at < AT_A_TIME; at++)
    await boss.work<ExportTask>(EXPORT_QUEUE, { pollingIntervalSeconds: pollEverySeconds, batchSize: 1 }, run);
  const isOwn = ({ firmId, exportId }: ExportTask) =>
    [...running.values()].some((own) => own.firmId === firmId && own.exportId === exportId);
  const tend = async () => {
    const at = parts.now();
    await takeOverWhatRests(parts, jobs, at, isOwn);
    await removeWhatIsLeft(parts, jobs, at);
  };
  const tendQuietly = () =>
    void tend().catch((error: unknown) => parts.log.error({ err: error }, 'exports could not be tended'));
  tendQuietly();
  const timer = setInterval(tendQuietly, TEND_EVERY_MS);
  timer.unref();
  return {
    tend,
    idle: atRest,
    async stop() {
      clearInterval(timer);
      stopping.abort();
      await boss.stop({ graceful: true, timeout: stopWithinMs });
      await atRest();
      await jobs.destroy();
    },
  };
}

const programOf = (firmId: string) => ({ firmId, personId: THE_PROGRAM, siteIds: null });

const requeue = (jobs: DataSource, task: ExportTask): Promise<void> =>
  inFirm(jobs, programOf(task.firmId), (manager) => enqueueExport(manager, task));

/** @param isOwn whether this server works on it itself: after a sleep of the machine it may not have said so for long */
async function takeOverWhatRests(
  parts: ExportParts,
  jobs: DataSource,
  at: Date,
  isOwn: (task: ExportTask) => boolean,
): Promise<void> {
  const untouchedSince = new Date(at.getTime() - GONE_AFTER_MS);
  const found = await jobs.query<ExportTask[]>(
    `select firm_id as "firmId", id as "exportId" from exports_to_tend($1, $2) where what_to_do = 'takeOver'`,
    [untouchedSince, at],
  );
  for (const task of found) if (!isOwn(task)) await takeOver(parts, jobs, task, untouchedSince);
}

/** Its server is gone, or its task was lost: once more, and after three attempts said to be failed. */
function takeOver(parts: ExportParts, jobs: DataSource, task: ExportTask, untouchedSince: Date): Promise<void> {
  return inFirm(jobs, programOf(task.firmId), async (manager) => {
    const exports = exportsRepository(manager);
    const row = await exports.find(task.exportId);
    if (!row) return;
    const { id, attempts, state } = row;
    if (state === 'queued' && (await exports.hasTask(id, EXPORT_QUEUE))) return;
    if (!(await exports.takeBack(id, attempts, untouchedSince, parts.now()))) return;
    if (state === 'running') parts.log.warn({ ...task, attempts }, 'an export was interrupted');
    if (state === 'running' && !isTriedAgain(row)) await exports.giveUp(id, 'interrupted', parts.now());
    else await enqueueExport(manager, task);
  });
}

/**
 * Removes what lies in this server's folder and belongs neither to an export that runs nor to one that may still be
 * downloaded: expired files, however long the server was off, and what a killed server left.
 */
async function removeWhatIsLeft(parts: ExportParts, jobs: DataSource, at: Date): Promise<void> {
  const folder = exportFolder(parts.settings.home);
  for (const { firmId, files } of await folder.list()) {
    const ids = [...new Set(files.map(({ id }) => id))];
    const kept = await inFirm(jobs, programOf(firmId), (manager) => exportsRepository(manager).filesToKeep(ids, at));
    for (const { name, id, attempt } of files)
      if (!kept.has(id) || (attempt !== null && attempt !== kept.get(id))) await folder.removeNamed(firmId, name);
  }
}
