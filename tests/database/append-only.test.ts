import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { place } from './record-texts.ts';
import { type Connection, connect, createTestFirm, refusalOf, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  firm = await createTestFirm(app);
  await firm.post([firm.purchase()]);
});
afterAll(async () => {
  await app.close();
  await database.drop();
});

const asApp = (sql: string, values?: unknown[]) => app.as(firm.scope, (query) => query(sql, values));
const POSTED = ['journal_record', 'entry_group', 'entry', 'reading', 'statement', 'group_document'];
const BOOKS = ['firm_head', 'balance', 'month_sum', 'place_state', 'flag'];
const PERMISSION_DENIED = { code: '42501' };

describe('The application, with plain SQL', () => {
  it('cannot insert an entry past the posting function', async () => {
    const insert = asApp(
      `insert into entry (firm_id, id, sequence, group_id, kind, refrigerant, mass_micrograms, from_place, to_place, to_id,
          how_known, occurred_at, recorded_at, recorded_by, booking_month, late, added_by_server, at_least, taken_back)
        select firm_id, $1, 99, id, kind, 'R-32', 5, 'factory', 'unit', $2, 'factory', occurred_at, recorded_at,
          recorded_by, '2026-11', false, false, false, false from entry_group limit 1`,
      [uuid(), firm.unitId],
    );

    expect(await refusalOf(insert)).toMatchObject(PERMISSION_DENIED);
  });

  it.each([...POSTED, ...BOOKS])('cannot insert, update, delete or truncate in %s', async (table) => {
    expect(await refusalOf(asApp(`insert into ${table} select * from ${table}`))).toMatchObject(PERMISSION_DENIED);
    expect(await refusalOf(asApp(`update ${table} set firm_id = firm_id`))).toMatchObject(PERMISSION_DENIED);
    expect(await refusalOf(asApp(`delete from ${table}`))).toMatchObject(PERMISSION_DENIED);
    expect(await refusalOf(asApp(`truncate ${table}`))).toMatchObject(PERMISSION_DENIED);
  });

  it.each([
    'alter table entry disable trigger all',
    'alter table entry disable row level security',
    'drop policy entry_firm on entry',
    `set session_replication_role = 'replica'`,
    'set role tarewright_owner',
    'set session authorization tarewright_owner',
    'create table mine (id int)',
    'create temporary table mine (id int)',
    `create function mine() returns int language sql as 'select 1'`,
  ])('cannot get around that by: %s', async (sql) => {
    const { code } = await refusalOf(asApp(sql));

    expect(['42501', '0LP01']).toContain(code);
  });

  it.each(['append_to_journal', 'insert_groups', 'insert_entries', 'add_to_books', 'store_derived', 'balance_changes'])(
    'cannot call %s, which is a step of posting and checks nothing',
    async (name) => {
      const [signature] = await database.query<{ call: string }>(
        'owner',
        `select format('select %s(%s)', proname, (select string_agg('null::' || format_type(t, null), ', ')
           from unnest(proargtypes::oid[]) t)) as call from pg_proc where proname = $1`,
        [name],
      );

      expect(await refusalOf(asApp(signature?.call ?? ''))).toMatchObject(PERMISSION_DENIED);
    },
  );

  it('may execute the posting function and the look-ups, and no other function of ours but those that policies need', async () => {
    const functions = await database.query<{ name: string }>(
      'superuser',
      `select proname as name from pg_proc where pronamespace = 'public'::regnamespace
         and has_function_privilege('tarewright_app', oid, 'execute') order by 1`,
    );

    expect(functions.map(({ name }) => name)).toEqual([
      'close_month',
      'create_firm',
      'current_firm_id',
      'current_person_id',
      // What a cylinder takes, for the files taken out: it reads as the application, under its policies.
      'cylinder_limit',
      'filling_density',
      'firm_ids_of_person',
      'invitation_by_token_hash',
      'lock_head',
      'moved_unit_ids',
      'password_reset_by_token_hash',
      'post_records',
      'reader_site_ids',
      'refuse',
      'sign_in_candidate',
      'site_of_unit_at',
      'token_by_hash',
    ]);
  });

  it('cannot post by putting functions of its own before those of the posting function', async () => {
    await asApp(`select set_config('search_path', 'pg_temp, public', true)`);
    const settings = await database.query<{ name: string; config: string[] | null }>(
      'superuser',
      `select proname as name, proconfig as config from pg_proc where pronamespace = 'public'::regnamespace and prosecdef`,
    );

    expect(settings.length).toBeGreaterThan(8);
    for (const { config } of settings) expect(config).toContain('search_path=pg_catalog, public, pg_temp');
  });
});

