import { pipeline } from 'node:stream/promises';
import type { Response } from 'express';
import pg from 'pg';
import copyStreams from 'pg-copy-streams';
import type { EntityManager } from 'typeorm';
import type { EntryExportQuery } from '../../shared/entries/entry.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import type { Conditions } from '../lists/list-query.ts';
import { columnHead, yesOrNo } from '../messages/column-heads.ts';
import { ENTRY_SORT, entriesFrom, entryConditions } from './entry-list.repository.ts';

/** A cell that a spreadsheet would run as a formula is made plain text by an apostrophe before it. */
export const plain = (sql: string): string => `case when ${sql} ~ '^[=+@\\t\\r-]' then '''' || ${sql} else ${sql} end`;

/** Yes or no in words; what is not known stays empty. */
export function inWords(sql: string, locale: Locale): string {
  const { yes, no } = yesOrNo(locale);
  return `case when ${sql} then ${pg.escapeLiteral(yes)} when not (${sql}) then ${pg.escapeLiteral(no)} end`;
}

const place = (end: 'from' | 'to', asText: (sql: string) => string): string =>
  `coalesce(${asText(`${end}_label.label`)}, e.${end}_place || coalesce(' (' || e.${end}_as || ')', ''))`;

const label = (end: 'from' | 'to'): string => `left join lateral (
    select tag as label from cylinder c where c.firm_id = e.firm_id and c.id = e.${end}_id
    union all select tag from unit u where u.firm_id = e.firm_id and u.id = e.${end}_id
    union all select name from party y where y.firm_id = e.firm_id and y.id = e.${end}_id
    union all select name from customer m where m.firm_id = e.firm_id and m.id = e.${end}_id
    limit 1) ${end}_label on true`;

/** Names of the columns, whose words are `column.<name>` of the catalogue. */
const entryColumns = (asText: (sql: string) => string): readonly (readonly [name: string, sql: string])[] => [
  ['sequence', 'e.sequence'],
  ['occurredAt', `to_char(e.occurred_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"')`],
  ['recordedAt', `to_char(e.recorded_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"')`],
  ['bookingMonth', 'e.booking_month'],
  ['late', 'e.late'],
  ['kind', 'e.kind'],
  ['refrigerant', 'e.refrigerant'],
  ['massG', 'trim_scale(e.mass_micrograms / 1e6::numeric)'],
  ['typedValue', 'e.typed_value'],
  ['typedUnit', 'e.typed_unit'],
  ['fromPlace', 'e.from_place'],
  ['from', place('from', asText)],
  ['toPlace', 'e.to_place'],
  ['to', place('to', asText)],
  ['howKnown', 'e.how_known'],
  ['addedByServer', 'e.added_by_server'],
  ['atLeast', 'e.at_least'],
  ['recordedBy', asText('p.name')],
  ['reason', asText('g.reason')],
  ['unit', asText('un.tag')],
  ['site', asText('s.name')],
  ['entryId', 'e.id'],
  ['groupId', 'e.group_id'],
  ['correctsGroupId', 'e.corrects_group_id'],
  ['reversedByGroupId', 'r.id'],
  ['reversesGroupId', 'g.reverses_group_id'],
];
export const ENTRY_COLUMNS = entryColumns(plain);
/** For a spreadsheet, whose texts never run. */
export const ENTRY_COLUMNS_AS_TYPED = entryColumns((sql) => sql);

/** COPY takes no values, so they are written into the statement, each quoted by the driver. */
export const withValues = ({ sql, values }: Pick<Conditions, 'sql' | 'values'>): string =>
  sql.replaceAll(/\$(\d+)/g, (_, index) => pg.escapeLiteral(String(values[Number(index) - 1])));

/** The entries as `e`, with everything that the columns speak of. */
export const ENTRIES_WITH_LABELS = `${entriesFrom('entry e')} ${label('from')} ${label('to')}
    left join unit un on un.firm_id = e.firm_id and un.id = e.unit_id`;

const YES_OR_NO: ReadonlySet<string> = new Set(['late', 'addedByServer', 'atLeast']);

function statement(query: EntryExportQuery, locale: Locale): string {
  const where = withValues(entryConditions(query));
  const { columns, direction } = ENTRY_SORT[query.sort];
  const order = columns.map(({ sql }) => `${sql} ${direction}`).join(', ');
  const select = ENTRY_COLUMNS.map(
    ([name, sql]) => `${YES_OR_NO.has(name) ? inWords(sql, locale) : sql} as "${columnHead(name, locale)}"`,
  ).join(', ');
  return `copy (select ${select} from ${ENTRIES_WITH_LABELS} where ${where} order by ${order}) to stdout with (format csv, header)`;
}

/** Streams the log as CSV straight from PostgreSQL, in constant memory, inside the caller's transaction. */
export async function sendEntriesCsv(
  manager: EntityManager,
  query: EntryExportQuery,
  locale: Locale,
  res: Response,
  fileName: string,
): Promise<void> {
  const client = (await manager.queryRunner?.connect()) as pg.PoolClient;
  const rows = client.query(copyStreams.to(statement(query, locale)));
  res.type('text/csv; charset=utf-8').attachment(fileName);
  await pipeline(rows, res);
}
