import { createHash } from 'node:crypto';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { NOW, place, registerRecordOf, textOf } from './record-texts.ts';
import { type Connection, connect, createTestFirm, POST, refusalOf, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
let other: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  firm = await createTestFirm(app);
  other = await createTestFirm(app);
  for (const each of [firm, other]) {
    await each.post([each.purchase()]);
    await each.post([
      each.group({
        unitId: each.unitId,
        siteId: each.siteId,
        entries: [{ from: place('cylinder', each.cylinderId), to: place('unit', each.unitId) }],
      }),
      each.group({
        unitId: each.otherUnitId,
        siteId: each.otherSiteId,
        entries: [{ from: place('cylinder', each.cylinderId), to: place('unit', each.otherUnitId) }],
      }),
    ]);
  }
});
afterAll(async () => {
  await app.close();
  await database.drop();
});

const FIRM_TABLES = `select table_name as name from information_schema.columns
  where table_schema = 'public' and column_name = 'firm_id' order by 1`;

describe('A firm', () => {
  it('has row-level security, enabled and forced, on every table that names it', async () => {
    const open = await database.query(
      'owner',
      `select relname from pg_class where relname in (${FIRM_TABLES}) and relkind = 'r'
         and not (relrowsecurity and relforcerowsecurity)`,
    );
    expect(open).toEqual([]);

    const withoutFirm = await database.query<{ relname: string }>(
      'owner',
      `select relname from pg_class where relnamespace = 'public'::regnamespace and relkind = 'r'
         and not (relrowsecurity and relforcerowsecurity) order by 1`,
    );
    expect(withoutFirm.map(({ relname }) => relname)).toEqual(['migrations', 'session', 'sign_in_failure']);
  });

  it('sees only its own rows, in every table', async () => {
    const tables = await database.query<{ name: string }>('owner', FIRM_TABLES);
    expect(tables.length).toBeGreaterThan(28);
    for (const { name } of tables) {
      const rows = await app.as(firm.scope, (query) =>
        query(`select distinct firm_id from ${name} where firm_id <> $1`, [firm.firmId]),
      );
      expect(rows, name).toEqual([]);
    }
    expect(await app.as(firm.scope, (query) => query('select id from firm'))).toEqual([{ id: firm.firmId }]);
    expect(await app.as(firm.scope, (query) => query('select id from person'))).toEqual([{ id: firm.personId }]);
  });

  it('sees no row at all while no firm is chosen', async () => {
    const tables = await database.query<{ name: string }>('owner', FIRM_TABLES);
    for (const { name } of tables) {
      expect(await app.as({}, (query) => query(`select * from ${name}`)), name).toEqual([]);
    }
  });

  it('holds for the owner role too, which sees nothing of the log while no firm is chosen', async () => {
    expect(await database.query('owner', 'select * from entry')).toEqual([]);
    expect(await database.query('owner', 'select * from customer')).toEqual([]);
  });

  it('cannot write a row of another firm', async () => {
    const insert = app.as(firm.scope, (query) =>
      query('insert into customer (firm_id, id, name) values ($1, $2, $3)', [other.firmId, uuid(), 'x']),
    );
    expect((await refusalOf(insert)).code).toBe('42501');

    const changed = await app.as(firm.scope, (query) =>
      query('update customer set name = $1 where firm_id = $2 returning id', ['x', other.firmId]),
    );
    expect(changed).toEqual([]);
  });

  it('cannot hand one of its rows to another firm', async () => {
    const give = app.as(firm.scope, (query) => query('update party set firm_id = $1', [other.firmId]));

    expect((await refusalOf(give)).code).toBe('42501');
  });

  it('cannot refer to a row of another firm', async () => {
    const job = app.as(firm.scope, (query) =>
      query(`insert into job (firm_id, id, unit_id, kind, opened_at) values ($1, $2, $3, 'install', $4)`, [
        firm.firmId,
        uuid(),
        other.unitId,
        NOW,
      ]),
    );
    expect(await refusalOf(job)).toMatchObject({ code: '23503', rule: 'job_unit_fkey' });

    const group = firm.post([firm.group({ unitId: other.unitId })]);
    expect(await refusalOf(group)).toMatchObject({ code: '23503', rule: 'entry_group_unit_fkey' });

    const entry = firm.post([
      firm.group({ entries: [{ from: place('factory'), to: place('cylinder', other.cylinderId) }] }),
    ]);
    expect(await refusalOf(entry)).toMatchObject({ code: 'TW005' });
  });

  it('cannot post, or lock the head, as another firm or as nobody', async () => {
    const texts = other.purchase().map(textOf);

    expect(await refusalOf(app.as(firm.scope, (query) => query(POST, [texts, null])))).toMatchObject({ code: 'TW003' });
    expect(await refusalOf(app.as({}, (query) => query(POST, [texts, null])))).toMatchObject({ code: 'TW001' });
    expect(await refusalOf(app.as({}, (query) => query('select lock_head()')))).toMatchObject({ code: 'TW001' });
    expect(await refusalOf(app.as({ firmId: uuid() }, (query) => query('select lock_head()')))).toMatchObject({
      code: 'TW001',
    });
  });

  it('leaves no trace on a connection that goes back to the pool', async () => {
    const single = connect(database);
    single.pool.options.max = 1;
    try {
      await single.as(firm.scope, (query) => query('select 1'));
      const { rows } = await single.pool.query('select current_firm_id(), current_person_id(), reader_site_ids()');
      expect(rows).toEqual([{ current_firm_id: null, current_person_id: null, reader_site_ids: null }]);
      expect((await single.pool.query('select * from entry')).rows).toEqual([]);
    } finally {
      await single.close();
    }
  });
});

