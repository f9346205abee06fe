import { parse } from 'csv-parse/sync';
import { IMPORT_LIMITS } from '../../shared/imports/import.schema.ts';
import { refusedFile, type Table, tableOf } from './table.ts';

const DELIMITERS = [',', ';', '\t', '|'] as const;

/** Comma, semicolon, tab or bar; UTF-8 or UTF-16 with or without its mark, else Windows-1252. @throws Problem 422 */
export function readCsv(bytes: Buffer): Table {
  const { text, encoding } = decode(bytes);
  const delimiter = delimiterOf(text);
  const filled = countFilledLines(text, delimiter);
  if (filled > IMPORT_LIMITS.rows + 1) {
    throw refusedFile('importTooManyRows', { given: filled - 1, allowed: IMPORT_LIMITS.rows });
  }
  let records: string[][];
  try {
    records = parse(text, {
      delimiter,
      bom: true,
      relax_column_count: true,
      relax_quotes: false,
      max_record_size: IMPORT_LIMITS.cellCharacters * IMPORT_LIMITS.columns,
    });
  } catch (error) {
    throw refusedFile('importNotCsv', { line: (error as { lines?: number }).lines ?? 1 });
  }
  const grid = records.map((cells, index) => ({ number: index + 1, cells }));
  const formulas = records.slice(1).reduce((sum, cells) => sum + cells.filter((cell) => /^\s*=/.test(cell)).length, 0);
  return tableOf(grid, { format: 'csv', encoding, delimiter, sheet: null, formulas });
}

function decode(bytes: Buffer): { text: string; encoding: 'utf-8' | 'utf-16' | 'windows-1252' } {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return { text: bytes.toString('utf16le'), encoding: 'utf-16' };
  if (bytes[0] === 0xfe && bytes[1] === 0xff && bytes.length % 2 === 0) {
    return { text: Buffer.from(bytes).swap16().toString('utf16le'), encoding: 'utf-16' };
  }
  if (bytes.includes(0)) throw refusedFile('importNotATable');
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), encoding: 'utf-8' };
  } catch {
    return { text: new TextDecoder('windows-1252').decode(bytes), encoding: 'windows-1252' };
  }
}

/** The one that stands most often in the heads, outside of quotes. */
function delimiterOf(text: string): (typeof DELIMITERS)[number] {
  const heads = (text.split(/\r?\n/, 1)[0] ?? '').replace(/"[^"]*"/g, '');
  const count = (delimiter: string) => heads.split(delimiter).length - 1;
  return DELIMITERS.reduce((best, delimiter) => (count(delimiter) > count(best) ? delimiter : best));
}

/** Records that hold something, without taking them apart: a file of millions of lines is refused before they fill memory. */
function countFilledLines(text: string, delimiter: string): number {
  let filled = 0;
  let isQuoted = false;
  let isFilled = false;
  for (let at = 0; at <= text.length; at += 1) {
    const character = at === text.length ? '\n' : (text[at] as string);
    if (character === '"') isQuoted = !isQuoted;
    else if (!isQuoted && (character === '\n' || character === '\r')) {
      if (isFilled) filled += 1;
      isFilled = false;
    } else if (!isFilled && character > ' ' && character !== delimiter) isFilled = true;
  }
  return filled;
}
