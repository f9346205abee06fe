import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { TestApp } from '../support/app.ts';
import { CYLINDERS, errorsOf, importsOf, startImportApp, startImportLedger } from '../support/imports.ts';
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
const { check, bring, headSequence } = importsOf(
  () => app,
  () => ledger,
);

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
