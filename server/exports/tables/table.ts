import pg from 'pg';
import type { CreateExportRequest, ExportTable } from '../../../shared/exports/export.schema.ts';
import type { Locale } from '../../../shared/session/session.schema.ts';
import type { Conditions } from '../../lists/list-query.ts';
import { columnHead, yesOrNo } from '../../messages/column-heads.ts';

/** How a spreadsheet takes a cell; CSV takes the text as it is. */
export type CellKind = 'text' | 'number' | 'boolean' | 'instant' | 'day';
/**
 * `sql` of a text that a person may have typed goes through `typed`. `asTyped`: the same text for a spreadsheet, whose texts
 * never run, so that it needs no apostrophe.
 */
export type Column = readonly [name: string, sql: string, kind?: CellKind, asTyped?: string];

/** The rows of one table as filtered. */
export interface TableRows {
  columns: readonly Column[];
  from: string;
  /** Where `from` has to be joined only to show something: enough to count by. */
  countFrom?: string;
  conditions: Conditions;
  order: string;
}
export type TableOf<W extends ExportTable> = (
  filters: Extract<CreateExportRequest, { what: W }>['filters'],
) => TableRows;

/** A cell that a spreadsheet would run as a formula is made plain text by an apostrophe before it. */
export const plain = (sql: string): string => `case when ${sql} ~ '^[=+@\\t\\r-]' then '''' || ${sql} else ${sql} end`;

/** What a person typed, defused where a spreadsheet would run it as a formula. */
export const typed = (name: string, sql: string): Column => [name, plain(sql), 'text', sql];
export const instant = (name: string, sql: string): Column => [
  name,
  `to_char(${sql} at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"')`,
  'instant',
];
export const grams = (name: string, sql: string): Column => [name, `trim_scale(${sql} / 1e6::numeric)`, 'number'];

/** `-tag` is `tag desc`: `columns` are what the name stands for. */
export function orderOf(sort: string, columns: readonly string[]): string {
  return columns.map((column) => `${column} ${sort.startsWith('-') ? 'desc' : 'asc'}`).join(', ');
}

/** Yes or no in words; what is not known stays empty. */
function inWords(sql: string, locale: Locale): string {
  const { yes, no } = yesOrNo(locale);
  return `case when ${sql} then ${pg.escapeLiteral(yes)} when not (${sql}) then ${pg.escapeLiteral(no)} end`;
}

/** As who takes it out reads it in a spreadsheet: heads in words with their unit, yes and no instead of true and false. */
export function inWordsOf(rows: TableRows, locale: Locale): TableRows {
  const columns = rows.columns.map(
    ([name, sql, kind, asTyped]): Column => [
      columnHead(name, locale),
      kind === 'boolean' ? inWords(sql, locale) : sql,
      kind,
      asTyped,
    ],
  );
  return { ...rows, columns };
}

/** COPY takes no values, so they are written into the statement, each quoted by the driver. */
const withValues = ({ sql, values }: Pick<Conditions, 'sql' | 'values'>): string =>
  sql.replaceAll(/\$(\d+)/g, (_, index) => pg.escapeLiteral(String(values[Number(index) - 1])));

export function selectOf({ columns, from, conditions, order }: TableRows): string {
  const select = columns.map(([name, sql]) => `${sql} as "${name}"`).join(', ');
  return `select ${select} from ${from} where ${withValues(conditions)} order by ${order}`;
}

export const countOf = ({ from, countFrom, conditions }: TableRows, atMost?: number): string =>
  `select count(*) as count from (select from ${countFrom ?? from} where ${withValues(conditions)}
     ${atMost === undefined ? '' : `limit ${atMost}`}) counted`;
