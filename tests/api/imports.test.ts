import exceljs from 'exceljs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ZipFile } from 'yazl';
import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';
import type { Answered, TestClient } from '../support/test-client.ts';

let app: TestApp;
let ledger: Ledger;
/** A clock that goes on while the server works, as every clock does. */
let time = Date.parse(TEST_START);
beforeAll(async () => {
  app = await startTestApp({ parts: { now: () => new Date(++time) } });
});
afterAll(() => app.close());
/** A firm of its own for each test: all of its rows come from the file. */
const begin = async () => {
  ledger = await startLedger(app, { timeZone: 'Europe/Madrid' });
};

async function upload(kind: string, file: string | Uint8Array, name = 'table.csv', client: TestClient = ledger.client) {
  const form = new FormData();
  form.set('kind', kind);
  form.set('file', new Blob([file as never]), name);
  const body = new Response(form);
  const type = String(body.headers.get('content-type'));
  const raw = new Uint8Array(await body.arrayBuffer());
  return client.send<ImportView>('POST', '/imports', { raw, headers: { 'Content-Type': type } });
}

const guessed = ({ fields }: ImportView): Record<string, number> =>
  Object.fromEntries(fields.flatMap(({ name, guess }) => (guess === null ? [] : [[name, guess]])));

async function after(answer: Answered<ImportView>): Promise<ImportView> {
  if (answer.status !== 200) throw new Error(JSON.stringify(answer.body));
  await app.parts.background.settled();
  return (await ledger.client.get<ImportView>(`/imports/${answer.body.id}`)).body;
}

/** Reads, maps by the guess, and checks. */
async function check(kind: ImportKind, file: string | Uint8Array, change: Partial<CheckImportRequest> = {}) {
  const read = await upload(kind, file);
  if (read.status !== 201) throw new Error(JSON.stringify(read.body));
  const request: CheckImportRequest = {
    columns: guessed(read.body),
    massUnit: 'kg',
    decimal: read.body.read.decimal,
    dateOrder: 'dmy',
    since: '2025-01-01',
    ...change,
  };
  return after(await ledger.client.post(`/imports/${read.body.id}/check`, request));
}
const run = async ({ id }: ImportView) => after(await ledger.client.post(`/imports/${id}/run`));
async function bring(kind: ImportKind, file: string | Uint8Array, change: Partial<CheckImportRequest> = {}) {
  const checked = await check(kind, file, change);
  expect([checked.state, checked.errors]).toEqual(['checked', []]);
  return run(checked);
}
const headSequence = async () =>
  (
    await app.database.query<{ sequence: string }>('superuser', 'select sequence from firm_head where firm_id = $1', [
      ledger.firm.id,
    ])
  )[0]?.sequence;
const errorsOf = ({ errors }: ImportView) => errors.map(({ row, column, code }) => [row, column, code]);

const CYLINDERS = [
  'Tag,Kind,Refrigerant,Owner,Tare,Content,Re-test,Held by',
  'A1,refillable,R-32,,7.6,11.34,2028-05-01,',
  'A2,disposable,r-410a,Fallow Gas,"25 lb 4 oz",,,',
].join('\r\n');

