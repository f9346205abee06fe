import { randomBytes } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { migrate } from '../../server/database/migrate.ts';
import { MIGRATIONS } from '../../server/database/migrations.ts';
import { ensureRoles } from '../../server/database/roles.ts';
import { runOnce, throwawayUrl } from '../support/cloned-database.ts';

const name = `m_${randomBytes(6).toString('hex')}`;
const { port } = inject('postgres');
const superuserUrl = throwawayUrl(port, 'postgres', 'postgres');
const ownerUrl = throwawayUrl(port, 'tarewright_owner', name);
const passwords = { owner: 'test', app: 'test', jobs: 'test', backup: 'test' };

beforeAll(() => ensureRoles({ superuserUrl, database: name, passwords }));
afterAll(() => runOnce(superuserUrl, `drop database if exists ${name} with (force)`));

describe('Migrating', () => {
  it('runs each migration once when three servers start at the same time', async () => {
    const ran = await Promise.all([1, 2, 3].map(() => migrate({ ownerUrl })));

    expect(ran.map((names) => names.length).sort()).toEqual([0, 0, MIGRATIONS.length]);
    expect(await migrate({ ownerUrl })).toEqual([]);
  });
});

describe('Making the roles', () => {
  it('can be done again, and puts back an attribute that somebody changed', async () => {
    // A role of the whole cluster: only what other tests do not look at is changed.
    await runOnce(superuserUrl, `alter role tarewright_owner connection limit 100`);
    await ensureRoles({ superuserUrl, database: name, passwords });
    await ensureRoles({ superuserUrl, database: name, passwords });

    const owners = await runOnce(
      superuserUrl,
      `select pg_get_userbyid(datdba) as owner from pg_database where datname = '${name}'`,
    );
    expect(owners).toEqual([{ owner: 'tarewright_owner' }]);
  });

  it('lets nobody else connect', async () => {
    const [rights] = await runOnce(
      superuserUrl,
      `select datacl::text as acl from pg_database where datname = '${name}'`,
    );

    expect(rights?.acl).not.toMatch(/[{,]=/);
  });
});
