import type { EntityManager } from 'typeorm';
import {
  BALANCE_DIFFERS,
  COUNTED_TABLES,
  FIRST_DIFFERENT,
  MONTH_SUM_DIFFERS,
  ROW_WITHOUT_RECORD,
  ROWS_TOLD,
  WORDS_DIFFER,
} from './column-checks.ts';
import { HOLDER_DIFFERS, STATE_DIFFERS, UNDO_DIFFERS } from './derived-checks.ts';
import type { RegisterDifference } from './register-checks.ts';

export interface ChainedRow {
  sequence: string;
  content: string;
  contentHash: Buffer;
  hash: Buffer;
}
export interface Difference {
  sequence: number;
  table: string;
  /** Empty: the row is gone. */
  column: string;
}
export type RowCounts = Record<(typeof COUNTED_TABLES)[number], number>;
export const NO_ROWS: RowCounts = { entry_group: 0, entry: 0, reading: 0, statement: 0, group_document: 0 };

/** Whole ranges of the log are read: what is planned for a page of a list would take an index for each row. */
export async function planForRanges(manager: EntityManager): Promise<void> {
  await manager.query(
    `select set_config('enable_seqscan', 'off', true), set_config('plan_cache_mode', 'force_custom_plan', true),
       set_config('jit', 'off', true)`,
  );
}

export function readChain(manager: EntityManager, after: number, limit: number): Promise<ChainedRow[]> {
  return manager.query(
    `select sequence, content, content_hash as "contentHash", hash from journal_record
       where sequence > $1 order by sequence limit $2`,
    [after, limit],
  );
}

/** The first record in the range whose table says something else than its text. */
export async function findDifference(manager: EntityManager, after: number, upTo: number): Promise<Difference | null> {
  const [row] = await manager.query<{ sequence: string; table: string; column: string }[]>(FIRST_DIFFERENT, [
    after,
    upTo,
  ]);
  return row ? { ...row, sequence: Number(row.sequence) } : null;
}

export async function countRowsTold(manager: EntityManager, after: number, upTo: number): Promise<RowCounts> {
  const [row] = await manager.query<RowCounts[]>(ROWS_TOLD, [after, upTo]);
  return row ?? NO_ROWS;
}

/** The first words in the range that are not those whose hash stands in their record. */
export async function findOtherWords(
  manager: EntityManager,
  after: number,
  upTo: number,
): Promise<{ sequence: number; field: string } | null> {
  const [row] = await manager.query<{ sequence: string; field: string }[]>(WORDS_DIFFER, [after, upTo]);
  return row ? { ...row, sequence: Number(row.sequence) } : null;
}

/** A table that holds other rows than the records tell of; `id` of one that no record speaks of. */
export async function findRowWithoutRecord(
  manager: EntityManager,
  told: RowCounts,
): Promise<{ table: string; id: string } | null> {
  for (const table of COUNTED_TABLES) {
    const [{ count } = { count: '0' }] = await manager.query<{ count: string }[]>(`select count(*) from ${table}`);
    if (Number(count) === told[table]) continue;
    const [row] = await manager.query<{ id: string }[]>(ROW_WITHOUT_RECORD[table]);
    return { table, id: row?.id ?? '?' };
  }
  return null;
}

/** A book that is not the sum of its entries, or that is told otherwise where postings and month close go by it. */
export async function findOtherBook(manager: EntityManager): Promise<{ place: string; refrigerant: string } | null> {
  for (const sql of [BALANCE_DIFFERS, MONTH_SUM_DIFFERS, UNDO_DIFFERS, STATE_DIFFERS]) {
    const [row] = await manager.query<{ place: string; refrigerant: string }[]>(sql);
    if (row) return row;
  }
  return null;
}

/** Who held a cylinder, told otherwise than the records of its register; as `findOtherRegisterRow` tells it. */
export async function findOtherHolder(manager: EntityManager): Promise<RegisterDifference | null> {
  const [row] = await manager.query<{ sequence: string | null; id: string; column: string }[]>(HOLDER_DIFFERS);
  if (!row) return null;
  return { ...row, sequence: row.sequence === null ? null : Number(row.sequence), table: 'cylinder_holder' };
}

export async function countRecords(manager: EntityManager): Promise<number> {
  const [row] = await manager.query<{ sequence: string }[]>(
    'select sequence from journal_record order by sequence desc limit 1',
  );
  return Number(row?.sequence ?? 0);
}
