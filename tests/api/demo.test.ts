import pg from 'pg';
import type { DataSource } from 'typeorm';
import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type DemoSignIn, loadDemoIfEmpty } from '../../server/commands/demo.ts';
import { createDataSource } from '../../server/database/data-source.ts';
import { BK, brenhaven } from '../../server/demo/brenhaven/firm.ts';
import type { DemoPerson } from '../../server/demo/demo-firm.ts';
import { HT, harrowTansy } from '../../server/demo/harrow-tansy/firm.ts';
import { postEntryGroup } from '../../server/entries/entry-group.service.ts';
import type { Actor } from '../../server/http/actor.ts';
import type { Parts } from '../../server/http/parts.ts';
import { foundFirm } from '../../server/people/found-firm.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { verifyPassword } from '../../server/session/password.ts';
import { getToday } from '../../server/today/today.service.ts';
import { entryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { firstBrokenRecord } from '../database/chain-from-rows.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';

const NOW = new Date('2026-12-10T15:20:00Z');
const PASSWORD = 'one password an installation';

let database: TestDatabase;
let answers: [DemoSignIn[], DemoSignIn[]];
let dataSource: DataSource;
let parts: Parts;
/** As the role that reads every firm and writes nothing. */
const rows = <Row extends pg.QueryResultRow>(sql: string, values?: unknown[]) =>
  database.query<Row>('backup', sql, values);
const load = (target: TestDatabase) => {
  const { app, jobs } = target.urls;
  return loadDemoIfEmpty({ databaseUrls: { app, jobs }, password: PASSWORD, now: NOW });
};
const actor = (person: DemoPerson, firmId = harrowTansy.firm.id): Actor => ({
  personId: person.id,
  firmId,
  roles: person.roles,
  siteIds: null,
  locale: person.preferences.locale,
  tokenScopes: null,
});

beforeAll(async () => {
  database = await createTestDatabase();
  // Two servers that start at once.
  answers = await Promise.all([load(database), load(database)]);
  dataSource = await createDataSource({ url: database.urls.app, poolSize: 2 }).initialize();
  const reference = loadReferenceData();
  parts = { dataSource, reference, now: () => NOW, newId: () => uuidV7() } as Parts;
}, 180_000);

afterAll(async () => {
  await dataSource?.destroy();
  await database?.drop();
});

describe('The demo firms', () => {
  it('are founded once, by whichever server comes first, and name the same people to both', async () => {
    expect(answers[0]).toEqual(answers[1]);
    const firms = await rows<{ name: string }>('select name from firm order by name');
    expect(firms.map(({ name }) => name)).toEqual(['Brenhaven Koudetechniek', 'Harrow & Tansy Climate']);
  });

  it('are found again by a later start', async () => {
    const before = await rows<{ n: string }>('select count(*) as n from journal_record');
    expect(await load(database)).toEqual(answers[0]);
    expect(await rows<{ n: string }>('select count(*) as n from journal_record')).toEqual(before);
  });

  it('have nine people and three, each with an address that nobody owns and the one password', async () => {
    expect(answers[0].map(({ firm }) => firm).filter((firm) => firm === harrowTansy.firm.name)).toHaveLength(9);
    expect(answers[0]).toHaveLength(12);
    for (const { email } of answers[0]) expect(email).toMatch(/^[a-z]+@[a-z-]+\.example$/);
    const secrets = await database.query<{ email: string; hash: string }>(
      'superuser',
      'select p.email, s.password_hash as hash from person p join person_secret s on s.person_id = p.id',
    );
    expect(secrets.map(({ email }) => email).sort()).toEqual(answers[0].map(({ email }) => email).sort());
    const hashes = secrets.map(({ hash }) => verifyPassword(hash, PASSWORD));
    expect(await Promise.all(hashes)).toEqual(secrets.map(() => true));
  });

  it('have fourteen sites, sixty units and forty cylinders in Wexcombe, with between 1,200 and 2,000 entries', async () => {
    const [counts] = await rows<Record<string, string>>(
      `select (select count(*) from site s where s.firm_id = $1) as sites,
        (select count(*) from unit u where u.firm_id = $1) as units,
        (select count(*) from cylinder c where c.firm_id = $1) as cylinders,
        (select count(*) from entry e where e.firm_id = $1) as entries,
        (select count(distinct booking_month) from entry e where e.firm_id = $1) as months`,
      [harrowTansy.firm.id],
    );
    expect(counts).toMatchObject({ sites: '14', units: '60', cylinders: '40' });
    expect(Number(counts?.entries)).toBeGreaterThan(1_200);
    expect(Number(counts?.entries)).toBeLessThan(2_000);
    expect(Number(counts?.months)).toBeGreaterThanOrEqual(36);
  });

  it('let the town’s reader see the town’s three sites alone', async () => {
    const [membership] = await rows<{ names: string[] }>(
      `select array(select s.name from site s where s.id = any (m.site_ids) order by 1) as names
        from membership m where m.person_id = $1`,
      [HT.corliss.id],
    );
    expect(membership?.names).toEqual(['Fire house', 'Public library', 'Town hall']);
  });

  it('sum every refrigerant to zero over all places', async () => {
    const sums = await rows<{ sum: string }>(
      'select firm_id, refrigerant, sum(mass_micrograms)::text as sum from balance group by 1, 2',
    );
    expect(sums.length).toBeGreaterThan(10);
    expect(sums.filter(({ sum }) => sum !== '0')).toEqual([]);
  });

  it('keep books that a fresh sum over their entries gives again', async () => {
    const wrong = await rows(
      `with fresh as (
         select e.firm_id, p.key, e.refrigerant, sum(p.mass) as mass from entry e
         cross join lateral (values
           (e.to_place || coalesce(':' || e.to_id::text, ':' || e.to_as, ''), e.mass_micrograms),
           (e.from_place || coalesce(':' || e.from_id::text, ':' || e.from_as, ''), -e.mass_micrograms)) p(key, mass)
         group by 1, 2, 3)
       select * from fresh f full join balance b
         on b.firm_id = f.firm_id and b.place_key = f.key and b.refrigerant = f.refrigerant
        where coalesce(f.mass, 0) <> coalesce(b.mass_micrograms, 0)`,
    );
    expect(wrong).toEqual([]);
  });

  it('chain every record to the one before', async () => {
    for (const { firm } of [harrowTansy, brenhaven]) {
      const chain = await rows<{ sequence: string; content: string; hash: Buffer }>(
        'select sequence::text, content, hash from journal_record j where firm_id = $1 order by j.sequence',
        [firm.id],
      );
      expect(chain.length).toBeGreaterThan(100);
      expect(firstBrokenRecord(chain)).toBeNull();
    }
  });

  it('post nothing after now', async () => {
    const [latest] = await rows<{ at: Date; recorded: Date }>(
      'select max(occurred_at) as at, max(recorded_at) as recorded from entry_group',
    );
    expect(latest?.at.getTime()).toBeLessThanOrEqual(NOW.getTime());
    expect(latest?.recorded.getTime()).toBeLessThanOrEqual(NOW.getTime());
  });

  it('hold two units above 5 t CO2 equivalent under EU rules, by Regulation (EU) 2024/573, Article 5', async () => {
    const units = await rows<{ tag: string; refrigerant: string; kg: number }>(
      `select u.tag, u.refrigerant, c.mass_micrograms::float8 / 1e9 as kg from unit u
        join unit_full_charge c on c.firm_id = u.firm_id and c.unit_id = u.id where u.firm_id = $1`,
      [brenhaven.firm.id],
    );
    // GWP as in Annex I: R-32 675; R-410A and R-449A by their components; R-134a 1,430.
    const gwp: Record<string, number> = { 'R-32': 675, 'R-410A': 2_087.5, 'R-449A': 1_396.5, 'R-134a': 1_430 };
    const above = units.filter(({ refrigerant, kg }) => (kg * (gwp[refrigerant] ?? 0)) / 1000 > 5);
    expect(units).toHaveLength(6);
    expect(above.map(({ tag }) => tag).sort()).toEqual(['ZK-1', 'ZK-2']);
  });
});

describe('The honest mess of Harrow & Tansy', () => {
  const openFlags = (code: string) =>
    rows<{ tag: string; g: number }>(
      `select coalesce(c.tag, u.tag) as tag, f.mass_micrograms::float8 / 1e6 as g from flag f
        left join cylinder c on c.firm_id = f.firm_id and c.id = f.subject_id
        left join unit u on u.firm_id = f.firm_id and u.id = f.subject_id
        where f.firm_id = $1 and f.code = $2 and f.closed_at is null`,
      [harrowTansy.firm.id, code],
    );

  it('has one cylinder that does not balance, by more than four pounds, on the van of Bram', async () => {
    const found = await openFlags('cylinderNotExplained');
    expect(found).toHaveLength(1);
    expect(found[0]?.g).toBeLessThan(-4 * 453.59237);
    const [held] = await rows<{ heldBy: string }>('select held_by as "heldBy" from cylinder where tag = $1', [
      found[0]?.tag,
    ]);
    expect(held?.heldBy).toBe(HT.bram.id);
  });

  it('has a rack with additions above a fifth of its charge a year, the last of them less than two months after another', async () => {
    const additions = await rows<{ g: number; days: number }>(
      `select e.mass_micrograms::float8 / 1e6 as g, extract(epoch from $2::timestamptz - e.occurred_at)::float8 / 86400 as days
        from entry e join unit u on u.firm_id = e.firm_id and u.id = e.to_id
        where u.firm_id = $1 and u.tag = 'RK-A' and e.from_place = 'cylinder' order by e.occurred_at desc`,
      [harrowTansy.firm.id, NOW],
    );
    const lastYear = additions.filter(({ days }) => days <= 365);
    const fullChargeG = 210 * 453.59237;
    expect(lastYear.length).toBeGreaterThanOrEqual(8);
    expect(lastYear.reduce((sum, { g }) => sum + g, 0) / fullChargeG).toBeGreaterThan(0.2);
    expect((additions[1]?.days ?? 0) - (additions[0]?.days ?? 0)).toBeLessThan(60);
  });

  it('has one recovery cylinder within five percent of its limit', async () => {
    const near = await rows<{ tag: string; share: number }>(
      `select c.tag, sum(b.mass_micrograms)::float8 / c.limit_micrograms as share from cylinder c
        join balance b on b.firm_id = c.firm_id and b.place_id = c.id
        where c.firm_id = $1 and c.kind = 'recovery' group by c.tag, c.limit_micrograms
        having sum(b.mass_micrograms)::float8 / c.limit_micrograms > 0.9`,
      [harrowTansy.firm.id],
    );
    expect(near.map(({ tag }) => tag)).toEqual(['RC-05']);
    expect(near[0]?.share).toBeGreaterThan(0.95);
    expect(near[0]?.share).toBeLessThanOrEqual(1);
  });

  it('has one line set longer than its manual allows, charged without a sheet and with a reason', async () => {
    const tooLong = await rows<{ tag: string; sheets: string; reason: string }>(
      `select u.tag, (select count(*) from charge_sheet s where s.firm_id = u.firm_id and s.unit_id = u.id) as sheets,
          (select g.reason from entry_group g where g.firm_id = u.firm_id and g.unit_id = u.id and g.kind = 'extraCharge')
        from unit u join line_set l on l.firm_id = u.firm_id and l.unit_id = u.id
          join charge_basis b on b.firm_id = u.firm_id and b.unit_id = u.id
        where u.firm_id = $1 and (b.basis #>> '{limits,maxLengthM}')::float8
          < (select sum((branch ->> 'lengthM')::float8) from jsonb_array_elements(l.branches) branch)`,
      [harrowTansy.firm.id],
    );
    expect(tooLong).toMatchObject([{ tag: 'FH-2', sheets: '0' }]);
    expect(tooLong[0]?.reason).toContain('longer than the manual allows');
  });

  it('has a weigh-in of five weeks ago that was never weighed back, and one that was begun within the hour', async () => {
    const open = await rows<{ days: number; by: string }>(
      `select extract(epoch from $2::timestamptz - g.occurred_at)::float8 / 86400 as days, g.recorded_by as by from entry_group g
        where g.firm_id = $1 and g.open_weigh_in
          and not exists (select from entry_group c where c.firm_id = g.firm_id and c.closes_group_id = g.id)
        order by g.occurred_at`,
      [harrowTansy.firm.id, NOW],
    );
    expect(open.map(({ by }) => by)).toEqual([HT.bram.id, HT.pia.id]);
    expect(open[0]?.days).toBeGreaterThan(35);
    expect(open[1]?.days).toBeLessThan(1 / 24);
  });

  it('has a weigh-in that the evening’s reading closed at the time of its start', async () => {
    const closed = await rows<{ same: boolean }>(
      `select c.occurred_at = o.occurred_at as same from entry_group c
        join entry_group o on o.firm_id = c.firm_id and o.id = c.closes_group_id where c.firm_id = $1`,
      [harrowTansy.firm.id],
    );
    expect(closed).toEqual([{ same: true }]);
  });

  it('has units of which nobody knows the charge, one of them with a nameplate that cannot be read', async () => {
    const unknown = await rows<{ tag: string; readable: boolean; known: boolean | null }>(
      `select u.tag, u.nameplate_readable as readable, s.known from unit u
        left join place_state s on s.firm_id = u.firm_id and s.place_id = u.id
        where u.firm_id = $1 and not coalesce(s.known, false) order by u.tag`,
      [harrowTansy.firm.id],
    );
    expect(unknown).toContainEqual({ tag: 'T-1', readable: false, known: false });
    // Never charged by anyone: nothing is on record at all.
    expect(unknown).toContainEqual({ tag: 'SC-4', readable: true, known: null });
    const [readable] = await rows('select count(*)::int as n from unit where not nameplate_readable');
    expect(readable).toEqual({ n: 1 });
  });

  it('has an entry that came two days late and took back the difference that it explains', async () => {
    const late = await rows<{ hours: number; reversed: string; open: string }>(
      `select extract(epoch from g.recorded_at - g.occurred_at)::float8 / 3600 as hours,
          (select count(*) from entry e where e.firm_id = g.firm_id and e.group_id = g.id
            and e.from_place = 'cylinderDifference') as reversed,
          (select count(*) from flag f where f.firm_id = g.firm_id and f.closed_by_group_id = g.id
            and f.code = 'cylinderNotExplained') as open
        from entry_group g where g.firm_id = $1 and g.kind = 'adjust' and g.recorded_at - g.occurred_at > interval '36 hours'`,
      [harrowTansy.firm.id],
    );
    expect(late).toMatchObject([{ reversed: '1', open: '1' }]);
    expect(late[0]?.hours).toBeGreaterThan(40);
  });

  it('has one group withdrawn by the office and replaced by the right one', async () => {
    const corrected = await rows<{ reason: string; wrong: string; right: string }>(
      `select r.reason, w.tag as wrong, u.tag as right from entry_group r
        join entry_group o on o.firm_id = r.firm_id and o.id = r.reverses_group_id
        join entry_group n on n.firm_id = r.firm_id and n.replaces_group_id = o.id
        join unit w on w.firm_id = o.firm_id and w.id = o.unit_id
        join unit u on u.firm_id = n.firm_id and u.id = n.unit_id where r.firm_id = $1`,
      [harrowTansy.firm.id],
    );
    expect(corrected).toMatchObject([{ wrong: 'A103', right: 'A104' }]);
    expect(corrected[0]?.reason).toContain('104');
  });

  it('has one purchase filled short, and one that only its wrong stamp made short', async () => {
    const [short, ...others] = await openFlags('supplierShortFill');
    expect(others).toEqual([]);
    expect(short?.g).toBeLessThan(-0.6 * 453.59237);
    const [corrected] = await rows<{ g: number; tares: string }>(
      `select f.mass_micrograms::float8 / 1e6 as g,
          (select count(*) from cylinder_tare t where t.firm_id = f.firm_id and t.cylinder_id = f.subject_id) as tares
        from flag f where f.firm_id = $1 and f.code = 'supplierShortFill' and f.closed_at is not null`,
      [harrowTansy.firm.id],
    );
    expect(corrected?.tares).toBe('2');
  });

  it('has an addition of today that nobody answered for yet, and two that were answered later', async () => {
    expect((await openFlags('askIfFull')).map(({ tag }) => tag)).toEqual(['BK-1']);
    const answered = await rows('select id from entry_group where firm_id = $1 and answers_group_id is not null', [
      harrowTansy.firm.id,
    ]);
    expect(answered).toHaveLength(2);
  });

  it('retrofits one unit: R-22 comes out whole, R-407C goes in', async () => {
    const refrigerants = await rows<{ refrigerant: string; g: number }>(
      `select r.refrigerant, coalesce(b.mass_micrograms, 0)::float8 / 1e6 as g from unit u
        join unit_refrigerant r on r.firm_id = u.firm_id and r.unit_id = u.id
        left join balance b on b.firm_id = u.firm_id and b.place_id = u.id and b.refrigerant = r.refrigerant
        where u.firm_id = $1 and u.tag = 'FH-1' order by r.valid_from`,
      [harrowTansy.firm.id],
    );
    expect(refrigerants.map(({ refrigerant }) => refrigerant)).toEqual(['R-22', 'R-407C']);
    expect(refrigerants[0]?.g).toBe(0);
    expect(refrigerants[1]?.g).toBeGreaterThan(3_000);
  });

  it('names no difference but those of its stories: what else the scales show lies within them', async () => {
    const looks = await rows<{ code: string }>(
      `select distinct f.code from flag f where f.firm_id = $1 and f.closed_at is null and f.subject_kind = 'cylinder'`,
      [harrowTansy.firm.id],
    );
    expect(looks.map(({ code }) => code).sort()).toEqual(['cylinderNotExplained', 'supplierShortFill']);
  });
});

describe('The day of the demo firms', () => {
  it('shows a technician the van’s cylinders and the weigh-in that was begun', async () => {
    const day = await getToday(parts, actor(HT.pia));
    expect(day.onTheVan.length).toBeGreaterThan(2);
    expect(day.toWeighBack).toMatchObject([{ startedBy: HT.pia.id, unitLabel: 'B202' }]);
  });

  it('shows the office what came in, the cylinder that does not balance, and what is due', async () => {
    const day = await getToday(parts, actor(HT.ilse));
    expect(day.cameIn.length).toBeGreaterThan(2);
    expect(day.contradicts.map(({ code }) => code)).toContain('cylinderNotExplained');
    expect(day.due.map(({ kind, overdue }) => [kind, overdue])).toEqual([
      ['retest', true],
      ['retest', false],
    ]);
  });

  it('goes on: an addition posted now moves the books', async () => {
    const [van] = await rows<{ id: string; g: number }>(
      `select c.id, b.mass_micrograms::float8 / 1e6 as g from cylinder c
        join balance b on b.firm_id = c.firm_id and b.place_id = c.id
        where c.held_by = $1 and c.kind <> 'recovery' and c.refrigerant = 'R-32' order by 2 desc limit 1`,
      [BK.sanne.id],
    );
    const [unit] = await rows<{ id: string }>(`select id from unit where tag = 'OV-1'`);
    const body = entryGroupRequest.parse({
      groupId: uuidV7(),
      schema: 1,
      kind: 'adjust',
      unitId: unit?.id,
      occurredAt: NOW.toISOString(),
      entries: [
        {
          id: uuidV7(),
          refrigerant: 'R-32',
          mass: { value: '85', unit: 'g' },
          from: { place: 'cylinder', id: van?.id },
          to: { place: 'unit', id: unit?.id },
          howKnown: 'weighed',
        },
      ],
      statements: [{ about: 'unit', id: unit?.id, is: 'full' }],
    });
    const posted = await postEntryGroup(parts, actor(BK.sanne, brenhaven.firm.id), body);
    expect(posted.isNew).toBe(true);
    const cylinder = posted.value.balances.find(({ place }) => place.id === van?.id);
    expect(cylinder?.massG).toBeCloseTo((van?.g ?? 0) - 85, 5);
  });
});

describe('Loading the demo firms', () => {
  it('gives the same books for the same now', async () => {
    const other = await createTestDatabase();
    try {
      await load(other);
      const books = `select e.firm_id, e.id, e.sequence, e.group_id, e.refrigerant, e.mass_micrograms::text, e.from_place,
          e.from_id, e.to_place, e.to_id, e.occurred_at, e.recorded_at, e.recorded_by, e.booking_month
        from entry e where e.recorded_at < $1 order by e.firm_id, e.sequence`;
      const again = await other.query('backup', books, [NOW]);
      expect(again.length).toBeGreaterThan(1_200);
      expect(again).toEqual(await rows(books, [NOW]));
    } finally {
      await other.drop();
    }
  }, 120_000);

  it('leaves nothing behind when it is cut off, and the next start loads it whole', async () => {
    const other = await createTestDatabase();
    try {
      const cutOff = load(other);
      const failed = expect(cutOff).rejects.toThrow();
      await endTheLoading(other);
      await failed;
      expect(await other.query('jobs', 'select list_firm_ids() as id')).toEqual([]);
      expect(await other.query('backup', 'select id from person')).toEqual([]);
    } finally {
      await other.drop();
    }
  });

  it('leaves a database alone in which somebody else has a firm', async () => {
    const other = await createTestDatabase();
    const own = await createDataSource({ url: other.urls.app, poolSize: 1 }).initialize();
    try {
      const firm = { ...harrowTansy.firm, id: uuidV7(), name: 'Somebody else' };
      const owner = { id: uuidV7(), name: 'Somebody', email: 'somebody@example.test', password: PASSWORD };
      await foundFirm({ dataSource: own, now: () => NOW, newId: () => uuidV7() }, firm, owner);
      expect(await load(other)).toEqual([]);
      expect(await other.query('jobs', 'select list_firm_ids() as id')).toEqual([{ id: firm.id }]);
    } finally {
      await own.destroy();
      await other.drop();
    }
  });
});

/** Cuts the connection as soon as the load holds locks on what it writes. */
async function endTheLoading(target: TestDatabase): Promise<void> {
  const writes = `select pg_terminate_backend(a.pid) as done from pg_stat_activity a
    where a.datname = current_database() and a.pid <> pg_backend_pid() and exists (
      select from pg_locks l where l.pid = a.pid and l.relation = 'entry'::regclass and l.mode = 'RowExclusiveLock')`;
  const client = new pg.Client({ connectionString: target.urls.superuser });
  await client.connect();
  try {
    let isCut = false;
    while (!isCut) isCut = ((await client.query(writes)).rowCount ?? 0) > 0;
  } finally {
    await client.end();
  }
}
