import type { EntityManager } from 'typeorm';
import type { CreateExportRequest, ExportView, ExportWhat } from '../../shared/exports/export.schema.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import type { Role } from '../../shared/permissions/roles.ts';
import type { Actor } from '../http/actor.ts';
import { Conditions, readPage, type Sort } from '../lists/list-query.ts';
import { messageFor } from '../messages/translate.ts';
import { ExportEntity } from './export.entity.ts';
import { mayExport } from './export-rights.ts';

export type ExportRow = ExportEntity;
type ExportJson = Omit<
  ExportRow,
  'firmId' | 'locale' | 'attempts' | 'touchedAt' | 'sha256' | 'rowsDone' | 'rowsTotal' | 'sizeBytes' | 'recordSequence'
> & {
  name: string | null;
  sha256: string | null;
  rowsDone: string;
  rowsTotal: string | null;
  sizeBytes: string | null;
  recordSequence: string | null;
};

const SELECT = `x.id, x.what, x.format, x.filters, x.state, x.rows_done as "rowsDone", x.rows_total as "rowsTotal",
  x.requested_by as "requestedBy", p.name, x.requested_at as "requestedAt", x.finished_at as "finishedAt",
  x.expires_at as "expiresAt", x.file_name as "fileName", x.size_bytes as "sizeBytes",
  encode(x.sha256, 'hex') as sha256, x.record_sequence as "recordSequence", x.problem`;
const FROM = 'export x left join person p on p.id = x.requested_by';
const NEWEST_FIRST: Sort = {
  columns: [
    { sql: 'x.requested_at', type: 'timestamptz' },
    { sql: 'x.id', type: 'uuid' },
  ],
  direction: 'desc',
};

export interface Viewer {
  actor: Actor;
  now: Date;
}

