import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { VerificationResult } from '../../shared/proof/proof.schema.ts';
import { grouped } from '../../shared/proof/verify.mjs';
import { type History, REHASH, startHistory } from '../proof/history.ts';
import { startTestApp, type TestApp } from '../support/app.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-verification-'));
let app: TestApp;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
});
afterAll(async () => {
  await app.close();
  rmSync(home, { recursive: true, force: true });
});

let history: History;
beforeEach(async () => {
  history = await startHistory(app);
});

const lines = async (query = ''): Promise<VerificationResult[]> => {
  const response = await fetch(`${app.url}/api/v1/journal/verification${query}`, {
    headers: { Cookie: String(history.client.cookie) },
  });
  expect([response.status, response.headers.get('content-type')]).toEqual([200, 'application/x-ndjson']);
  return (await response.text())
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line));
};
const verification = async (query?: string) => (await lines(query)).at(-1) as VerificationResult;
const faultAfter = async (sql: string) => {
  await history.tamper(sql);
  const { result, fault } = await verification();
  expect(result).toBe('notIntact');
  return fault;
};

describe('The check of the log', () => {
  it('finds a log intact that holds something of everything', async () => {
    const { head } = (await history.client.get('/journal/state')).body;
    expect(await verification()).toMatchObject({
      result: 'intact',
      records: head.sequence,
      head,
      seals: 2,
      sealedUpTo: history.seals.second.sequence,
      fault: null,
    });
  });

  it('says how far it is, then the result', async () => {
    const all = await lines();
    expect(all.slice(0, -1)).toEqual([{ checked: all.at(-1)?.records, of: all.at(-1)?.records }]);
  });

  it('is for those who make exports', async () => {
    expect((await (await app.signIn('technician')).get('/journal/verification')).status).toBe(403);
  });

  it('holds the log against a head and a key known from before, as they are printed', async () => {
    const { first } = history.seals;
    const query = `?knownHead=${first.sequence}:${first.hash}&keyFingerprint=${grouped(first.keyId).toUpperCase()}`;
    expect((await verification(query)).result).toBe('intact');
    const other = await verification(`?knownHead=${first.sequence}:${'ab'.repeat(32)}`);
    expect(other.fault).toMatchObject({ code: 'notTheKnownHead', sequence: 1 });
    const later = await verification(`?knownHead=9999:${first.hash}`);
    expect(later.fault).toMatchObject({ code: 'cutOff' });
    expect((await verification(`?keyFingerprint=${'ab'.repeat(32)}`)).fault).toMatchObject({ code: 'otherSigner' });
    expect((await history.client.get('/journal/verification?knownHead=12')).body.errors[0].path).toBe('/knownHead');
  });

  it('names a record whose text was changed', async () => {
    const sequence = await history.recordOf('entry', '"massMicrograms":"140000000"');
    const fault = await faultAfter(
      `update journal_record set content = replace(content, '"140000000"', '"140000001"') where FIRM and sequence = ${sequence}`,
    );
    expect(fault).toMatchObject({ code: 'textChanged', sequence });
    expect(fault?.message).toContain(`record ${sequence} `);
  });

  it('names a record whose columns were changed while its text stayed: in every table of the log', async () => {
    const inTables: [string, string, string][] = [
      ['entry', 'mass_micrograms', 'mass_micrograms + 1'],
      ['entry', 'booking_month', `'2026-04'`],
      ['entry', 'site_id', 'null'],
      ['entry_group', 'occurred_at', `occurred_at + interval '1 second'`],
      ['entry_group', 'reason', `'another'`],
      ['reading', 'typed_value', `'17201'`],
      ['reading', 'resolution_g', '4'],
      ['statement', 'condition', `'moreThanFull'`],
      ['group_document', 'number', `'20872'`],
      ['journal_record', 'recorded_by', `'00000000-0000-0000-0000-000000000000'`],
    ];
    for (const [table, column, value] of inTables) {
      const key =
        table === 'statement' || table === 'group_document'
          ? 'group_id'
          : table === 'journal_record'
            ? 'record_id'
            : 'id';
      const [row] = await history.rows<{ key: string; held: string }>(
        `select ${key} as key, ${column}::text as held from ${table} where FIRM order by ${key} desc limit 1`,
      );
      await history.tamper(`update ${table} set ${column} = ${value} where FIRM and ${key} = '${row?.key}'`);
      const { fault } = await verification();
      expect([table, column, fault?.code, fault?.values]).toEqual([table, column, 'columnDiffers', { table, column }]);
      expect(fault?.sequence).toBeGreaterThan(0);
      const back = row?.held === null ? 'null' : `'${row?.held}'`;
      await history.tamper(`update ${table} set ${column} = ${back} where FIRM and ${key} = '${row?.key}'`);
    }
    expect((await verification()).result).toBe('intact');
  });

  it('names a row that was taken out of a table, and one that was put in', async () => {
    const [entry] = await history.rows<{ id: string; sequence: string }>('select * from entry where FIRM limit 1');
    await history.tamper(`drop table if exists kept; create table kept as select * from entry where FIRM and id = '${entry?.id}';
      delete from entry where FIRM and id = '${entry?.id}'`);
    expect((await verification()).fault).toMatchObject({
      code: 'rowMissing',
      sequence: Number(entry?.sequence),
      values: { table: 'entry' },
    });
    await history.tamper(`insert into entry select * from kept;
      update kept set id = '00000000-0000-7000-8000-000000000009', sequence = 9999; insert into entry select * from kept; drop table kept`);
    expect((await verification()).fault).toMatchObject({
      code: 'rowWithoutRecord',
      values: { table: 'entry', id: '00000000-0000-7000-8000-000000000009' },
    });
  });

  it.each([
    ['statement', 'ordinal = ordinal + 7'],
    ['reading', `id = '00000000-0000-7000-8000-000000000009'`],
    ['group_document', 'ordinal = ordinal + 7'],
  ])('names a row that was put into the table %s', async (table, change) => {
    const fault =
      await faultAfter(`drop table if exists put; create table put as select * from ${table} where FIRM limit 1;
      update put set ${change}; insert into ${table} select * from put; drop table put`);
    expect(fault).toMatchObject({ code: 'rowWithoutRecord', values: { table } });
  });

  it.each([
    ['a removed record', 'delete from journal_record where FIRM and sequence = 9', 'missing', 9],
    [
      'two records that changed places',
      `update journal_record set sequence = -sequence where FIRM and sequence in (9, 10);
       update journal_record set sequence = 19 + sequence where FIRM and sequence < 0`,
      'doesNotFollow',
      9,
    ],
    [
      'a hash of another text',
      `update journal_record set content_hash = hash where FIRM and sequence = 9`,
      'textChanged',
      9,
    ],
    [
      'a hash of another place',
      `update journal_record set hash = content_hash where FIRM and sequence = 9`,
      'doesNotFollow',
      9,
    ],
  ] as const)('names %s', async (_what, sql, code, sequence) => {
    expect(await faultAfter(sql)).toMatchObject({ code, sequence });
  });

  it('names a log that was written anew from a record on, by the seal that it does not fit', async () => {
    const sequence = await history.recordOf('register', history.otherCustomer.id);
    const fault = await faultAfter(
      `update journal_record set content = replace(content, '"version":1', '"version":1 ') where FIRM and sequence = ${sequence};
       ${REHASH}`,
    );
    expect(fault).toMatchObject({ code: 'sealedOtherwise', sequence: 1, values: { to: history.seals.first.record } });
  });

  it('names an end that was cut off behind the back of the head', async () => {
    const { sequence } = (await history.client.get('/journal/state')).body.head;
    const fault = await faultAfter(`delete from journal_record where FIRM and sequence = ${sequence};
      delete from entry where FIRM and sequence = ${sequence}`);
    expect(fault).toMatchObject({ code: 'headDiffers', sequence });
  });

  it('names a book that is not the sum of its entries', async () => {
    const place = `cylinder:${history.cylinder.id}`;
    expect(
      await faultAfter(
        `update balance set mass_micrograms = mass_micrograms + 1 where FIRM and place_key = '${place}'`,
      ),
    ).toMatchObject({ code: 'booksDiffer', values: { place, refrigerant: 'R-410A' } });
    await history.tamper(
      `update balance set mass_micrograms = mass_micrograms - 1 where FIRM and place_key = '${place}'`,
    );
    expect(
      await faultAfter(`update month_sum set entry_count = entry_count + 1 where FIRM and from_kind = 'supplier'`),
    ).toMatchObject({ code: 'booksDiffer', values: { place: '2026-03 supplier cylinder' } });
  });

  it.each([
    ['tool', 'resolution_g', 'resolution_g = 1'],
    ['unit', 'name', `name = 'front bedroom'`],
    ['unit', 'version', 'version = version + 1'],
    ['site', 'time_zone', `time_zone = 'Europe/Madrid'`],
    ['customer', 'name', `name = 'Somebody else'`],
    ['unit_full_charge', 'mass_micrograms', 'mass_micrograms = mass_micrograms + 1'],
    ['cylinder_tare', 'valid_from', `valid_from = valid_from + interval '1 day'`],
    ['membership', 'roles', `roles = '{owner,technician}'`],
  ])('names a register row that was changed without a record: %s, %s', async (table, column, change) => {
    expect(await faultAfter(`update ${table} set ${change} where FIRM`)).toMatchObject({
      code: 'columnDiffers',
      values: { table, column },
    });
  });

  it('names a register row that was taken out, and one that was put in', async () => {
    await history.tamper(
      `drop table if exists kept; create table kept as select * from tool where FIRM; delete from tool where FIRM`,
    );
    expect((await verification()).fault).toMatchObject({ code: 'rowMissing', values: { table: 'tool' } });
    await history.tamper(`insert into tool select * from kept;
      update kept set id = '00000000-0000-7000-8000-000000000009'; insert into tool select * from kept; drop table kept`);
    expect((await verification()).fault).toMatchObject({ code: 'rowWithoutRecord', values: { table: 'tool' } });
  });

  it('names words beside a record that are not those hashed in it; erased ones leave the log intact', async () => {
    const sequence = await history.recordOf('group', history.notedGroupId);
    const words = `FIRM and record_id = '${history.notedGroupId}'`;
    await history.tamper(`update personal_text set content = 'No key' where ${words}`);
    expect((await verification()).fault).toMatchObject({ code: 'wordsChanged', sequence });
    await history.tamper(
      `update personal_text set content = 'No key', hash = sha256(salt || 'No key'::bytea) where ${words}`,
    );
    expect((await verification()).fault).toMatchObject({ code: 'wordsChanged', sequence });
  });

  it('finds a log intact whose words were erased', async () => {
    await history.tamper(
      `update personal_text set content = null where FIRM and record_id = '${history.notedGroupId}'`,
    );
    expect((await verification()).result).toBe('intact');
  });

  it('says when the key that signs is not the one of this server', async () => {
    writeFileSync(path.join(home, 'keys', 'seal.key'), `${'1f'.repeat(32)}\n`);
    try {
      expect((await verification()).fault).toMatchObject({ code: 'keyNotOurs' });
    } finally {
      rmSync(path.join(home, 'keys'), { recursive: true });
    }
  });

  it('speaks the language of whoever asks', async () => {
    await history.client.patch('/me', 1, { preferences: { locale: 'es-ES' } });
    await history.tamper('delete from journal_record where FIRM and sequence = 9');
    expect((await verification()).fault?.message).toMatch(/^Falta el apunte 9/);
  });
});

describe('The journal', () => {
  it('gives the records newest first, page by page, each with the text that is hashed', async () => {
    const first = (await history.client.get('/journal?limit=3')).body;
    const second = (await history.client.get(`/journal?limit=3&cursor=${first.nextCursor}`)).body;
    const { head } = (await history.client.get('/journal/state')).body;
    const sequences = [...first.items, ...second.items].map(({ sequence }) => sequence);
    expect(sequences).toEqual([0, 1, 2, 3, 4, 5].map((back) => head.sequence - back));
    expect(first.items[0].hash).toBe(head.hash);
    const [row] = await history.rows<{ content: string }>(
      `select content from journal_record where FIRM and sequence = ${head.sequence}`,
    );
    expect(first.items[0].content).toBe(row?.content);
  });

  it('is narrowed to a kind of record', async () => {
    const { items } = (await history.client.get('/journal?type=seal')).body;
    expect(items.map(({ sequence }: { sequence: number }) => sequence)).toEqual([
      history.seals.second.record,
      history.seals.first.record,
    ]);
  });

  it('is for those who make exports', async () => {
    expect((await (await app.signIn('reader')).get('/journal')).status).toBe(403);
  });
});
