import { createHash } from 'node:crypto';
import exceljs from 'exceljs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ZipFile } from 'yazl';
import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { registerRecord } from '../../shared/journal/record.schema.ts';
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

async function ended(answer: Answered<ImportView>): Promise<ImportView> {
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
  return ended(await ledger.client.post(`/imports/${read.body.id}/check`, request));
}
const run = async ({ id }: ImportView) => ended(await ledger.client.post(`/imports/${id}/run`));
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

const cylinderTable = (rows: number): string =>
  [
    'Tag,Kind,Refrigerant,Tare,Content',
    ...Array.from({ length: rows }, (_, row) => `C${row},refillable,R-32,7.6,${5 + (row % 7)}`),
  ].join('\n');

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

  it('is judged row by row: what one row may with its reason, another without is not taken for', async () => {
    await begin();
    await ledger.cylinder(null, {
      tag: 'A1',
      refrigerant: 'R-32',
      tare: tareFrom2024(),
      stampedLimit: { value: '10', unit: 'kg' },
    });
    // The first two stay below the limit; the third passes it, and says why.
    const table = [
      'Date,What,Cylinder,Supplier,Mass,Note',
      '2026-02-01,bought,A1,Fallow Gas,4,',
      '2026-02-02,bought,A1,Fallow Gas,5,',
      '2026-02-03,bought,A1,Fallow Gas,3,cooled below the limit',
    ];
    expect((await bring('entries', table.join('\n'))).made).toBe(3);
    const without = [...table, '2026-02-04,bought,A1,Fallow Gas,1,'].join('\n');
    expect(errorsOf(await check('entries', without))).toEqual([[5, 'Note', 'reasonForPastLimit']]);
  });

  it('may come in late and out of order: each row is judged where it belongs in time', async () => {
    await begin();
    const { cylinder } = await places();
    await bring('entries', ENTRIES);
    const late = [
      'Date,What,Unit,Cylinder,Supplier,Mass,Note',
      '2026-02-02 08:00,refill,U1,A1,,100 g,late',
      '2026-02-01 08:00,bought,,A1,Fallow Gas,1 kg,later still',
    ].join('\n');
    expect((await bring('entries', late)).made).toBe(2);
    // The weighing of 2 February at noon settles what came before it: 12.3 kg, then two of 0.4.
    expect((await ledger.client.get(`/cylinders/${cylinder.id}`)).body.contentG).toBe(11_500);
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

  it('is a record of the log with the file’s SHA-256, in the transaction of its rows; bringing in nothing is none', async () => {
    await begin();
    const done = await bring('cylinders', CYLINDERS);
    expect(done.sha256).toBe(createHash('sha256').update(CYLINDERS).digest('hex'));
    const records = () =>
      app.database.query<{ sequence: string; content: string; words: string }>(
        'superuser',
        `select j.sequence, j.content, t.content as words from journal_record j
          join personal_text t on t.firm_id = j.firm_id and t.record_id = j.record_id
          where j.firm_id = $1 and j.noun = 'import'`,
        [ledger.firm.id],
      );
    const [record, ...others] = await records();
    expect(others).toEqual([]);
    expect(record).toMatchObject({ sequence: String(done.recordSequence), words: 'table.csv' });
    expect(record?.content).not.toContain('table.csv');
    expect(registerRecord.parse(JSON.parse(String(record?.content)))).toMatchObject({
      noun: 'import',
      subjectId: done.id,
      recordedBy: ledger.owner.id,
      after: {
        kind: 'cylinders',
        sha256: done.sha256,
        rows: '2',
        made: '2',
        already: '0',
        readAs: { massUnit: 'kg', dateOrder: 'dmy', columns: { tag: 'Tag', tare: 'Tare' } },
      },
    });
    expect((await bring('cylinders', CYLINDERS)).recordSequence).toBeNull();
    expect(await records()).toHaveLength(1);
  });

  it('is told that a row which is here was read otherwise then', async () => {
    await begin();
    await bring('cylinders', CYLINDERS);
    const checked = await check('cylinders', CYLINDERS, { massUnit: 'lb' });
    expect(errorsOf(checked)).toEqual([[2, null, 'importReadOtherwise']]);
  });

  it('is stopped between two parts of its rows, and keeps nothing', async () => {
    await begin();
    const before = await headSequence();
    const table = cylinderTable(600);
    const read = await upload('cylinders', table);
    const request = {
      columns: guessed(read.body),
      massUnit: 'kg',
      decimal: 'point',
      dateOrder: 'dmy',
      since: '2025-01-01',
    };
    const checking = await ledger.client.post<ImportView>(`/imports/${read.body.id}/check`, request);
    expect(checking.body.state).toBe('checking');
    const stopped = await ended(await ledger.client.post(`/imports/${read.body.id}/cancel`));
    expect([stopped.state, stopped.made]).toEqual(['cancelled', 0]);
    expect((await ledger.client.post(`/imports/${read.body.id}/run`)).body.code).toBe('importNotChecked');

    const checked = await ended(await ledger.client.post(`/imports/${read.body.id}/check`, request));
    expect([checked.state, checked.made]).toEqual(['checked', 600]);
    await ledger.client.post(`/imports/${read.body.id}/run`);
    const unkept = await ended(await ledger.client.post(`/imports/${read.body.id}/cancel`));
    expect([unkept.state, await headSequence()]).toEqual(['cancelled', before]);
  });

  it('of ten thousand rows is checked and brought in whole, with progress that rises', {
    timeout: 300_000,
  }, async () => {
    await begin();
    const read = await upload('cylinders', cylinderTable(10_000));
    const request = {
      columns: guessed(read.body),
      massUnit: 'kg',
      decimal: 'point',
      dateOrder: 'dmy',
      since: '2025-01-01',
    };
    const path = `/imports/${read.body.id}`;
    const follow = async () => {
      const seen: number[] = [];
      for (;;) {
        const { body } = await ledger.client.get<ImportView>(path);
        if (body.state !== 'checking' && body.state !== 'running') return { body, seen };
        if (seen.at(-1) !== body.rowsDone) seen.push(body.rowsDone);
        await new Promise((resolve) => setTimeout(resolve, 50));
      }
    };
    await ledger.client.post(`${path}/check`, request);
    const checked = await follow();
    expect([checked.body.state, checked.body.made, checked.body.errors]).toEqual(['checked', 10_000, []]);
    expect(checked.seen).toEqual(checked.seen.toSorted((a, b) => a - b));
    expect(checked.seen.filter((rows) => rows > 0 && rows < 10_000).length).toBeGreaterThan(2);
    await ledger.client.post(`${path}/run`);
    const done = await follow();
    expect([done.body.state, done.body.made]).toEqual(['done', 10_000]);
    const [counted] = await app.database.query<{ cylinders: number; openings: number }>(
      'superuser',
      `select (select count(*)::int from cylinder where firm_id = $1) as cylinders,
        (select count(*)::int from entry where firm_id = $1 and from_place = 'opening') as openings`,
      [ledger.firm.id],
    );
    expect(counted).toEqual({ cylinders: 10_000, openings: 10_000 });
  });
});