describe('A reader who is limited to a site', () => {
  const reader = () => ({ ...firm.scope, siteIds: `{${firm.siteId}}` });
  const seen = async (table: string, column = 'id') =>
    (await app.as(reader(), (query) => query<Record<string, string>>(`select ${column} from ${table}`))).map(
      (row) => row[column],
    );

  it('sees that site, its customer, its units, their books and what was posted there', async () => {
    expect(await seen('site')).toEqual([firm.siteId]);
    expect(await seen('customer')).toEqual([firm.customerId]);
    expect(await seen('unit')).toEqual([firm.unitId]);
    expect(await seen('balance', 'place_id')).toEqual([firm.unitId]);
    expect(await seen('entry_group', 'unit_id')).toEqual([firm.unitId]);
    expect(await seen('entry', 'unit_id')).toEqual([firm.unitId]);
  });

  it.each(['cylinder', 'party', 'tool', 'journal_record', 'firm_head', 'month_sum', 'invitation'])(
    'sees nothing of %s',
    async (table) => {
      expect(await app.as(reader(), (query) => query(`select * from ${table}`))).toEqual([]);
    },
  );

  it('sees nothing when the list of sites is empty', async () => {
    const rows = await app.as({ ...firm.scope, siteIds: '{}' }, (query) => query('select id from unit'));

    expect(rows).toEqual([]);
  });

  it('cannot post', async () => {
    const attempt = app.as(reader(), (query) => query(POST, [firm.purchase().map(textOf), null]));

    expect(await refusalOf(attempt)).toMatchObject({ code: 'TW001' });
  });
});

