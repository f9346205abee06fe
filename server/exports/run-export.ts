import type { Writable } from 'node:stream';
import type { DataSource, EntityManager } from 'typeorm';
import {
  type CreateExportRequest,
  FILE_KEPT_HOURS,
  PROOF_PACKAGE,
  XLSX_LARGEST_ROWS,
} from '../../shared/exports/export.schema.ts';
import { THE_PROGRAM } from '../../shared/proof/seal-record.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { journalExport } from '../journal/journal-export.ts';
import { beginPackage, writePackage } from '../proof/package.service.ts';
import type { ExportRow, FinishedFile } from './export.repository.ts';
import { exportsRepository } from './export.repository.ts';
import { exportFolder, FolderRefusal, type WrittenFile } from './export-folder.ts';
import type { ExportTask } from './export-queue.ts';
import { mayExport } from './export-rights.ts';
import { countOf, inWordsOf } from './tables/table.ts';
import { isTable, type TableRequest, tableRows } from './tables/tables.ts';
import { writeCsv } from './write-csv.ts';
import { writeXlsx } from './write-xlsx.ts';

export type ExportParts = Pick<
  Parts,
  'settings' | 'log' | 'now' | 'newId' | 'reference' | 'mailer' | 'background' | 'dataSource'
>;

type ProofPackageRequest = Extract<CreateExportRequest, { what: typeof PROOF_PACKAGE }>;

/** Writes a document as PDF to the stream and ends it. @returns how many lines of the log it shows; null: no such subject */
export type WriteDocument = (
  parts: ExportParts,
  manager: EntityManager,
  request: Exclude<CreateExportRequest, TableRequest | ProofPackageRequest>,
  actor: Actor,
  stream: Writable,
) => Promise<number | null>;

type Failure =
  | 'noRights'
  | 'noSubject'
  | 'tooManyRows'
  | 'statementTooLong'
  | 'sealKeyLost'
  | 'folder'
  | 'interrupted'
  | 'fault';

/** A reason to give up that is no fault of the server: the code of its sentence, `export.problem.<code>`. */
export class ExportRefusal extends Error {
  override readonly name = 'ExportRefusal';
  constructor(readonly code: Failure) {
    super(code);
  }
}
/** Cancelled, or somebody else works on it: nothing is to be said about it any more. */
class NotWanted extends Error {}

const TOUCH_EVERY_MS = 500;
const ATTEMPTS = 3;

/**
 * Works on one export, if it is still wanted: writes the file as who asked for it, records that, and makes it ready to be
 * downloaded. `stopping` gives it back to the queue. Never throws for what concerns this export alone.
 * @param jobs connected as the jobs' role
 */
export async function runExport(
  parts: ExportParts,
  jobs: DataSource,
  { firmId, exportId }: ExportTask,
  writeDocument: WriteDocument,
  stopping: AbortSignal,
): Promise<'done' | 'cancelled' | 'failed' | 'released' | 'nothing'> {
  const program = { firmId, personId: THE_PROGRAM, siteIds: null };
  const within = <T>(work: (exports: ReturnType<typeof exportsRepository>) => Promise<T>) =>
    inFirm(jobs, program, (manager) => work(exportsRepository(manager)));
  if (stopping.aborted) return 'nothing';
  const row = await within(async (exports) =>
    (await exports.claim(exportId, parts.now())) ? exports.find(exportId) : null,
  );
  if (!row) return 'nothing';
  const attempt = row.attempts;
  const own = { firmId, id: exportId, attempt };
  const watch = watchExport(parts, jobs, row, stopping);
  const folder = exportFolder(parts.settings.home);
  try {
    const actor = await requireActor(jobs, row);
    const { file, value: filled } = await folder.write(own, (stream) =>
      fill(parts, jobs, row, actor, writeDocument, stream, watch),
    );
    watch.throwIfEnded();
    await patiently(watch, () => finish(parts, jobs, row, filled, file));
    return 'done';
  } catch (error) {
    await folder.remove(own);
    if (stopping.aborted)
      return (await within((exports) => exports.release(exportId, attempt, parts.now()))) ? 'released' : 'cancelled';
    if (error instanceof NotWanted || watch.ended()) return 'cancelled';
    const code = codeOf(error);
    if (!(await within((exports) => exports.fail(exportId, attempt, code, parts.now())))) return 'cancelled';
    if (code === 'fault') parts.log.error({ err: error, firmId, exportId }, 'an export failed');
    if (code === 'folder') parts.log.error({ err: error, firmId, exportId }, 'the folder of the exports refuses');
    return 'failed';
  } finally {
    watch.stop();
  }
}