describe('Everybody else', () => {
  it.each(POSTED)('the owner included, is refused a change of %s', async (table) => {
    const owner = connect(database, 'owner');
    try {
      for (const sql of [
        `update ${table} set firm_id = firm_id`,
        `delete from ${table}`,
        `truncate ${table} cascade`,
      ]) {
        const attempt = owner.as(firm.scope, (query) => query(sql));
        expect(await refusalOf(attempt)).toMatchObject({ code: 'TW014', rule: 'append_only' });
      }
    } finally {
      await owner.close();
    }
  });

  it('as backup, reads all firms and writes nothing', async () => {
    const other = await createTestFirm(app);
    await other.post([other.purchase()]);
    const rows = await database.query<{ firms: string }>(
      'backup',
      'select count(distinct firm_id) as firms from entry',
    );

    expect(rows).toEqual([{ firms: '2' }]);
    const write = database.query('backup', `update customer set name = 'x'`);
    expect(await refusalOf(write)).toMatchObject(PERMISSION_DENIED);
    expect(await refusalOf(database.query('backup', 'select lock_head()'))).toMatchObject(PERMISSION_DENIED);
  });

  it('as jobs, posts like the application and reads no secret', async () => {
    const jobs = connect(database, 'jobs');
    try {
      const work = jobs.as(firm.scope, (query) => query('select sequence from lock_head()'));
      expect(await work).toHaveLength(1);
      for (const table of ['person_secret', 'session', 'password_reset', 'personal_token']) {
        const read = jobs.as(firm.scope, (query) => query(`select * from ${table}`));
        expect(await refusalOf(read)).toMatchObject(PERMISSION_DENIED);
      }
    } finally {
      await jobs.close();
    }
  });

  it('bypasses row-level security only as backup, and nobody is superuser', async () => {
    const roles = await database.query(
      'superuser',
      `select rolname, rolsuper, rolbypassrls, rolcreaterole, rolcreatedb from pg_roles where rolname like 'tarewright%' order by 1`,
    );
    const none = { rolsuper: false, rolbypassrls: false, rolcreaterole: false, rolcreatedb: false };

    expect(roles).toEqual([
      { rolname: 'tarewright_app', ...none },
      { rolname: 'tarewright_backup', ...none, rolbypassrls: true },
      { rolname: 'tarewright_jobs', ...none },
      { rolname: 'tarewright_owner', ...none },
    ]);
  });
});

describe('Erased or not, the words beside the chain', () => {
  const withNote = (hash: string) =>
    firm.group({ noteHash: hash, entries: [{ from: place('factory'), to: place('missing') }] });
  const text = (recordId: string) => ({
    texts: [{ id: uuid(), recordId, field: 'note', salt: '00'.repeat(16), content: 'left by the gate' }],
  });

  it('have to be those whose salted hash the record holds', async () => {
    const wrong = withNote('ab'.repeat(32));
    expect(await refusalOf(firm.post([wrong], text(wrong[0].id)))).toMatchObject({ code: 'TW017' });

    // SHA-256 of 16 zero bytes and the words, by node:crypto.
    const { createHash } = await import('node:crypto');
    const hash = createHash('sha256').update(Buffer.alloc(16)).update('left by the gate').digest('hex');
    const right = withNote(hash);
    await firm.post([right], text(right[0].id));
    const rows = await asApp('select content from personal_text where record_id = $1', [right[0].id]);
    expect(rows).toEqual([{ content: 'left by the gate' }]);
  });

  it('belong to a record of the same call', async () => {
    const purchase = firm.purchase('1');
    await firm.post([purchase]);

    const attempt = firm.post([firm.purchase('1')], text(purchase[0].id));

    expect(await refusalOf(attempt)).toMatchObject({ code: 'TW017' });
  });
});