export function exportsRepository(manager: EntityManager) {
  const rows = manager.getRepository(ExportEntity);
  return {
    find: (id: string): Promise<ExportRow | null> => rows.findOneBy({ id }),
    async insert(
      row: Pick<ExportRow, 'firmId' | 'id' | 'what' | 'format' | 'locale' | 'requestedBy'> & {
        filters: object;
        at: Date;
      },
    ): Promise<void> {
      await manager.query(
        `insert into export (firm_id, id, what, format, filters, locale, requested_by, requested_at, touched_at)
           values ($1, $2, $3, $4, $5, $6, $7, $8, $8)`,
        [row.firmId, row.id, row.what, row.format, JSON.stringify(row.filters), row.locale, row.requestedBy, row.at],
      );
    },
    async countUnfinished(personId: string): Promise<number> {
      const [counted] = await manager.query<{ count: string }[]>(
        `select count(*) from export where requested_by = $1 and state in ('queued', 'running')`,
        [personId],
      );
      return Number(counted?.count);
    },
    async findView(id: string, viewer: Viewer): Promise<ExportView | null> {
      const [row] = await manager.query<ExportJson[]>(`select ${SELECT} from ${FROM} where x.id = $1`, [id]);
      return row ? present(row, viewer) : null;
    },
    list(page: PageQuery, onlyOf: string | null, viewer: Viewer) {
      const conditions = new Conditions().andIf('x.requested_by = $', onlyOf);
      const list = { select: SELECT, from: FROM, conditions, sort: NEWEST_FIRST, page, of: `exports ${onlyOf}` };
      return readPage<ExportJson, ExportView>(manager, list, (row) => present(row, viewer));
    },
    /** @returns whether there was anything left to cancel */
    cancel: (id: string, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'cancelled', finished_at = $2 where id = $1 and state in ('queued', 'running')`,
        [id, at],
      ),
    /** Takes it on, unless somebody else has or it is not wanted any more. */
    claim: (id: string, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'running', attempts = attempts + 1, rows_done = 0, rows_total = null, touched_at = $2
           where id = $1 and state = 'queued'`,
        [id, at],
      ),
    /** Says how far it is. @returns whether it is still wanted, and still this attempt's */
    touch: (id: string, attempt: number, reached: { rows: number; total: number | null }, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set touched_at = $5, rows_done = greatest(rows_done, $3), rows_total = coalesce($4, rows_total)
           where id = $1 and state = 'running' and attempts = $2`,
        [id, attempt, reached.rows, reached.total, at],
      ),
    /** Back into the queue: its server stops, which is no failed attempt. @returns whether it was still this attempt's */
    release: (id: string, attempt: number, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'queued', touched_at = $3, attempts = attempts - 1
           where id = $1 and attempts = $2 and state = 'running'`,
        [id, attempt, at],
      ),
    /**
     * Back into the queue: its server is gone, or its task was lost. Several servers may find that at the same time.
     * @returns whether this one was the first
     */
    takeBack: (id: string, attempt: number, untouchedSince: Date, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'queued', touched_at = $4
           where id = $1 and attempts = $2 and touched_at < $3 and state in ('queued', 'running')`,
        [id, attempt, untouchedSince, at],
      ),
    /** @returns whether it was still this attempt's */
    fail: (id: string, attempt: number, problem: string, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'failed', problem = $3, finished_at = $4
           where id = $1 and attempts = $2 and state = 'running'`,
        [id, attempt, problem, at],
      ),
    /** Taken back once too often: in the same transaction, nobody else can have begun it. */
    giveUp: (id: string, problem: string, at: Date): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'failed', problem = $2, finished_at = $3 where id = $1 and state = 'queued'`,
        [id, problem, at],
      ),
    /** A task that no server has begun yet stands in the queue for it. */
    async hasTask(id: string, queue: string): Promise<boolean> {
      const [found] = await manager.query<{ has: boolean }[]>(
        `select exists (select from pgboss.job
           where name = $1 and state = 'created' and data ->> 'exportId' = $2) as has`,
        [queue, id],
      );
      return found?.has === true;
    },
    /** Which of these attempts still have a right to their file: what works on it, or made what may be downloaded. */
    async filesToKeep(ids: readonly string[], now: Date): Promise<Map<string, number>> {
      const kept = await manager.query<{ id: string; attempts: number }[]>(
        `select id, attempts from export where id = any ($1::uuid[])
           and (state = 'running' or (state = 'done' and expires_at > $2))`,
        [ids, now],
      );
      return new Map(kept.map(({ id, attempts }) => [id, attempts]));
    },
    finish: (id: string, attempt: number, file: FinishedFile): Promise<boolean> =>
      changed(
        manager,
        `update export set state = 'done', rows_done = $3, rows_total = $3, file_name = $4, size_bytes = $5,
           sha256 = decode($6, 'hex'), record_sequence = $7, finished_at = $8, expires_at = $9
           where id = $1 and attempts = $2 and state = 'running'`,
        [id, attempt, file.rows, file.fileName, file.sizeBytes, file.sha256, file.record, file.at, file.expiresAt],
      ),
    /** Who asked for it, as they stand now; null: no longer in the firm. */
    async findStanding(personId: string): Promise<{ roles: Role[]; siteIds: string[] | null } | null> {
      const [standing] = await manager.query<{ roles: Role[]; siteIds: string[] | null }[]>(
        'select roles, site_ids as "siteIds" from membership where person_id = $1 and active',
        [personId],
      );
      if (!standing) return null;
      // Sites limit those who only read; whoever works for the firm sees all of it.
      return standing.roles.every((role) => role === 'reader') ? standing : { ...standing, siteIds: null };
    },
  };
}

export interface FinishedFile {
  rows: number;
  fileName: string;
  sizeBytes: number;
  sha256: string;
  record: number;
  at: Date;
  expiresAt: Date;
}

/** TypeORM answers an update with its rows and their number. */
async function changed(manager: EntityManager, sql: string, values: unknown[]): Promise<boolean> {
  const [, count] = (await manager.query(sql, values)) as [unknown, number];
  return count > 0;
}

function present(row: ExportJson, { actor, now }: Viewer): ExportView {
  const isExpired = row.state === 'done' && row.expiresAt !== null && row.expiresAt <= now;
  return {
    id: row.id,
    what: row.what as ExportWhat,
    format: row.format,
    filters: row.filters as Record<string, unknown>,
    state: isExpired ? 'expired' : row.state,
    rowsDone: Number(row.rowsDone),
    rowsTotal: row.rowsTotal === null ? null : Number(row.rowsTotal),
    requestedBy: { id: row.requestedBy, name: row.name ?? '' },
    requestedAt: row.requestedAt.toISOString(),
    finishedAt: row.finishedAt?.toISOString() ?? null,
    expiresAt: row.expiresAt?.toISOString() ?? null,
    fileName: row.fileName,
    sizeBytes: row.sizeBytes === null ? null : Number(row.sizeBytes),
    sha256: row.sha256,
    record: row.recordSequence === null ? null : Number(row.recordSequence),
    problem:
      row.problem === null
        ? null
        : { code: row.problem, message: messageFor(`export.problem.${row.problem}`, actor.locale) },
    mayDownload:
      row.state === 'done' &&
      !isExpired &&
      row.requestedBy === actor.personId &&
      mayExport(actor, row as CreateExportRequest),
  };
}