/** Where somebody else holds the head of the log for long (an import): asks again for as long as the file is wanted. */
async function patiently<T>(watch: Watch, record: () => Promise<T>): Promise<T> {
  for (;;) {
    try {
      return await record();
    } catch (error) {
      if (!isLockTimeout(error)) throw error;
      watch.throwIfEnded();
    }
  }
}
const isLockTimeout = (error: unknown): boolean => (error as { code?: unknown }).code === '55P03';

const codeOf = (error: unknown): Failure => {
  if (error instanceof ExportRefusal) return error.code;
  if (error instanceof Problem && error.errors.some(({ code }) => code === 'statementTooLong'))
    return 'statementTooLong';
  if (error instanceof Problem && error.code === 'sealKeyLost') return 'sealKeyLost';
  return error instanceof FolderRefusal ? 'folder' : 'fault';
};

/** Says every half second that it goes on and how far it is; stops the statement as soon as that is not wanted. */
function watchExport(parts: ExportParts, jobs: DataSource, row: ExportRow, stopping: AbortSignal) {
  const { firmId, id, attempts } = row;
  let pid: number | null = null;
  let rows = 0;
  let total: number | null = null;
  let isEnded = false;
  let touching: Promise<void> = Promise.resolve();
  // Only a statement of the jobs' own role can be cancelled by it.
  const cancel = async () => void (pid !== null && (await jobs.query('select pg_cancel_backend($1)', [pid])));
  const end = async () => {
    isEnded = true;
    await cancel();
  };
  const touch = async () => {
    if (pid !== null) {
      const [copied] = await jobs.query<{ count: string }[]>(
        'select tuples_processed as count from pg_stat_progress_copy where pid = $1',
        [pid],
      );
      rows = Number(copied?.count ?? rows);
    }
    const program = { firmId, personId: THE_PROGRAM, siteIds: null };
    const isWanted = await inFirm(jobs, program, (manager) =>
      exportsRepository(manager).touch(id, attempts, { rows, total }, parts.now()),
    );
    if (!isWanted || stopping.aborted) await end();
  };
  const timer = setInterval(() => {
    touching = touching.then(touch).catch((error: unknown) => {
      parts.log.warn({ err: error, exportId: id }, 'an export could not say how far it is');
    });
  }, TOUCH_EVERY_MS);
  const onStop = () => void end().catch(() => undefined);
  stopping.addEventListener('abort', onStop);
  return {
    running(statement: { pid: number } | null) {
      pid = statement?.pid ?? null;
    },
    counted(count: number) {
      total = count;
      this.throwIfEnded();
    },
    reached(count: number) {
      rows = count;
      this.throwIfEnded();
    },
    cancel,
    ended: () => isEnded,
    throwIfEnded() {
      if (isEnded) throw new NotWanted();
    },
    stop() {
      clearInterval(timer);
      stopping.removeEventListener('abort', onStop);
    },
  };
}
type Watch = ReturnType<typeof watchExport>;