describe('A table of cylinders', () => {
  it('comes in with tares, owners and what was in them', async () => {
    await begin();
    const done = await bring('cylinders', CYLINDERS);
    expect([done.state, done.made, done.already]).toEqual(['done', 2, 0]);
    const { items } = (await ledger.client.get('/cylinders')).body;
    expect(items).toMatchObject([
      {
        tag: 'A1',
        refrigerant: 'R-32',
        tareG: 7600,
        contentG: 11_340,
        retestDue: '2028-05-01',
        owner: { kind: 'ours' },
      },
      {
        tag: 'A2',
        kind: 'nonRefillable',
        refrigerant: 'R-410A',
        tareTyped: { value: '404', unit: 'oz' },
        contentG: 0,
        owner: { kind: 'party', id: ledger.supplier.id },
      },
    ]);
  });

  it('changes nothing when it comes a second time, and only the new rows when it has grown', async () => {
    await begin();
    await bring('cylinders', CYLINDERS);
    const before = await headSequence();
    const again = await bring('cylinders', CYLINDERS);
    expect([again.made, again.already, await headSequence()]).toEqual([0, 2, before]);
    const grown = await bring('cylinders', `${CYLINDERS}\r\nA3,recovery,R-32,,9,,,`);
    expect([grown.made, grown.already]).toEqual([1, 2]);
  });

  it('is refused where a number is held by another cylinder, in the register or in the file', async () => {
    await begin();
    const held = await ledger.cylinder(null, { tag: 'A1' });
    const checked = await check('cylinders', `${CYLINDERS}\r\nA2,recovery,R-32,,9,,,`);
    expect(errorsOf(checked)).toEqual([
      [2, 'Tag', 'importTagTaken'],
      [4, 'Tag', 'importTagTaken'],
    ]);
    expect((await ledger.client.get('/cylinders')).body.items).toMatchObject([{ id: held.id }]);
  });

  it('names every error by row and column, also as a file, and brings nothing in', async () => {
    await begin();
    const before = await headSequence();
    const wrong = [
      'Tag;Kind;Refrigerant;Tare;Re-test;Held by',
      'B1;bucket;R-32;7,6;;',
      'B2;recovery;R-999;7,6;31/02/2027;Nobody Known',
      ';recovery;R-32;=1+1;;',
      'B4;recovery;R-32;7,6;;',
    ].join('\n');
    const checked = await check('cylinders', wrong);
    expect(checked.read).toMatchObject({ delimiter: ';', decimal: 'comma', formulas: 1 });
    expect(errorsOf(checked)).toEqual([
      [2, 'Kind', 'importWord'],
      [3, 'Re-test', 'importDate'],
      [3, 'Held by', 'importNotFound'],
      [4, 'Tag', 'required'],
      [4, 'Tare', 'notANumber'],
    ]);
    expect((await ledger.client.post(`/imports/${checked.id}/run`)).body.code).toBe('importNotChecked');
    const csv = await ledger.client.get(`/imports/${checked.id}/errors.csv`);
    expect(csv.body.split('\r\n').slice(0, 2)).toEqual([
      'row,column,given,code,message',
      '2,Kind,bucket,importWord,“bucket” is not a word known here.',
    ]);
    expect(csv.body).toContain(`4,Tare,'=1+1,notANumber`); // no formula for whoever opens it
    expect(await headSequence()).toBe(before);
  });

  it('names what only the services refuse, at its column, once all rows can be read', async () => {
    await begin();
    const checked = await check('cylinders', 'Tag,Kind,Refrigerant,Tare\nB1,recovery,R-999,9\nB2,recovery,R-32,9');
    expect(errorsOf(checked)).toEqual([[2, 'Refrigerant', 'unknownRefrigerant']]);
  });
});

describe('A table of units', () => {
  it('comes in with full charge, serial and an opening, known or not', async () => {
    await begin();
    const site = (await ledger.client.get('/sites')).body.items[0].name;
    const done = await bring(
      'units',
      [
        'Unit,Site,Customer,Refrigerant,Installed,Serial,Model,Full charge (kg),Content',
        `U1,${site},Wexcombe Mill,R-32,15/06/2024,S-1,M-1,1.2,1.2`,
        `U2,${site.toUpperCase()},,R-410A,,,,,`,
      ].join('\n'),
    );
    expect(done.made).toBe(2);
    const { items } = (await ledger.client.get('/units')).body;
    expect(items).toMatchObject([
      { tag: 'U1', installedOn: '2024-06-15', fullCharge: { massG: 1200 }, book: { known: true, massG: 1200 } },
      { tag: 'U2', installedOn: null, fullCharge: null, book: { known: false } },
    ]);
  });

  it('changes nothing when it comes a second time, while the clock goes on', async () => {
    await begin();
    const table =
      'Unit,Site,Refrigerant,Full charge,Content\nU1,Mill Lane,R-32,1.2,1.2\nU2,Mill Lane,R-32,,0.9\nU3,Mill Lane,R-32,,';
    await bring('units', table);
    const before = await headSequence();
    const again = await bring('units', table);
    expect([again.made, again.already, await headSequence()]).toEqual([0, 3, before]);
  });
});

const ENTRIES = [
  'Date,What,Unit,Cylinder,Supplier,Mass,Note',
  '2026-02-01,bought,,A1,Fallow Gas,5 kg,',
  '2026-02-03 10:00,refill,U1,A1,,400 g,found low',
  '2026-02-03 10:00,refill,U1,A1,,400 g,found low',
  '2026-02-02,weighing,,A1,,20 kg,',
].join('\n');

