import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type ChainRow, firstBrokenRecord } from './chain-from-rows.ts';
import { place } from './record-texts.ts';
import { type Connection, connect, createTestFirm, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
});
afterAll(async () => {
  await app.close();
  await database.drop();
});
beforeEach(async () => {
  firm = await createTestFirm(app);
});

/** 90 g from the first cylinder into the unit with 28 g of hose lost, weighed on the scale. */
const extraCharge = (of: TestFirm) =>
  of.group({
    kind: 'extraCharge',
    unitId: of.unitId,
    siteId: of.siteId,
    deviceSentAt: '2026-11-30T21:10:00.000Z',
    readings: [
      {
        id: '01900000-0000-7000-8000-000000000001',
        cylinderId: of.cylinderId,
        toolId: of.scaleId,
        at: null,
        moment: 'before',
        mode: 'gross',
        value: '17105',
        unit: 'g',
        massMicrograms: '17105000000',
        hoseFull: true,
        hose: { value: '28', unit: 'g' },
        hoseMicrograms: '28000000',
        scale: { resolutionG: '5', repeatabilityG: '0', spanErrorRelative: '0.0001', offsetG: '0' },
      },
    ],
    statements: [{ about: 'unit', id: of.unitId, is: 'full', by: null }],
    documents: [
      {
        kind: 'invoice',
        number: '20871',
        date: '2026-11-28',
        refrigerant: 'R-32',
        massMicrograms: '11340000000',
        typed: { value: '11.34', unit: 'kg' },
      },
    ],
    entries: [
      { from: place('cylinder', of.cylinderId), to: place('unit', of.unitId) },
      {
        from: place('cylinder', of.cylinderId),
        to: place('atmosphere', null, 'hose'),
        massMicrograms: '28000000',
        typed: { value: '28', unit: 'g' },
        howKnown: 'estimated',
        unitId: of.unitId,
      },
    ],
  });