describe('Before a firm is known', () => {
  const hash = (secret: string) => createHash('sha256').update(secret).digest();

  it('an address leads to the id of its person, in any case of letters, and to nothing else', async () => {
    const found = await app.as({}, (query) =>
      query('select * from sign_in_candidate($1)', [`${firm.personId}@EXAMPLE.test`]),
    );

    expect(found).toEqual([{ sign_in_candidate: firm.personId }]);
    expect(await app.as({}, (query) => query(`select * from sign_in_candidate('nobody@example.test')`))).toEqual([
      { sign_in_candidate: null },
    ]);
    expect(await app.as({}, (query) => query('select * from person'))).toEqual([]);
  });

  it('a person leads to the ids of the firms where they are active', async () => {
    const second = await createTestFirm(app, { personId: firm.personId });
    const firms = () =>
      app.as({}, async (query) =>
        (await query('select firm_ids_of_person($1) as id', [firm.personId])).map((row) => row.id),
      );

    expect(await firms()).toEqual([firm.firmId, second.firmId].sort());
    await app.as(second.scope, async (query) => {
      await query('update membership set active = false');
      const record = registerRecordOf(firm.personId, { noun: 'membership', subjectId: firm.personId, version: 2 });
      await query(POST, [[textOf(record)], null]);
    });
    expect(await firms()).toEqual([firm.firmId]);
  });

  it('a person sees their own memberships only until a firm is chosen', async () => {
    const second = await createTestFirm(app, { personId: other.personId });
    const memberships = (scope: object) =>
      app.as(scope, async (query) =>
        (await query('select firm_id from membership order by 1')).map((row) => row.firm_id),
      );

    expect(await memberships({ personId: other.personId })).toEqual([other.firmId, second.firmId].sort());
    expect(await memberships(other.scope)).toEqual([other.firmId]);
  });

  it('the hash of a mailed or personal token leads to ids', async () => {
    const [invitationId, tokenId, resetId] = [uuid(), uuid(), uuid()];
    await app.as(firm.scope, async (query) => {
      await query(
        `insert into invitation (firm_id, id, email, name, roles, token_hash, invited_by, invited_at, expires_at)
           values ($1, $2, 'new@example.test', 'New', '{technician}', $3, $4, $5, $5)`,
        [firm.firmId, invitationId, hash('invitation'), firm.personId, NOW],
      );
      await query(
        `insert into personal_token (firm_id, id, person_id, name, scopes, token_hash, created_at, expires_on)
           values ($1, $2, $3, 'till', '{read}', $4, $5, '2027-01-01')`,
        [firm.firmId, tokenId, firm.personId, hash('token'), NOW],
      );
    });
    await app.as({ personId: firm.personId }, (query) =>
      query(
        'insert into password_reset (id, person_id, token_hash, requested_at, expires_at) values ($1, $2, $3, $4, $4)',
        [resetId, firm.personId, hash('reset'), NOW],
      ),
    );
    const lookUp = (name: string, secret: string) =>
      app.as({}, (query) => query(`select * from ${name}($1)`, [hash(secret)]));

    expect(await lookUp('invitation_by_token_hash', 'invitation')).toEqual([
      { firm_id: firm.firmId, id: invitationId },
    ]);
    expect(await lookUp('token_by_hash', 'token')).toEqual([
      { firm_id: firm.firmId, person_id: firm.personId, id: tokenId },
    ]);
    expect(await lookUp('password_reset_by_token_hash', 'reset')).toEqual([{ person_id: firm.personId, id: resetId }]);
    expect(await lookUp('token_by_hash', 'invitation')).toEqual([]);
  });

  it('a password hash, a reset and a token are seen by their own person alone', async () => {
    await app.as({ personId: firm.personId }, (query) =>
      query('insert into person_secret (person_id, password_hash, changed_at) values ($1, $2, $3)', [
        firm.personId,
        'hash',
        NOW,
      ]),
    );
    const asOther = { firmId: firm.firmId, personId: other.personId };

    for (const table of ['person_secret', 'password_reset', 'personal_token']) {
      expect(await app.as(asOther, (query) => query(`select * from ${table}`)), table).toEqual([]);
      expect(await app.as(firm.scope, (query) => query(`select * from ${table}`)), table).toHaveLength(1);
    }
    const steal = app.as(asOther, (query) =>
      query('insert into person_secret (person_id, password_hash, changed_at) values ($1, $2, $3)', [
        firm.personId,
        'x',
        NOW,
      ]),
    );
    expect((await refusalOf(steal)).code).toBe('42501');
  });

  it('only the jobs role may list the ids of firms', async () => {
    expect((await refusalOf(database.query('app', 'select list_firm_ids()'))).code).toBe('42501');
    const ids = await database.query<{ id: string }>('jobs', 'select list_firm_ids() as id');
    expect(ids.map(({ id }) => id)).toEqual(expect.arrayContaining([firm.firmId, other.firmId]));
  });

  it('a session row names its person by what passport keeps', async () => {
    const keep = async (sess: unknown) => {
      const sid = uuid();
      await database.query('app', `insert into session (sid, sess, expire) values ($1, $2, '2027-01-01')`, [sid, sess]);
      const [row] = await database.query<{ person_id: string | null }>(
        'app',
        'select person_id from session where sid = $1',
        [sid],
      );
      return row?.person_id;
    };

    expect(await keep({ passport: { user: firm.personId } })).toBe(firm.personId);
    expect(await keep({ passport: { user: { personId: firm.personId } } })).toBe(firm.personId);
    expect(await keep({ cookie: {} })).toBeNull();
    expect(await keep({ passport: { user: 'not an id' } })).toBeNull();
  });
});
