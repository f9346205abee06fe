import type { CellValue } from 'exceljs';
import yauzl from 'yauzl';
import { IMPORT_LIMITS } from '../../shared/imports/import.schema.ts';
import { refusedFile, type Table, tableOf } from './table.ts';

/** Parts of a workbook; one of honest size has a dozen. */
const MOST_PARTS = 300;

/**
 * The first sheet that holds anything. Formulas are not worked out: what stood in the cell last is taken.
 * @throws Problem 422
 */
export async function readXlsx(bytes: Buffer): Promise<Table> {
  await refuseBombs(bytes);
  const { default: exceljs } = await import('exceljs');
  const book = new exceljs.Workbook();
  try {
    await book.xlsx.load(bytes as unknown as ArrayBuffer, {
      ignoreNodes: ['conditionalFormatting', 'dataValidations', 'hyperlinks', 'drawing', 'picture', 'extLst'],
    });
  } catch {
    throw refusedFile('importNotATable');
  }
  const sheet = book.worksheets.find(({ actualRowCount }) => actualRowCount > 0);
  if (!sheet) throw refusedFile('importEmpty');
  let formulas = 0;
  const grid: { number: number; cells: string[] }[] = [];
  if (sheet.actualRowCount > IMPORT_LIMITS.rows + 1) {
    throw refusedFile('importTooManyRows', { given: sheet.actualRowCount - 1, allowed: IMPORT_LIMITS.rows });
  }
  sheet.eachRow((row, number) => {
    const cells: string[] = [];
    row.eachCell((cell, column) => {
      if (column > IMPORT_LIMITS.columns + 1) return;
      if (isFormula(cell.value)) formulas += 1;
      cells[column - 1] = textOf(cell.value);
    });
    grid.push({ number, cells: Array.from(cells, (cell) => cell ?? '') });
  });
  return tableOf(grid, { format: 'xlsx', encoding: null, delimiter: null, sheet: sheet.name, formulas });
}

const isFormula = (value: CellValue): boolean =>
  typeof value === 'object' && value !== null && ('formula' in value || 'sharedFormula' in value);

function textOf(value: CellValue): string {
  if (value === null || value === undefined) return '';
  if (typeof value === 'string') return value;
  // 15 digits are what a spreadsheet keeps: 0.1 + 0.2 is 0.3 there.
  if (typeof value === 'number') return plainDecimal(Number(value.toPrecision(15)));
  if (typeof value === 'boolean') return String(value);
  if (value instanceof Date) return dateText(value);
  if ('richText' in value) return value.richText.map(({ text }) => text).join('');
  if ('result' in value && value.result !== undefined) return textOf(value.result as CellValue);
  if ('formula' in value && value.formula) return `=${value.formula}`;
  if ('sharedFormula' in value) return `=${value.sharedFormula}`;
  // Left empty, what could not be worked out would pass for what nobody filled in.
  if ('error' in value) return String(value.error);
  if ('text' in value) return textOf(value.text as CellValue);
  return '';
}

/** A spreadsheet's date has no zone; the library hands it over as if it were UTC. */
function dateText(date: Date): string {
  if (Number.isNaN(date.getTime())) return '';
  const text = new Date(Math.round(date.getTime() / 60_000) * 60_000).toISOString();
  return text.slice(11, 16) === '00:00' ? text.slice(0, 10) : text.slice(0, 16);
}

const plainDecimal = (value: number): string =>
  String(value).includes('e') ? value.toFixed(12).replace(/\.?0+$/, '') : String(value);

const tooLarge = () =>
  refusedFile('importTooLargeUnpacked', { allowed: IMPORT_LIMITS.unpackedBytes / 1024 / 1024, parts: MOST_PARTS });

/** Unpacks every part once and counts, before anything keeps it: the sizes that a file says of itself may be lies. */
function refuseBombs(bytes: Buffer): Promise<void> {
  return new Promise((resolve, reject) => {
    const refuse = (code: string) => reject(refusedFile(code));
    yauzl.fromBuffer(bytes, { lazyEntries: true, validateEntrySizes: true }, (failed, zip) => {
      if (failed || !zip) return refuse('importNotATable');
      let unpacked = 0;
      let hasBook = false;
      zip.on('error', () => refuse('importNotATable'));
      zip.on('end', () => (hasBook ? resolve() : refuse('importNotATable')));
      zip.on('entry', (entry: yauzl.Entry) => {
        if (entry.fileName === 'xl/workbook.xml') hasBook = true;
        if (zip.entryCount > MOST_PARTS || unpacked + entry.uncompressedSize > IMPORT_LIMITS.unpackedBytes) {
          return reject(tooLarge());
        }
        if (entry.fileName.endsWith('/')) return zip.readEntry();
        zip.openReadStream(entry, (broken, stream) => {
          if (broken || !stream) return refuse('importNotATable');
          stream.on('data', (chunk: Buffer) => {
            unpacked += chunk.length;
            if (unpacked <= IMPORT_LIMITS.unpackedBytes) return;
            stream.destroy();
            reject(tooLarge());
          });
          stream.on('error', () => refuse('importNotATable'));
          stream.on('end', () => zip.readEntry());
        });
      });
      zip.readEntry();
    });
  });
}
