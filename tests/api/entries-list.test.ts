import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  HOSE,
  inCylinder,
  type Ledger,
  massOf,
  posted,
  readingOf,
  startLedger,
  weighIn,
} from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
let cylinderId: string;
let unitId: string;
let otherUnitId: string;
let reversedGroupId: string;
let technicianId: string;

/** A log of some variety: two units, a technician's and the owner's work, a hose, a difference, a reversal. */
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app, { timeZone: 'America/New_York' });
  cylinderId = (await ledger.cylinder('9500')).id;
  unitId = (await ledger.unit('1250', '1340', {}, 'factory')).id;
  otherUnitId = (await ledger.unit('1290', '1290')).id;
  const technician = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'Tam Orchard' });
  technicianId = technician.id;
  const client = await app.signIn(technician);
  const first = weighIn(ledger, { cylinderId, unitId, beforeG: 9500, afterG: 9410 });
  first.entries.push(massOf('28', inCylinder(cylinderId), HOSE, { howKnown: 'estimated' }) as never);
  await posted(client, { ...first, readings: [] });
  const wrong = weighIn(
    ledger,
    { cylinderId, unitId: otherUnitId, beforeG: 9382, afterG: 9300 },
    { kind: 'refill' },
    '2026-03-03T10:00:00Z',
  );
  reversedGroupId = wrong.groupId;
  await posted(client, wrong);
  await posted(
    ledger.client,
    { groupId: uuid(), schema: 1, reason: 'wrong unit' },
    `/entry-groups/${wrong.groupId}/reversal`,
  );
  await posted(
    ledger.client,
    groupOf('weighing', '2026-04-01T03:30:00Z', { readings: [readingOf(cylinderId, ledger.scale.id, 'only', 9300)] }),
  );
});
afterAll(() => app.close());

interface Row {
  id: string;
  sequence: number;
  kind: string;
  massG: number;
  occurredAt: string;
  [field: string]: unknown;
}
const rows = async (query = ''): Promise<Row[]> => (await ledger.client.get(`/entries?limit=200&${query}`)).body.items;

