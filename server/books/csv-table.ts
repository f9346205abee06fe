import type { Response } from 'express';

export type CsvCell = string | number | boolean | null;

/** A cell that a spreadsheet would run as a formula is made plain text by an apostrophe before it. */
const FORMULA = /^[=+@\t\r-]/;

function written(cell: CsvCell): string {
  if (cell === null) return '';
  if (typeof cell !== 'string') return String(cell);
  const plain = FORMULA.test(cell) ? `'${cell}` : cell;
  return /[",\r\n]/.test(plain) ? `"${plain.replaceAll('"', '""')}"` : plain;
}

/** RFC 4180 with a head line. Column names are the same in every language: files are read by programs too. */
export function csvText(columns: readonly string[], rows: readonly (readonly CsvCell[])[]): string {
  return [columns, ...rows].map((row) => `${row.map(written).join(',')}\r\n`).join('');
}

/** Grams with all six decimals that they have, and no exponent. */
export const csvGrams = (massG: number | null): CsvCell => {
  if (massG === null) return null;
  const text = massG.toFixed(6).replace(/\.?0+$/, '');
  return Number(text === '-0' ? 0 : text);
};

export function sendCsv(res: Response, fileName: string, text: string): void {
  res.type('text/csv; charset=utf-8').attachment(fileName).send(text);
}

export const CSV_ANSWER = { mediaType: 'text/csv', description: 'One line a row, with a head line; masses in grams' };
