import exceljs from 'exceljs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ZipFile } from 'yazl';
import type { TestApp } from '../support/app.ts';
import { errorsOf, guessed, importsOf, startImportApp, startImportLedger } from '../support/imports.ts';
import type { Ledger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startImportApp();
});
afterAll(() => app.close());
const begin = async () => {
  ledger = await startImportLedger(app);
};
const { upload, check } = importsOf(
  () => app,
  () => ledger,
);

describe('A file', () => {
  it.each([
    ['UTF-8 with its mark', Buffer.from('\uFEFFTag;Kind;Refrigerant;Tare\nÑ1;recovery;R-32;9,5', 'utf8'), 'utf-8'],
    ['Windows-1252', Buffer.from('Tag;Kind;Refrigerant;Tare\n\xd11;recovery;R-32;9,5', 'latin1'), 'windows-1252'],
    ['UTF-16', Buffer.from('\uFEFFTag;Kind;Refrigerant;Tare\nÑ1;recovery;R-32;9,5', 'utf16le'), 'utf-16'],
  ])('in %s is understood, and it says as what', async (_name, bytes, encoding) => {
    await begin();
    const { body } = await upload('cylinders', bytes);
    expect(body.read).toMatchObject({ format: 'csv', encoding, delimiter: ';', decimal: 'comma', rows: 1 });
    expect(body.columns[0]).toEqual({ head: 'Tag', samples: ['Ñ1'] });
  });

  it('of XLSX is read with its dates and numbers; a formula is the text that stood in it', async () => {
    await begin();
    const book = new exceljs.Workbook();
    book.addWorksheet('empty');
    const sheet = book.addWorksheet('stock');
    sheet.addRow(['Tag', 'Kind', 'Refrigerant', 'Tare', 'Re-test']);
    sheet.addRow([7741, 'recovery', 'R-32', 0.1 + 0.2, new Date('2028-05-01T00:00:00Z')]);
    sheet.addRow(['B2', 'recovery', 'R-32', { formula: '4+5', result: 9 }, null]);
    const read = await upload('cylinders', new Uint8Array(await book.xlsx.writeBuffer()), 'anything.csv');
    expect(read.body.read).toMatchObject({ format: 'xlsx', sheet: 'stock', rows: 2, formulas: 1 });
    expect(read.body.columns.map(({ samples }) => samples)).toEqual([
      ['7741', 'B2'],
      ['recovery', 'recovery'],
      ['R-32', 'R-32'],
      ['0.3', '9'],
      ['2028-05-01'],
    ]);
  });

  it('that is no table, empty, too long, too wide or a bomb is refused with its reason', async () => {
    await begin();
    const bomb = new ZipFile();
    bomb.addBuffer(Buffer.from('<x/>'), 'xl/workbook.xml');
    bomb.addBuffer(Buffer.alloc(60 * 1024 * 1024), 'xl/worksheets/sheet1.xml');
    bomb.end();
    const chunks: Buffer[] = [];
    for await (const chunk of bomb.outputStream) chunks.push(chunk as Buffer);
    const zip = new ZipFile();
    zip.addBuffer(Buffer.from('hello'), 'readme.txt');
    zip.end();
    const other: Buffer[] = [];
    for await (const chunk of zip.outputStream) other.push(chunk as Buffer);
    const rows = (count: number) => `Tag\n${'x\n'.repeat(count)}`;
    const refused = async (file: string | Uint8Array) => {
      const { status, body } = await upload('cylinders', file);
      return [status, (body as unknown as { code: string }).code];
    };
    expect(await refused(Buffer.concat(chunks))).toEqual([422, 'importTooLargeUnpacked']);
    expect(await refused(Buffer.concat(other))).toEqual([422, 'importNotATable']);
    expect(await refused(Buffer.from([0x89, 0x50, 0x4e, 0x47, 0, 1, 2]))).toEqual([422, 'importNotATable']);
    expect(await refused('')).toEqual([422, 'importEmpty']);
    expect(await refused('Tag,Kind\n')).toEqual([422, 'importEmpty']);
    expect(await refused('Tag,"Kind\nx,y')).toEqual([422, 'importNotCsv']);
    expect(await refused(rows(10_001))).toEqual([422, 'importTooManyRows']);
    expect(await refused(`${Array.from({ length: 61 }, (_, at) => `h${at}`).join(',')}\n1`)).toEqual([
      422,
      'importTooManyColumns',
    ]);
    expect(await refused(Buffer.alloc(20 * 1024 * 1024, 'a'))).toEqual([413, 'importTooLarge']);
  });

  it('that is refused says its own size and the limit, in words', async () => {
    await begin();
    const sentence = async (file: string | Uint8Array) => {
      const { body } = await upload('cylinders', file);
      return (body as unknown as { errors: { message: string }[] }).errors[0]?.message;
    };
    const book = new exceljs.Workbook();
    const sheet = book.addWorksheet('stock');
    for (let row = 0; row < 10_051; row += 1) sheet.addRow([row === 0 ? 'Tag' : row]);
    const tooLong = new Uint8Array(await book.xlsx.writeBuffer());
    const rowsSaid = 'The file holds 10,050 rows; 10,000 are possible at a time. Cut it into several.';
    expect(await sentence(`Tag\n${'\n,\nx'.repeat(10_050)}`)).toBe(rowsSaid);
    expect(await sentence(tooLong)).toBe(rowsSaid);
    expect(await sentence(Buffer.alloc(20 * 1024 * 1024, 'a'))).toBe(
      'The file holds 20.1 MB; 8 MB are possible. Cut it into several.',
    );
  });

  it('with a head twice keeps the columns apart by name', async () => {
    await begin();
    const { body } = await upload('cylinders', 'Tag,Kind,Tag,Refrigerant,Tare\nB1,recovery,other,R-32,9');
    expect(body.columns.map(({ head }) => head)).toEqual(['Tag', 'Kind', 'Tag (2)', 'Refrigerant', 'Tare']);
    expect(guessed(body).tag).toBe(0);
  });

  it('with a spreadsheet’s number for a day, or a cell that could not be worked out, is told so', async () => {
    await begin();
    const book = new exceljs.Workbook();
    const sheet = book.addWorksheet('stock');
    sheet.addRow(['Tag', 'Kind', 'Refrigerant', 'Tare', 'Re-test']);
    sheet.addRow(['B1', 'recovery', 'R-32', 9, 46_508]);
    sheet.addRow(['B2', 'recovery', 'R-32', { formula: '1/0', result: { error: '#DIV/0!' } }, null]);
    const checked = await check('cylinders', new Uint8Array(await book.xlsx.writeBuffer()));
    expect(errorsOf(checked)).toEqual([
      [2, 'Re-test', 'importDateSerial'],
      [3, 'Tare', 'notANumber'],
    ]);
  });

  it('is taken as multipart/form-data with a kind that is known', async () => {
    await begin();
    expect((await ledger.client.post('/imports', { kind: 'units' })).status).toBe(415);
    expect((await upload('people', 'Tag\n1')).body).toMatchObject({ errors: [{ path: '/kind' }] });
  });
});