describe('The log', () => {
  it('shows each entry with both ends in words, who posted it, and in which zone its time is shown', async () => {
    const [row] = (await rows('kind=extraCharge')).filter(({ massG }) => massG === 90);
    expect(row).toMatchObject({
      from: { place: 'cylinder', id: cylinderId, label: 'C0001' },
      to: { place: 'unit', id: unitId, label: 'U0002' },
      typed: { value: '90', unit: 'g' },
      howKnown: 'weighed',
      timeZone: 'UTC',
      bookingMonth: '2026-03',
      recordedByName: 'Tam Orchard',
    });
    const [hose] = await rows('place=atmosphere&kind=extraCharge');
    expect(hose).toMatchObject({ to: { place: 'atmosphere', as: 'hose', id: null, label: 'atmosphere, hose' } });
  });

  it('is sorted by its own number or by time, either way', async () => {
    const bySequence = (await rows()).map(({ sequence }) => sequence);
    expect(bySequence).toEqual([...bySequence].sort((a, b) => b - a));
    expect((await rows('sort=sequence')).map(({ sequence }) => sequence)).toEqual([...bySequence].reverse());
    const byTime = (await rows('sort=occurredAt')).map(({ occurredAt }) => occurredAt);
    expect(byTime).toEqual([...byTime].sort());
  });

  it('comes in pages that miss and repeat nothing, whatever the sort', async () => {
    const all = (await rows()).map(({ id }) => id).sort();
    for (const sort of ['-sequence', 'sequence', '-occurredAt', 'occurredAt']) {
      const seen: string[] = [];
      let cursor: string | null = '';
      while (cursor !== null) {
        const query: string = cursor ? `&cursor=${cursor}` : '';
        const { body } = await ledger.client.get(`/entries?limit=2&sort=${sort}${query}`);
        seen.push(...body.items.map(({ id }: Row) => id));
        cursor = body.nextCursor;
      }
      expect([...seen].sort(), sort).toEqual(all);
    }
  });

  it('is filtered by refrigerant, month, unit, cylinder, place, person and kind, alone and together', async () => {
    const all = await rows();
    const expectFiltered = async (query: string, keeps: (row: Row) => boolean) => {
      const kept = all.filter(keeps).map(({ id }) => id);
      expect(kept.length, query).toBeGreaterThan(0);
      expect(kept.length, query).toBeLessThan(all.length);
      expect(
        (await rows(query)).map(({ id }) => id),
        query,
      ).toEqual(kept);
    };
    const ends = (row: Row) => [row.from, row.to] as { place: string; id: string | null }[];

    await expectFiltered('month=2026-03', ({ bookingMonth }) => bookingMonth === '2026-03');
    await expectFiltered(`unitId=${unitId}`, (row) => row.unitId === unitId);
    await expectFiltered(`cylinderId=${cylinderId}`, (row) => ends(row).some(({ id }) => id === cylinderId));
    await expectFiltered('place=cylinderDifference', (row) =>
      ends(row).some(({ place }) => place === 'cylinderDifference'),
    );
    await expectFiltered(`personId=${technicianId}`, ({ recordedByName }) => recordedByName === 'Tam Orchard');
    await expectFiltered('kind=refill', ({ kind }) => kind === 'refill');
    await expectFiltered(
      `unitId=${otherUnitId}&kind=refill&month=2026-03`,
      (row) => row.unitId === otherUnitId && row.kind === 'refill',
    );
    expect(await rows('refrigerant=R-22')).toEqual([]);
  });

  it('ties a reversed group and its reversal together, and can hide what they come to: nothing', async () => {
    const tied = (await rows()).filter(
      ({ reversedByGroupId, reversesGroupId }) => reversedByGroupId !== null || reversesGroupId !== null,
    );
    expect(tied.map(({ massG }) => massG)).toEqual(expect.arrayContaining([82, 82]));
    const without = await rows('without=reversed');
    expect(without.some(({ groupId }) => groupId === reversedGroupId)).toBe(false);
    const sum = (list: Row[]) =>
      list.reduce((total, row) => {
        const { from, to } = row as unknown as Record<'from' | 'to', { id: string | null }>;
        return total + (to.id === cylinderId ? row.massG : 0) - (from.id === cylinderId ? row.massG : 0);
      }, 0);
    expect(sum(without)).toBe(await ledger.contentG(cylinderId));
    expect(sum(await rows())).toBe(sum(without));
  });

  it('has an index that each sort and filter can go by', async () => {
    const client = new pg.Client({ connectionString: app.database.urls.superuser });
    await client.connect();
    try {
      // What the planner would choose for so few rows says nothing: can it find them by an index at all?
      await client.query('SET enable_seqscan = off; SET enable_sort = off; SET enable_bitmapscan = off');
      const planOf = async (rest: string) => {
        const { rows } = await client.query(`EXPLAIN SELECT id FROM entry WHERE firm_id = '${ledger.firm.id}' ${rest}`);
        return rows.map((row) => row['QUERY PLAN']).join('\n');
      };
      for (const sort of ['sequence DESC', 'sequence', 'occurred_at DESC, sequence DESC', 'occurred_at, sequence']) {
        const plan = await planOf(`ORDER BY ${sort} LIMIT 51`);
        expect(plan, sort).toMatch(/Index (Only )?Scan/);
        expect(plan, sort).not.toMatch(/Sort/);
      }
      // For a handful of rows every index costs the same, so filters are held against the indexes there are.
      const { rows } = await client.query(`SELECT indexdef FROM pg_indexes WHERE tablename = 'entry'`);
      const definitions = rows.map((row) => row.indexdef).join('\n');
      const filtered = ['refrigerant', 'booking_month', 'unit_id', 'kind', 'recorded_by'];
      for (const column of [...filtered, 'from_id', 'to_id', 'from_place', 'to_place']) {
        expect(definitions).toMatch(new RegExp(`\\(firm_id, ${column}, (occurred_at, )?sequence\\)`));
      }
    } finally {
      await client.end();
    }
  });
});

