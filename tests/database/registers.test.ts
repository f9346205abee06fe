import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { NOW, registerRecordOf, textOf } from './record-texts.ts';
import { type Connection, connect, createTestFirm, POST, type Query, refusalOf, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  firm = await createTestFirm(app);
});
afterAll(async () => {
  await app.close();
  await database.drop();
});

const record = (query: Query, fields: Parameters<typeof registerRecordOf>[1]) =>
  query(POST, [[textOf(registerRecordOf(firm.personId, fields))], null]);
const NOT_RECORDED = { code: 'TW015', rule: 'register_change_recorded' };

describe('A change of a register', () => {
  it('without its record fails at commit, a new row', async () => {
    let atOnce = false;
    const attempt = app.as(firm.scope, async (query) => {
      await query('insert into customer (firm_id, id, name) values ($1, $2, $3)', [firm.firmId, uuid(), 'Unrecorded']);
      atOnce = true;
    });

    expect(await refusalOf(attempt)).toMatchObject(NOT_RECORDED);
    expect(atOnce).toBe(true);
    const rows = await app.as(firm.scope, (query) => query(`select from customer where name = 'Unrecorded'`));
    expect(rows).toEqual([]);
  });

  it.each([
    ['firm', `update firm set name = 'x'`],
    ['membership', `update membership set van = 'x'`],
    ['customer', `update customer set name = 'x'`],
    ['site', `update site set name = 'x'`],
    ['party', `update party set name = 'x'`],
    ['tool', `update tool set name = 'x'`],
    ['unit', `update unit set name = 'x'`],
    ['cylinder', `update cylinder set batch = 'x'`],
  ])('without its record fails at commit, an update of %s', async (_table, sql) => {
    expect(await refusalOf(app.as(firm.scope, (query) => query(sql)))).toMatchObject(NOT_RECORDED);
  });

  it('counts its version in the database and needs a record of that very version', async () => {
    const rename = (version: number) =>
      app.as(firm.scope, async (query) => {
        await query(`update customer set name = 'Tin Mill Ltd', version = 1 where id = $1`, [firm.customerId]);
        await record(query, { noun: 'customer', subjectId: firm.customerId, version });
      });

    expect(await refusalOf(rename(3))).toMatchObject({ ...NOT_RECORDED, detail: { version: 2 } });
    await rename(2);
    const rows = await app.as(firm.scope, (query) => query('select name, version from customer'));
    expect(rows).toEqual([{ name: 'Tin Mill Ltd', version: 2 }]);
  });

  it('cannot hide behind the record of an earlier version, another row or another noun', async () => {
    const unit = (fields: Partial<Parameters<typeof registerRecordOf>[1]>) =>
      app.as(firm.scope, async (query) => {
        await query(`update unit set name = 'x' where id = $1`, [firm.unitId]);
        await record(query, { noun: 'unit', subjectId: firm.unitId, version: 2, ...fields });
      });

    expect(await refusalOf(unit({ version: 1 }))).toMatchObject({ code: '23505' });
    expect(await refusalOf(unit({ subjectId: firm.otherUnitId }))).toMatchObject(NOT_RECORDED);
    expect(await refusalOf(unit({ noun: 'cylinder' }))).toMatchObject(NOT_RECORDED);
  });

  it('may be recorded before or after it, within the transaction', async () => {
    const id = uuid();
    await app.as(firm.scope, async (query) => {
      await record(query, { noun: 'party', subjectId: id });
      await query(`insert into party (firm_id, id, kind, name) values ($1, $2, 'supplier', 'Brass & Sons')`, [
        firm.firmId,
        id,
      ]);
    });

    expect(await app.as(firm.scope, (query) => query('select from party where id = $1', [id]))).toHaveLength(1);
  });

  it('never moves a row to another id', async () => {
    const attempt = app.as(firm.scope, (query) => query('update customer set id = $1', [uuid()]));

    expect((await refusalOf(attempt)).code).toBe('TW014');
  });
});

describe('What holds from a day on', () => {
  const HISTORY: [string, string, string, unknown[]][] = [
    [
      'cylinder_tare',
      'cylinderTare',
      `(firm_id, id, cylinder_id, mass_micrograms, typed_value, typed_unit, valid_from) values ($1, $2, $3, 7700000000, '7.7', 'kg', $4)`,
      ['cylinderId'],
    ],
    [
      'unit_full_charge',
      'unitFullCharge',
      `(firm_id, id, unit_id, refrigerant, mass_micrograms, typed_value, typed_unit, method, valid_from) values ($1, $2, $3, 'R-32', 1290000000, '1290', 'g', 'manufacturer', $4)`,
      ['unitId'],
    ],
    [
      'unit_refrigerant',
      'unitRefrigerant',
      `(firm_id, id, unit_id, refrigerant, valid_from) values ($1, $2, $3, 'R-32', $4)`,
      ['unitId'],
    ],
    [
      'charge_basis',
      'chargeBasis',
      `(firm_id, id, unit_id, basis, document, valid_from) values ($1, $2, $3, '{}', 'manual', $4)`,
      ['unitId'],
    ],
    ['line_set', 'lineSet', `(firm_id, id, unit_id, branches, valid_from) values ($1, $2, $3, '[]', $4)`, ['unitId']],
    [
      'charge_sheet',
      'chargeSheet',
      `(firm_id, id, unit_id, made_at, made_by, request, result) values ($1, $2, $3, $4, current_person_id(), '{}', '{}')`,
      ['unitId'],
    ],
  ];

  it.each(HISTORY)(
    'is added to %s with its record and never changed or removed',
    async (table, noun, columns, [subject]) => {
      const id = uuid();
      const values = [firm.firmId, id, firm[subject as 'unitId'], NOW];
      const insert = (query: Query) => query(`insert into ${table} ${columns}`, values);

      expect(await refusalOf(app.as(firm.scope, insert))).toMatchObject(NOT_RECORDED);
      await app.as(firm.scope, async (query) => {
        await insert(query);
        await record(query, { noun: noun as 'lineSet', subjectId: id });
      });

      for (const sql of [`update ${table} set id = id`, `delete from ${table}`, `truncate ${table} cascade`]) {
        expect((await refusalOf(app.as(firm.scope, (query) => query(sql)))).code).toBe('42501');
        const asOwner = database.query('owner', sql);
        expect(await refusalOf(asOwner)).toMatchObject({ rule: 'append_only' });
      }
    },
  );

  it('and no row of a register is ever deleted', async () => {
    for (const table of ['firm', 'membership', 'customer', 'site', 'party', 'tool', 'unit', 'job', 'cylinder']) {
      const attempt = app.as(firm.scope, (query) => query(`delete from ${table}`));
      expect((await refusalOf(attempt)).code).toBe('42501');
    }
  });
});
