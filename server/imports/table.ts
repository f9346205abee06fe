import { IMPORT_LIMITS, type ImportView } from '../../shared/imports/import.schema.ts';
import { Problem } from '../http/problem.ts';

/** A table as its file holds it: heads, and cells as text. */
export interface Table {
  read: ImportView['read'];
  heads: string[];
  rows: TableRow[];
}
export interface TableRow {
  /** In the file; the heads are row 1. */
  number: number;
  cells: string[];
}

export const refusedFile = (code: string, params: Record<string, string | number> = {}): Problem =>
  new Problem(code, { params, errors: [{ code, path: '/file', params }] });

/** NUL and half surrogates cannot be stored; other control characters are no part of a word. */
// biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is taken away
const clean = (text: string): string => text.replace(/[\u0000-\u0008\u000b-\u001f\p{Cs}]/gu, '').trim();

/** Heads and filled rows of a grid, held against the bounds. @throws Problem 422 */
export function tableOf(
  grid: readonly { number: number; cells: readonly string[] }[],
  read: Omit<ImportView['read'], 'rows' | 'decimal'>,
): Table {
  const [first, ...rest] = grid
    .map(({ number, cells }) => ({ number, cells: cells.map(clean) }))
    .filter(({ cells }) => cells.some((cell) => cell !== ''));
  if (!first) throw refusedFile('importEmpty');
  const width = first.cells.findLastIndex((head) => head !== '') + 1;
  if (width > IMPORT_LIMITS.columns) {
    throw refusedFile('importTooManyColumns', { given: width, allowed: IMPORT_LIMITS.columns });
  }
  if (rest.length === 0) throw refusedFile('importEmpty');
  if (rest.length > IMPORT_LIMITS.rows) {
    throw refusedFile('importTooManyRows', { given: rest.length, allowed: IMPORT_LIMITS.rows });
  }
  for (const { number, cells } of rest) {
    if (cells.some((cell) => cell.length > IMPORT_LIMITS.cellCharacters)) {
      throw refusedFile('importCellTooLong', { row: number, allowed: IMPORT_LIMITS.cellCharacters });
    }
  }
  const rows = rest.map(({ number, cells }) => ({
    number,
    cells: Array.from({ length: width }, (_, column) => cells[column] ?? ''),
  }));
  return {
    heads: toldApart(first.cells.slice(0, width).map((head, column) => head || `#${column + 1}`)),
    rows,
    read: { ...read, rows: rows.length, decimal: decimalOf(rows, read.delimiter) },
  };
}

/** Heads that repeat get their number, so that a choice and an error name one column: `Tag`, `Tag (2)`. */
function toldApart(heads: readonly string[]): string[] {
  const seen = new Map<string, number>();
  return heads.map((head) => {
    const count = (seen.get(head.toLowerCase()) ?? 0) + 1;
    seen.set(head.toLowerCase(), count);
    return count === 1 ? head : `${head} (${count})`;
  });
}

/** What separates decimals: only what cannot group digits says so (7,5 or 11.34); without it, as the delimiter suggests. */
function decimalOf(rows: readonly TableRow[], delimiter: string | null): 'point' | 'comma' {
  const counts = { point: 0, comma: 0 };
  for (const { cells } of rows) {
    for (const cell of cells) {
      const found = /^\d+([.,])(\d+)(?:\s*[a-z]{1,2})?$/i.exec(cell);
      if (found && found[2]?.length !== 3) counts[found[1] === ',' ? 'comma' : 'point'] += 1;
    }
  }
  if (counts.comma !== counts.point) return counts.comma > counts.point ? 'comma' : 'point';
  return delimiter === ';' ? 'comma' : 'point';
}
