import { spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { realpathSync } from 'node:fs';
import path from 'node:path';
import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { requirePostgres } from '../../server/commands/bootstrap/programs.mjs';
import { createDataSource } from '../../server/database/data-source.ts';
import { migrate } from '../../server/database/migrate.ts';
import { MIGRATIONS } from '../../server/database/migrations.ts';
import { ensureRoles } from '../../server/database/roles.ts';
import { postEntryGroup } from '../../server/entries/entry-group.service.ts';
import type { Actor } from '../../server/http/actor.ts';
import type { Parts } from '../../server/http/parts.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { entryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { runOnce, throwawayUrl } from '../support/cloned-database.ts';
import { firstBrokenRecord } from './chain-from-rows.ts';

/**
 * A dump of each released schema, made by `pg_dump -Fc` of the demo firms as that release left them:
 * 1-main-job.dump, 2026-12-01, migrations 1 to 5, 1,286 entries, 3,287 records.
 */
const RELEASES = path.resolve(import.meta.dirname, '../support/releases');
const { port } = inject('postgres');
const name = `u_${randomBytes(6).toString('hex')}`;
const superuserUrl = throwawayUrl(port, 'postgres', 'postgres');
const urlOf = (user: string) => throwawayUrl(port, user, name);
const read = <Row extends object>(sql: string, values?: unknown[]) =>
  runOnce<Row>(urlOf('tarewright_backup'), sql, values);
const LOG = ['entry', 'entry_group', 'reading', 'statement', 'journal_record', 'balance', 'charge_sheet', 'flag'];
const countRows = async () => {
  const counts: Record<string, number> = {};
  for (const table of LOG)
    counts[table] = (await read<{ n: number }>(`select count(*)::int n from ${table}`))[0]?.n ?? -1;
  return counts;
};

let before: Awaited<ReturnType<typeof countRows>>;
let ran: string[];

beforeAll(async () => {
  await ensureRoles({
    superuserUrl,
    database: name,
    passwords: { owner: 'test', app: 'test', jobs: 'test', backup: 'test' },
  });
  // Links to single programs may stand on PATH; the others are where those lead.
  const programs = path.dirname(realpathSync(path.join(requirePostgres().folder, 'postgres')));
  const restored = spawnSync(
    path.join(programs, 'pg_restore'),
    ['--exit-on-error', '--no-password', '-d', urlOf('postgres'), path.join(RELEASES, '1-main-job.dump')],
    { encoding: 'utf8' },
  );
  if (restored.status !== 0) throw new Error(`pg_restore: ${restored.error ?? restored.stderr}`);
  before = await countRows();
  ran = await migrate({ ownerUrl: urlOf('tarewright_owner') });
}, 120_000);

afterAll(() => runOnce(superuserUrl, `drop database if exists ${name} with (force)`));

describe('A database as the first release left it, with three years of two firms', () => {
  it('is brought up to date by the later migrations alone', () => {
    expect(MIGRATIONS.length).toBeGreaterThan(5);
    expect(ran.length).toBe(MIGRATIONS.length - 5);
  });

  it('keeps every row of the log', async () => {
    expect(before).toMatchObject({ entry: 1286, journal_record: 3287 });
    expect(await countRows()).toEqual(before);
  });

  it('keeps each chain intact, and every balance equal to the sum of its entries', async () => {
    const firms = await read<{ id: string }>('select id from firm order by id');
    expect(firms).toHaveLength(2);
    for (const { id } of firms) {
      const chain = await read<{ sequence: string; content: string; hash: Buffer }>(
        'select sequence::text, content, hash from journal_record where firm_id = $1 order by journal_record.sequence',
        [id],
      );
      expect(firstBrokenRecord(chain)).toBeNull();
    }
    const wrong = await read(`
      select b.place_key from balance b
      full join (
        select firm_id, place_key, refrigerant, sum(mass) as mass from (
          select firm_id, to_place || coalesce(':' || to_id::text, ':' || to_as, '') as place_key, refrigerant, mass_micrograms as mass from entry
          union all
          select firm_id, from_place || coalesce(':' || from_id::text, ':' || from_as, ''), refrigerant, -mass_micrograms from entry) e
        group by 1, 2, 3) s using (firm_id, place_key, refrigerant)
      where b.mass_micrograms is distinct from s.mass`);
    expect(wrong).toEqual([]);
  });

  it('tells who held each cylinder from when on, as the records of its register do', async () => {
    const records = await read<{ cylinderId: string; version: number; at: Date; content: string }>(
      `select subject_id as "cylinderId", version, recorded_at as at, content from journal_record
        where noun = 'cylinder' order by subject_id, version`,
    );
    const lastOf = new Map<string, string | null>();
    const told = records.flatMap(({ cylinderId, version, at, content }) => {
      const heldBy: string | null = JSON.parse(content).after.heldBy ?? null;
      const isSame = lastOf.has(cylinderId) && lastOf.get(cylinderId) === heldBy;
      lastOf.set(cylinderId, heldBy);
      return isSame ? [] : [{ cylinderId, version, heldBy, from: at }];
    });
    expect(told.filter(({ heldBy }) => heldBy !== null).length).toBeGreaterThan(0);
    expect(
      await read(`select cylinder_id as "cylinderId", version, held_by as "heldBy", valid_from as "from"
        from cylinder_holder order by cylinder_id, version`),
    ).toEqual(told);
  });

  it('tells of each sum by month how much of it is reversals', async () => {
    const entries = await read<{ key: string; mass: string }>(`
      select concat_ws(' ', e.firm_id, e.booking_month, e.refrigerant, e.from_place || coalesce(':' || e.from_as, ''),
          e.to_place || coalesce(':' || e.to_as, '')) as key, e.mass_micrograms::text as mass
        from entry e where e.reverses_entry_id is not null`);
    expect(entries.length).toBeGreaterThan(0);
    const sums = new Map<string, bigint>();
    for (const { key, mass } of entries) sums.set(key, (sums.get(key) ?? 0n) + BigInt(mass));
    const kept = await read<{ key: string; mass: string }>(`
      select concat_ws(' ', firm_id, month, refrigerant, from_kind, to_kind) as key, reversal_micrograms::text as mass
        from month_sum where reversal_micrograms <> 0`);
    expect(new Map(kept.map(({ key, mass }) => [key, BigInt(mass)]))).toEqual(sums);
  });

  it('takes a new posting', async () => {
    const [cylinder] = await read<{ firmId: string; id: string; grossG: string; at: Date; personId: string }>(`
      select c.firm_id as "firmId", c.id, (r.mass_micrograms / 1000000)::text as "grossG", now() as at, m.person_id as "personId"
      from cylinder c join reading r on r.firm_id = c.firm_id and r.cylinder_id = c.id and r.mode = 'gross'
      join membership m on m.firm_id = c.firm_id and 'owner' = any (m.roles)
      order by r.read_at desc limit 1`);
    if (!cylinder) throw new Error('the dump holds no weighed cylinder');
    const dataSource = await createDataSource({ url: urlOf('tarewright_app'), poolSize: 1 }).initialize();
    try {
      const parts = {
        dataSource,
        reference: loadReferenceData(),
        now: () => cylinder.at,
        newId: () => uuidV7(),
      } as Parts;
      const actor: Actor = {
        personId: cylinder.personId,
        firmId: cylinder.firmId,
        roles: ['owner'],
        siteIds: null,
        locale: 'en-US',
        tokenScopes: null,
      };
      const reading = {
        id: uuidV7(),
        cylinderId: cylinder.id,
        moment: 'only',
        mode: 'gross',
        value: cylinder.grossG,
        unit: 'g',
      };
      const body = entryGroupRequest.parse({
        groupId: uuidV7(),
        schema: 1,
        kind: 'weighing',
        occurredAt: cylinder.at.toISOString(),
        readings: [reading],
        entries: [],
      });
      await postEntryGroup(parts, actor, body);
    } finally {
      await dataSource.destroy();
    }
    expect((await countRows()).reading).toBe((before.reading ?? 0) + 1);
  });
});
