import type { Writable } from 'node:stream';
import type { EntityManager } from 'typeorm';
import { type CellKind, selectOf, type TableRows } from './tables/table.ts';

const ROWS_A_FETCH = 1_000;
const WIDTH: Readonly<Record<CellKind, number>> = { text: 18, number: 13, boolean: 8, instant: 19, day: 12 };
const FORM: Readonly<Partial<Record<CellKind, string>>> = { instant: 'yyyy-mm-dd hh:mm:ss', day: 'yyyy-mm-dd' };

/** Of a spreadsheet: a longer text (a long record of the journal) is cut there, and whole in CSV. */
const LONGEST_CELL = 32_767;

/** XML 1.0 holds none of these, and a spreadsheet that meets one refuses the file. */
// biome-ignore lint/suspicious/noControlCharactersInRegex: these are the ones
const NOT_IN_XML = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/g;

function cellOf(value: unknown, kind: CellKind): string | number | Date | null {
  if (value === null || value === undefined) return null;
  if (kind === 'number') return Number(value);
  if (kind === 'instant') return new Date(String(value));
  if (kind === 'day') return new Date(`${String(value).slice(0, 10)}T00:00:00Z`);
  const text = String(value).replaceAll(NOT_IN_XML, '');
  return text.length > LONGEST_CELL ? `${text.slice(0, LONGEST_CELL - 1)}…` : text;
}

/**
 * Writes rows as one sheet of a spreadsheet, row by row, from a cursor of the transaction that is open. Texts are
 * texts, never formulas; masses are numbers; times are UTC.
 * @param progress told the number of rows after each thousand; throws to stop
 */
export async function writeXlsx(
  manager: EntityManager,
  name: string,
  rows: TableRows,
  stream: Writable,
  progress: (rows: number) => void,
): Promise<number> {
  // Half a second and 30 MB that only who makes a spreadsheet pays.
  const { default: excel } = await import('exceljs');
  const book = new excel.stream.xlsx.WorkbookWriter({ stream, useStyles: true, useSharedStrings: false });
  const sheet = book.addWorksheet(name, { views: [{ state: 'frozen', ySplit: 1 }] });
  const kinds = rows.columns.map(([, , kind]) => kind ?? 'text');
  sheet.columns = rows.columns.map(([header], index) => {
    const kind = kinds[index] ?? 'text';
    const numFmt = FORM[kind];
    return { header, width: WIDTH[kind], ...(numFmt ? { style: { numFmt } } : {}) };
  });
  const head = sheet.getRow(1);
  head.font = { bold: true };
  head.commit();
  const asText = {
    ...rows,
    columns: rows.columns.map(([column, sql, kind, asTyped = sql]) => [column, dayAsText(asTyped, kind)] as const),
  };
  await manager.query(`declare export_rows no scroll cursor for ${selectOf(asText)}`);
  let count = 0;
  for (;;) {
    const fetched = await manager.query<Record<string, unknown>[]>(`fetch forward ${ROWS_A_FETCH} from export_rows`);
    for (const row of fetched) sheet.addRow(Object.values(row).map((v, i) => cellOf(v, kinds[i] ?? 'text'))).commit();
    count += fetched.length;
    progress(count);
    if (fetched.length < ROWS_A_FETCH) break;
    // Lets what was written reach the disk before more is made.
    while (stream.writableNeedDrain) await new Promise((resolve) => setTimeout(resolve, 5));
  }
  await manager.query('close export_rows');
  sheet.commit();
  await book.commit();
  return count;
}

/** The driver would read a day as midnight in the server's own zone. */
const dayAsText = (sql: string, kind: CellKind | undefined): string => (kind === 'day' ? `(${sql})::text` : sql);
