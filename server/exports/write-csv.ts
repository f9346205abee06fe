import type { Writable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type pg from 'pg';
import copyStreams from 'pg-copy-streams';
import type { EntityManager } from 'typeorm';
import { selectOf, type TableRows } from './tables/table.ts';

/** How a long statement is watched and stopped from another connection. */
export interface RunningStatement {
  /** Process of the connection that runs it. */
  pid: number;
}

/**
 * Streams rows as CSV (RFC 4180, with a head line) straight from PostgreSQL, in constant memory. Aborting cancels the
 * statement itself.
 * @param running told before the statement starts
 */
export async function writeCsv(
  manager: EntityManager,
  rows: TableRows,
  stream: Writable,
  running: (statement: RunningStatement) => void,
): Promise<number> {
  const client = (await manager.queryRunner?.connect()) as pg.PoolClient;
  const [backend] = await manager.query<{ pid: number }[]>('select pg_backend_pid() as pid');
  running({ pid: Number(backend?.pid) });
  const copy = client.query(copyStreams.to(`copy (${selectOf(rows)}) to stdout with (format csv, header)`));
  await pipeline(copy, stream);
  return copy.rowCount;
}