describe('Posting a group', () => {
  it('moves its masses from book to book, to the microgram', async () => {
    await firm.post([firm.purchase('9500000001')]);
    await firm.post([extraCharge(firm)]);

    expect(await firm.book(`supplier:${firm.supplierId}`)).toEqual({ 'R-32': -9_500_000_001n });
    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 9_382_000_001n });
    expect(await firm.book(`unit:${firm.unitId}`)).toEqual({ 'R-32': 90_000_000n });
    expect(await firm.book('atmosphere:hose')).toEqual({ 'R-32': 28_000_000n });
  });

  it('takes the columns of groups, entries, readings, statements and documents from the chained text', async () => {
    const charge = extraCharge(firm);
    await firm.post([firm.purchase(), charge]);
    const [groups, entries, readings, statements, documents] = await app.as(firm.scope, async (query) => [
      await query('select * from entry_group where id = $1', [charge[0].id]),
      await query('select * from entry where group_id = $1 order by sequence', [charge[0].id]),
      await query('select * from reading where group_id = $1', [charge[0].id]),
      await query('select * from statement where group_id = $1', [charge[0].id]),
      await query('select * from group_document where group_id = $1', [charge[0].id]),
    ]);

    expect(groups?.[0]).toMatchObject({
      kind: 'extraCharge',
      unit_id: firm.unitId,
      site_id: firm.siteId,
      recorded_by: firm.personId,
      device_skew_seconds: 120,
      open_weigh_in: false,
      occurred_at: new Date(charge[0].occurredAt),
    });
    expect(entries).toMatchObject([
      {
        id: charge[1]?.id,
        kind: 'extraCharge',
        from_place: 'cylinder',
        from_id: firm.cylinderId,
        to_place: 'unit',
        mass_micrograms: '90000000',
        typed_value: '90',
        typed_unit: 'g',
        booking_month: '2026-11',
        recorded_by: firm.personId,
      },
      {
        id: charge[2]?.id,
        to_place: 'atmosphere',
        to_id: null,
        to_as: 'hose',
        how_known: 'estimated',
        unit_id: firm.unitId,
      },
    ]);
    expect(readings).toMatchObject([
      {
        mode: 'gross',
        mass_micrograms: '17105000000',
        hose_micrograms: '28000000',
        resolution_g: 5,
        span_error_relative: 0.0001,
        read_at: new Date(charge[0].occurredAt),
      },
    ]);
    expect(statements).toMatchObject([{ unit_id: firm.unitId, condition: 'full', shown_by: null }]);
    expect(documents).toMatchObject([
      { number: '20871', mass_micrograms: '11340000000', typed_value: '11.34', typed_unit: 'kg' },
    ]);
  });

  it('keeps sums by month that equal a fresh aggregate over the entries', async () => {
    await firm.post([firm.purchase(), extraCharge(firm)]);
    await firm.post([firm.purchase('1000', { occurredAt: '2026-10-02T08:00:00.000Z' })]);
    await firm.post([firm.purchase('2000')]);

    const [kept, fresh] = await app.as(firm.scope, async (query) => [
      await query(
        'select month, refrigerant, from_kind, to_kind, mass_micrograms, entry_count from month_sum order by 1, 2, 3, 4',
      ),
      await query(`select booking_month as month, refrigerant, concat_ws(':', from_place, from_as) as from_kind,
          concat_ws(':', to_place, to_as) as to_kind, sum(mass_micrograms)::text as mass_micrograms, count(*) as entry_count
        from entry group by 1, 2, 3, 4 order by 1, 2, 3, 4`),
    ]);

    expect(kept).toEqual(fresh);
    expect(kept).toHaveLength(4);
  });

  it('leaves every refrigerant at zero over all places', async () => {
    await firm.post([firm.purchase(), extraCharge(firm)]);

    const sums = await app.as(firm.scope, (query) =>
      query('select refrigerant, sum(mass_micrograms) as mass from balance group by refrigerant'),
    );

    expect(sums).toEqual([{ refrigerant: 'R-32', mass: '0' }]);
  });

  it('gives the group and its entries the sequence of their records', async () => {
    const posted = await firm.post([firm.purchase()]);

    const records = await app.as(firm.scope, (query) =>
      query(`select record_id, sequence from journal_record where type <> 'register' order by sequence`),
    );

    expect(posted.map(({ record_id, sequence }) => ({ record_id, sequence }))).toEqual(records);
  });
});

describe('Many who post at once', () => {
  it('get one gapless sequence, an intact chain and a book with every mass', async () => {
    const before = await headSequence();
    await Promise.all(
      Array.from({ length: 8 }, async () => {
        for (let post = 0; post < 5; post++) await firm.post([firm.purchase('1000')]);
      }),
    );

    const rows = await app.as(firm.scope, (query) =>
      query<ChainRow>('select sequence, content, hash from journal_record order by sequence'),
    );

    expect(rows.map((row) => Number(row.sequence))).toEqual(
      Array.from({ length: before + 80 }, (_, index) => index + 1),
    );
    expect(firstBrokenRecord(rows)).toBeNull();
    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 40_000n });
  });

  it('cannot together take more out of a cylinder than it holds', async () => {
    await firm.post([firm.purchase('100000000')]);
    const outcomes = await Promise.allSettled(
      Array.from({ length: 8 }, () =>
        firm.post([
          firm.group({
            entries: [
              { from: place('cylinder', firm.cylinderId), to: place('unit', firm.unitId), massMicrograms: '30000000' },
            ],
          }),
        ]),
      ),
    );

    expect(outcomes.filter(({ status }) => status === 'fulfilled')).toHaveLength(3);
    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 10_000_000n });
  });

  async function headSequence(): Promise<number> {
    const [head] = await app.as(firm.scope, (query) => query<{ sequence: string }>('select sequence from firm_head'));
    return Number(head?.sequence);
  }
});