describe('A table of past entries', () => {
  const places = async () => {
    const cylinder = await ledger.cylinder('10000', { tag: 'A1', refrigerant: 'R-32', tare: tareFrom2024() });
    const unit = await ledger.unit('1000', null, { tag: 'U1', refrigerant: 'R-32' });
    return { cylinder, unit };
  };
  const tareFrom2024 = () => ({
    id: crypto.randomUUID(),
    mass: { value: '7700', unit: 'g' },
    validFrom: '2024-01-01T00:00:00Z',
  });

  it('is posted through the log, each row one group, two alike rows two groups', async () => {
    await begin();
    const { cylinder } = await places();
    const done = await bring('entries', ENTRIES);
    expect(done.made).toBe(4);
    const { items } = (await ledger.client.get('/entries?limit=200')).body as {
      items: { kind: string; massG: number; occurredAt: string; addedByServer: boolean }[];
    };
    expect(items.filter(({ kind }) => kind === 'refill').filter(({ addedByServer }) => !addedByServer)).toHaveLength(2);
    const bought = items.find(({ kind }) => kind === 'purchase');
    // noon in Madrid in winter
    expect([bought?.massG, new Date(String(bought?.occurredAt)).toISOString()]).toEqual([
      5000,
      '2026-02-01T11:00:00.000Z',
    ]);
    // Opening 10 kg, bought 5, weighed 20 gross - 7.7 tare = 12.3 on 2 February, then two of 0.4.
    expect((await ledger.client.get(`/cylinders/${cylinder.id}`)).body.contentG).toBe(11_500);
    const before = await headSequence();
    expect((await bring('entries', ENTRIES)).already).toBe(4);
    expect(await headSequence()).toBe(before);
  });

  it('is refused whole where the log refuses one row, and nothing of it stays', async () => {
    await begin();
    await places();
    const before = await headSequence();
    const file = 'Date,What,Unit,Cylinder,Mass\n2026-02-03,refill,U1,A1,0.4\n2026-02-04,refill,U1,A1,90';
    const checked = await check('entries', file);
    expect(checked.errors).toMatchObject([{ row: 3 }]);
    expect(checked.errors).toHaveLength(1);
    expect(await headSequence()).toBe(before);
  });

  it('says what a row lacks for its kind', async () => {
    await begin();
    await places();
    const checked = await check(
      'entries',
      'Date,What,Unit,Cylinder,To cylinder,Supplier,Mass\n2026-02-03,bought,,A1,,,1\n2026-02-03,transfer,,A1,,,1\n2026-02-03,refill,,A1,,,1\n2026-02-03,refill,U9,A1,,,1',
    );
    expect(errorsOf(checked)).toEqual([
      [2, 'Supplier', 'required'],
      [3, 'To cylinder', 'required'],
      [4, 'Unit', 'required'],
      [5, 'Unit', 'importNotFound'],
    ]);
  });
});

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
    expect(await refused(Buffer.alloc(8 * 1024 * 1024 + 1, 'a'))).toEqual([413, 'bodyTooLarge']);
  });

  it('is taken as multipart/form-data with a kind that is known', async () => {
    await begin();
    expect((await ledger.client.post('/imports', { kind: 'units' })).status).toBe(415);
    expect((await upload('people', 'Tag\n1')).body).toMatchObject({ errors: [{ path: '/kind' }] });
  });
});

describe('An import', () => {
  it('is the office’s: readers and technicians are refused, and another firm finds nothing', async () => {
    await begin();
    const { body } = await upload('cylinders', CYLINDERS);
    for (const role of ['reader', 'technician'] as const) {
      const client = await app.signIn(await app.addPerson([role], { firmId: ledger.firm.id }));
      expect((await upload('cylinders', CYLINDERS, 'a.csv', client)).status).toBe(403);
      expect((await client.get(`/imports/${body.id}`)).status).toBe(403);
    }
    const manager = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));
    expect((await upload('cylinders', CYLINDERS, 'a.csv', manager)).status).toBe(201);
    const stranger = await startLedger(app);
    expect((await stranger.client.get(`/imports/${body.id}`)).status).toBe(404);
    expect((await stranger.client.post(`/imports/${body.id}/run`)).status).toBe(404);
  });

  it('needs its columns, and runs only once', async () => {
    await begin();
    const { body } = await upload('cylinders', CYLINDERS);
    const request = {
      columns: { tag: 0, nose: 1, kind: 40 },
      massUnit: 'kg',
      decimal: 'point',
      dateOrder: 'dmy',
      since: '2025-01-01',
    };
    const refused = await ledger.client.post(`/imports/${body.id}/check`, request);
    expect(refused.body.errors.map(({ path, code }: { path: string; code: string }) => [path, code])).toEqual([
      ['/columns/nose', 'unknownKey'],
      ['/columns/kind', 'tooLarge'],
      ['/columns/refrigerant', 'importColumnNeeded'],
      ['/columns/tare', 'importColumnNeeded'],
    ]);
    const done = await bring('cylinders', CYLINDERS);
    expect((await run(done)).made).toBe(2);
    expect(
      (
        await ledger.client.post(`/imports/${done.id}/check`, {
          ...request,
          columns: { tag: 0, kind: 1, refrigerant: 2, tare: 4 },
        })
      ).body.code,
    ).toBe('importDone');
  });
});