describe('A group', () => {
  it('is shown whole: readings, statements, documents, note, who, why, and its place in the chain', async () => {
    const body = {
      ...weighIn(
        ledger,
        { cylinderId, unitId: otherUnitId, beforeG: 9300, afterG: 9250 },
        { kind: 'refill' },
        '2026-05-01T10:00:00Z',
      ),
      statements: [{ about: 'unit', id: otherUnitId, is: 'full' }],
      documents: [{ kind: 'invoice', number: '20871', date: '2026-05-01', mass: { value: '25', unit: 'lb' } }],
      reason: 'alarm',
      note: 'roof hatch sticks',
      supervisedBy: ledger.owner.id,
    };
    await posted(ledger.client, body);
    const { body: group } = await ledger.client.get(`/entry-groups/${body.groupId}`);

    expect(group).toMatchObject({
      kind: 'refill',
      recordedByName: ledger.owner.name,
      supervisedByName: ledger.owner.name,
      unitLabel: 'U0003',
      reason: 'alarm',
      note: 'roof hatch sticks',
      readings: [
        {
          moment: 'before',
          readAt: '2026-05-01T10:00:00.000Z',
          massG: 17000,
          cylinderTag: 'C0001',
          toolId: ledger.scale.id,
          toolName: 'Scale 1',
          resolutionG: 5,
          repeatabilityG: 0,
          spanErrorRelative: 0,
          offsetG: 0,
        },
        { moment: 'after', massG: 16950 },
      ],
      statements: [{ about: 'unit', id: otherUnitId, is: 'full', by: null }],
      documents: [{ kind: 'invoice', number: '20871', date: '2026-05-01', massG: 11339.80925 }],
    });
    const [record] = await app.database.query<{ hash: string; before: string; content: string }>(
      'superuser',
      `SELECT encode(j.hash, 'hex') AS hash, encode(b.hash, 'hex') AS before, j.content FROM journal_record j
         JOIN journal_record b ON b.firm_id = j.firm_id AND b.sequence = j.sequence - 1 WHERE j.record_id = $1`,
      [body.groupId],
    );
    expect(group).toMatchObject({ hash: record?.hash, previousHash: record?.before });
    // Words that may name a person stand beside the chain.
    expect(record?.content).not.toContain('roof hatch');
  });

  it('is not there for another firm', async () => {
    const other = await startLedger(app);
    expect((await other.client.get(`/entry-groups/${reversedGroupId}`)).status).toBe(404);
    expect((await other.client.get('/entries')).body.items).toEqual([]);
    expect((await other.client.get(`/readings?cylinderId=${cylinderId}`)).body.items).toEqual([]);
  });
});

describe('A reader of some sites', () => {
  it('sees the entries, units and flags of those sites and nothing of cylinders, parties or the journal', async () => {
    const site = await ledger.made('/sites', {
      ...{ id: uuid(), customerId: ledger.customer.id },
      name: 'Other',
      addressLines: ['2'],
      timeZone: 'UTC',
      altitudeM: 0,
      jurisdiction: 'US',
    });
    const theirs = await ledger.unit('1000', '1000', { siteId: site.id });
    await posted(
      ledger.client,
      weighIn(
        ledger,
        { cylinderId, unitId: theirs.id, beforeG: 9250, afterG: 9200 },
        { kind: 'refill' },
        '2026-06-01T10:00:00Z',
      ),
    );
    const reader = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [site.id] }));

    const { body } = await reader.get('/entries');
    expect(body.items.length).toBeGreaterThan(1);
    expect(new Set(body.items.map(({ unitId: id }: Row) => id))).toEqual(new Set([theirs.id]));
    const refill = body.items.find(({ massG, addedByServer }: Row) => massG === 50 && !addedByServer);
    expect(refill.from).toEqual({ place: 'cylinder', id: cylinderId, as: null, label: 'cylinder' });
    expect((await reader.get('/units')).body.items.map(({ id }: { id: string }) => id)).toEqual([theirs.id]);
    expect((await reader.get('/cylinders')).body.items).toEqual([]);
    expect((await reader.get('/parties')).body.items).toEqual([]);
    expect((await reader.get(`/units/${unitId}`)).status).toBe(404);
    const group = await reader.get(`/entry-groups/${refill.groupId}`);
    expect(group.body).toMatchObject({ hash: null, previousHash: null });
    expect(
      (await reader.get('/flags')).body.items.every(
        ({ subject }: { subject: { id: string } }) => subject.id === theirs.id,
      ),
    ).toBe(true);
  });
});

describe('Flags', () => {
  it('are listed open or closed, by what they are about, in words', async () => {
    const { body } = await ledger.client.get(`/flags?cylinderId=${cylinderId}&open=true`);
    expect(body.items).toMatchObject([
      {
        code: 'cylinderNotExplained',
        level: 'look',
        subject: { kind: 'cylinder', id: cylinderId, label: 'C0001' },
        massG: -82,
        message: 'Cylinder C0001: the reading and the book differ by 82\u00a0g; the scales do not explain it.',
        closedAt: null,
      },
    ]);
    expect((await ledger.client.get(`/flags?cylinderId=${cylinderId}&open=false`)).body.items).toEqual([]);
    const spanish = await app.signIn(ledger.owner);
    await spanish.patch('/me', null, { preferences: { locale: 'es-ES' } });
    const said = (await spanish.get(`/flags?cylinderId=${cylinderId}`)).body.items[0].message;
    expect(said).toBe('Cilindro C0001: la lectura y el libro difieren en 82\u00a0g; las básculas no lo explican.');
  });
});
