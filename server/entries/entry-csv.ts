import { pipeline } from 'node:stream/promises';
import type { Response } from 'express';
import type pg from 'pg';
import copyStreams from 'pg-copy-streams';
import type { EntityManager } from 'typeorm';
import type { EntryExportQuery } from '../../shared/entries/entry.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { entries } from '../exports/tables/entry-table.ts';
import { inWordsOf, selectOf } from '../exports/tables/table.ts';

/** Streams the log as CSV straight from PostgreSQL, in constant memory, inside the caller's transaction. */
export async function sendEntriesCsv(
  manager: EntityManager,
  query: EntryExportQuery,
  locale: Locale,
  res: Response,
  fileName: string,
): Promise<void> {
  const select = selectOf(inWordsOf(entries(query), locale));
  const client = (await manager.queryRunner?.connect()) as pg.PoolClient;
  const rows = client.query(copyStreams.to(`copy (${select}) to stdout with (format csv, header)`));
  res.type('text/csv; charset=utf-8').attachment(fileName);
  await pipeline(rows, res);
}
