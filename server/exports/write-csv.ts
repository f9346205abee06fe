import { once } from 'node:events';
import type { Writable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { setTimeout } from 'node:timers/promises';
import type pg from 'pg';
import copyStreams from 'pg-copy-streams';
import type { EntityManager } from 'typeorm';
import { selectOf, type TableRows } from './tables/table.ts';

/** Watches a long statement from another connection, and stops it there. */
export interface StatementWatch {
  /** `pid`: process of the connection that runs it; null: it has ended. */
  running(statement: { pid: number } | null): void;
  cancel(): Promise<void>;
}

/** A cancelled statement ends within milliseconds; a connection that is gone never says so. */
const LONGEST_CANCEL_MS = 5_000;

/**
 * Streams rows as CSV (RFC 4180, with a head line) straight from PostgreSQL, in constant memory. Where the
 * stream fails, the statement is cancelled too, and the connection is ready for the rollback.
 */
export async function writeCsv(
  manager: EntityManager,
  rows: TableRows,
  stream: Writable,
  watch: StatementWatch,
): Promise<number> {
  const client = (await manager.queryRunner?.connect()) as pg.PoolClient;
  const [backend] = await manager.query<{ pid: number }[]>('select pg_backend_pid() as pid');
  watch.running({ pid: Number(backend?.pid) });
  const drained = once(client, 'drain').catch(() => undefined);
  const copy = client.query(copyStreams.to(`copy (${selectOf(rows)}) to stdout with (format csv, header)`));
  try {
    await pipeline(copy, stream);
  } catch (error) {
    await watch.cancel();
    await Promise.race([drained, setTimeout(LONGEST_CANCEL_MS)]);
    throw error;
  } finally {
    watch.running(null);
  }
  return copy.rowCount;
}