/** Who asked, with the rights of this moment: who left the firm meanwhile gets nothing. @throws ExportRefusal */
async function requireActor(jobs: DataSource, row: ExportRow): Promise<Actor> {
  const { firmId, requestedBy: personId, locale } = row;
  const standing = await inFirm(jobs, { firmId, personId, siteIds: null }, (manager) =>
    exportsRepository(manager).findStanding(personId),
  );
  const actor = standing && { ...standing, firmId, personId, locale, tokenScopes: null };
  if (!actor || !mayExport(actor, row as CreateExportRequest)) throw new ExportRefusal('noRights');
  return actor;
}

/** What is in the file: rows, or lines of a document; the record that it is, where it had to be one before it was made. */
interface Filled {
  rows: number;
  record: number | null;
}
async function fill(
  parts: ExportParts,
  jobs: DataSource,
  row: ExportRow,
  actor: Actor,
  writeDocument: WriteDocument,
  stream: Writable,
  watch: Watch,
): Promise<Filled> {
  const request = row as CreateExportRequest;
  if (request.what === PROOF_PACKAGE) {
    // It holds its own record, and the seal over it.
    const packing = await patiently(watch, () => beginPackage(parts, jobs, actor, request.filters, row.id));
    watch.counted(packing.sealSequence);
    const rows = await writePackage(parts, jobs, actor, packing, stream, (count) => watch.reached(count));
    return { rows, record: packing.exportSequence };
  }
  const work = async (manager: EntityManager): Promise<number> => {
    if (!isTable(request)) {
      const lines = await writeDocument({ ...parts, dataSource: jobs }, manager, request, actor, stream);
      if (lines === null) throw new ExportRefusal('noSubject');
      return lines;
    }
    const rows = inWordsOf(tableRows(request), actor.locale);
    const [counted] = await manager.query<{ count: string }[]>(countOf(rows));
    const total = Number(counted?.count);
    if (request.format === 'xlsx' && total > XLSX_LARGEST_ROWS) throw new ExportRefusal('tooManyRows');
    watch.counted(total);
    if (request.format === 'csv') return writeCsv(manager, rows, stream, watch);
    return writeXlsx(manager, request.what, rows, stream, (count) => watch.reached(count));
  };
  try {
    return { rows: await inFirm(jobs, actor, work, 'REPEATABLE READ'), record: null };
  } finally {
    watch.running(null);
  }
}

/** The record and the end of the job stand or fall together: no file without its record. */
function finish(
  parts: ExportParts,
  jobs: DataSource,
  row: ExportRow,
  { rows, record: made }: Filled,
  file: WrittenFile,
): Promise<void> {
  const { firmId, id, what, format, filters, requestedBy: personId, attempts } = row;
  const at = parts.now();
  const fileName = `${FILE_NAMES[what] ?? what}-${at.toISOString().slice(0, 10)}.${format}`;
  return inFirm(jobs, { firmId, personId, siteIds: null }, async (manager) => {
    const about = { exportId: id, filters, rows: String(rows), sha256: file.sha256, sizeBytes: String(file.sizeBytes) };
    const record = made ?? (await journalExport(parts, manager, { personId }, { document: what, format, about }));
    const finished: FinishedFile = {
      rows,
      fileName,
      ...file,
      record,
      at,
      expiresAt: new Date(at.getTime() + FILE_KEPT_HOURS * 3600 * 1000),
    };
    if (!(await exportsRepository(manager).finish(id, attempts, finished))) throw new NotWanted();
  });
}

const FILE_NAMES: Readonly<Record<string, string>> = {
  entries: 'log',
  unitLog: 'unit-log',
  cylinderStatement: 'cylinder-statement',
  periodReport: 'period-report',
  disposalReport: 'disposal-report',
  jobRecord: 'job-record',
  chargeLabel: 'charge-label',
  proofPackage: 'proof',
};

/** Whether an export that nobody works on any more is tried once more. */
export const isTriedAgain = (row: Pick<ExportRow, 'attempts'>): boolean => row.attempts < ATTEMPTS;
