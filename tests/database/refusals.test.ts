import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type EntryFields, NOW, place } from './record-texts.ts';
import { type Connection, connect, createTestFirm, refusalOf, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let owner: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  owner = connect(database, 'owner');
});
afterAll(async () => {
  await app.close();
  await owner.close();
  await database.drop();
});
beforeEach(async () => {
  firm = await createTestFirm(app);
});

const intoUnit = (massMicrograms = '90000000'): EntryFields => ({
  from: place('cylinder', firm.cylinderId),
  to: place('unit', firm.unitId),
  massMicrograms,
});
const outOfUnit = (massMicrograms: string): EntryFields => ({
  from: place('unit', firm.unitId),
  to: place('cylinder', firm.recoveryCylinderId),
  massMicrograms,
});
const factoryCharge = (massMicrograms = '1200000000') =>
  firm.group({
    kind: 'factoryCharge',
    unitId: firm.unitId,
    entries: [{ from: place('factory'), to: place('unit', firm.unitId), massMicrograms, howKnown: 'factory' }],
  });
const knownUnit = (known = true) => ({
  placeStates: [{ place: 'unit' as const, id: firm.unitId, known, state: {}, lastOccurredAt: NOW }],
});
/** Everything that a refused call could have left behind. */
const everything = () =>
  app.as(firm.scope, async (query) => [
    await query('select * from firm_head'),
    await query('select count(*) from journal_record'),
    await query('select count(*) from entry_group'),
    await query('select count(*) from entry'),
    await query('select * from balance order by place_key'),
    await query('select * from month_sum'),
    await query('select * from place_state'),
  ]);

describe('A refused call', () => {
  it('leaves nothing, not even the groups of it that were right', async () => {
    const before = await everything();

    const refusal = await refusalOf(firm.post([firm.purchase('1000'), firm.group({ entries: [intoUnit('1001')] })]));

    expect(refusal.rule).toBe('cylinder_not_below_zero');
    expect(await everything()).toEqual(before);
  });
});

describe('A group stands or falls whole', () => {
  it('so an entry without its group in the call is refused', async () => {
    const [, entry] = firm.purchase();

    expect(await refusalOf(firm.post([[entry]]))).toMatchObject({ code: 'TW004', rule: 'group_whole' });
  });

  it('so a group without one of the entries it names is refused', async () => {
    const [group, first] = firm.group({
      entries: [
        { from: place('supplier', firm.supplierId), to: place('cylinder', firm.cylinderId) },
        { from: place('supplier', firm.supplierId), to: place('cylinder', firm.recoveryCylinderId) },
      ],
    });

    expect(await refusalOf(firm.post([[group, first]]))).toMatchObject({ code: 'TW004' });
  });

  it('so an entry cannot be added to a group later', async () => {
    const [group, entry] = firm.purchase();
    await firm.post([[group, entry]]);
    const late = { ...firm.purchase()[1], groupId: group.id };

    expect(await refusalOf(firm.post([[late]]))).toMatchObject({ code: 'TW004' });
  });

  it('so an entry that its group does not name is refused', async () => {
    const [group, entry] = firm.purchase();

    expect(await refusalOf(firm.post([[{ ...group, entryIds: [] }, entry]]))).toMatchObject({ code: 'TW004' });
  });
});

describe('One id posts once', () => {
  it('for a group, with the same content or another', async () => {
    const purchase = firm.purchase();
    await firm.post([purchase]);

    expect(await refusalOf(firm.post([purchase]))).toMatchObject({ code: '23505' });
    expect(await refusalOf(firm.post([firm.purchase('5', { id: purchase[0].id })]))).toMatchObject({
      code: '23505',
      rule: 'journal_record_record_id_key',
    });
  });

  it('for an entry, also in another group', async () => {
    const id = uuid();
    const withEntry = () =>
      firm.group({ entries: [{ id, from: place('supplier', firm.supplierId), to: place('missing') }] });
    await firm.post([withEntry()]);

    expect(await refusalOf(firm.post([withEntry()]))).toMatchObject({ code: '23505' });
  });

  it('within a firm: another firm may hold the same id and learns nothing of it', async () => {
    const other = await createTestFirm(app);
    const id = uuid();
    await firm.post([firm.purchase('1000', { id })]);

    await other.post([other.purchase('1000', { id })]);

    expect(await other.book(`cylinder:${other.cylinderId}`)).toEqual({ 'R-32': 1000n });
  });
});

describe('No book below zero', () => {
  it('for a cylinder, with the figures to say so', async () => {
    await firm.post([firm.purchase('60000000')]);

    expect(await refusalOf(firm.post([firm.group({ entries: [intoUnit('60000001')] })]))).toEqual({
      code: 'TW006',
      rule: 'cylinder_not_below_zero',
      detail: {
        place: 'cylinder',
        id: firm.cylinderId,
        refrigerant: 'R-32',
        bookMicrograms: '60000000',
        changeMicrograms: '-60000001',
      },
    });
  });

  it('for a cylinder by each refrigerant on its own', async () => {
    await firm.post([firm.purchase('60000000')]);

    const refusal = await refusalOf(
      firm.post([firm.group({ entries: [{ ...intoUnit('1'), refrigerant: 'R-410A' }] })]),
    );

    expect(refusal).toMatchObject({ code: 'TW006', detail: { refrigerant: 'R-410A' } });
  });

  it('for a cylinder, after the whole group: what comes in may come after what goes out', async () => {
    const both = firm.group({
      entries: [
        intoUnit('1000'),
        { from: place('cylinderDifference'), to: place('cylinder', firm.cylinderId), massMicrograms: '1000' },
      ],
    });

    await firm.post([both]);

    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 0n });
  });

  it('for a unit whose book is known', async () => {
    await firm.post([factoryCharge()], knownUnit());

    expect(await refusalOf(firm.post([firm.group({ entries: [outOfUnit('1200000001')] })]))).toMatchObject({
      code: 'TW007',
      rule: 'unit_not_below_zero',
      detail: { id: firm.unitId, bookMicrograms: '-1' },
    });
  });

  it('but for a unit whose book is not known: its masses are only summed', async () => {
    await firm.post([firm.group({ entries: [outOfUnit('5000')] })]);

    expect(await firm.book(`unit:${firm.unitId}`)).toEqual({ 'R-32': -5000n });
  });

  it('and a unit cannot be kept out of that by leaving its book unknown after a factory or opening entry', async () => {
    expect(await refusalOf(firm.post([factoryCharge()]))).toMatchObject({ code: 'TW016' });
    expect(await refusalOf(firm.post([factoryCharge()], knownUnit(false)))).toMatchObject({ code: 'TW016' });
  });

  it('nor by calling it unknown again without a reversal or another answer', async () => {
    await firm.post([factoryCharge()], knownUnit());

    expect(await refusalOf(firm.post([firm.purchase('1000')], knownUnit(false)))).toMatchObject({ code: 'TW008' });
  });

  it('and a book is not called known without an entry or a statement that makes it so', async () => {
    expect(await refusalOf(firm.post([firm.purchase('1000')], knownUnit()))).toMatchObject({ code: 'TW016' });

    const flat = firm.group({
      kind: 'vacuum',
      unitId: firm.unitId,
      statements: [{ about: 'unit', id: firm.unitId, is: 'empty', by: 'vacuum' }],
    });
    expect(await firm.post([flat], knownUnit())).toHaveLength(1);
  });
});

describe('A closed month takes nothing more', () => {
  const closeBefore = (firstOpenMonth: string) =>
    owner.as({ firmId: firm.firmId }, (query) => query('update firm_head set first_open_month = $1', [firstOpenMonth]));
  const inOctober = (entry: Partial<EntryFields>) =>
    firm.group({
      occurredAt: '2026-10-28T10:00:00.000Z',
      entries: [{ from: place('supplier', firm.supplierId), to: place('cylinder', firm.cylinderId), ...entry }],
    });

  it('and a late entry keeps its true time, booked in the first open month and marked late', async () => {
    await closeBefore('2026-11');

    expect(await refusalOf(firm.post([inOctober({})]))).toMatchObject({ code: 'TW009', rule: 'booking_month' });
    expect(await refusalOf(firm.post([inOctober({ bookingMonth: '2026-11', late: false })]))).toMatchObject({
      code: 'TW009',
    });

    const late = inOctober({ bookingMonth: '2026-11', late: true });
    await firm.post([late]);
    const rows = await app.as(firm.scope, (query) => query('select occurred_at, booking_month, late from entry'));
    expect(rows).toEqual([{ occurred_at: new Date('2026-10-28T10:00:00.000Z'), booking_month: '2026-11', late: true }]);
  });

  it('and what occurred in an open month is booked in it, in no other, and is not late', async () => {
    await closeBefore('2026-09');

    expect(await refusalOf(firm.post([inOctober({ bookingMonth: '2026-11' })]))).toMatchObject({ code: 'TW009' });
    expect(await refusalOf(firm.post([inOctober({ bookingMonth: '2026-10', late: true })]))).toMatchObject({
      code: 'TW009',
    });
    expect(await firm.post([inOctober({ bookingMonth: '2026-10' })])).toHaveLength(2);
  });

  it('by the calendar of the firm: 02:00 UTC on 1 November is still October in New York', async () => {
    const american = await createTestFirm(app, { timeZone: 'America/New_York' });
    const purchase = (bookingMonth: string) =>
      american.group({
        occurredAt: '2026-11-01T02:00:00.000Z',
        entries: [{ from: place('supplier', american.supplierId), to: place('missing'), bookingMonth }],
      });

    expect(await refusalOf(american.post([purchase('2026-11')]))).toMatchObject({ code: 'TW009' });
    expect(await american.post([purchase('2026-10')])).toHaveLength(2);
  });
});

describe('A reason is asked for', () => {
  const fill = (refrigerant: string, massMicrograms: string, reason: string | null) =>
    firm.group({
      reason,
      entries: [
        {
          refrigerant,
          massMicrograms,
          from: place('supplier', firm.supplierId),
          to: place('cylinder', firm.cylinderId),
        },
      ],
    });

  it('by a second refrigerant in a cylinder, and with it the cylinder holds a book of each', async () => {
    await firm.post([fill('R-32', '1000', null)]);

    expect(await refusalOf(firm.post([fill('R-410A', '500', null)]))).toMatchObject({
      code: 'TW010',
      rule: 'second_refrigerant_reason',
      detail: { id: firm.cylinderId, refrigerant: 'R-410A' },
    });
    expect(await refusalOf(firm.post([fill('R-410A', '500', '   ')]))).toMatchObject({ code: 'TW010' });
    await firm.post([fill('R-410A', '500', 'wrong hose')]);
    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 1000n, 'R-410A': 500n });
  });

  it('not by more of what the cylinder is mixed with already', async () => {
    await firm.post([fill('R-32', '1000', null), fill('R-410A', '500', 'wrong hose')]);

    expect(await firm.post([fill('R-410A', '500', null)])).toHaveLength(2);
  });

  it('of the second of two that come into an empty cylinder in one call, not of the first', async () => {
    expect(
      await refusalOf(firm.post([fill('R-32', '1000', 'reason of the first'), fill('R-410A', '500', null)])),
    ).toMatchObject({
      code: 'TW010',
      detail: { refrigerant: 'R-410A' },
    });
    expect(await firm.post([fill('R-32', '1000', null), fill('R-410A', '500', 'wrong hose')])).toHaveLength(4);
  });

  it('by contents past the limit of the cylinder, one microgram over', async () => {
    await firm.post([fill('R-32', '11340000000', null)]);

    expect(await refusalOf(firm.post([fill('R-32', '1', null)]))).toMatchObject({
      code: 'TW011',
      rule: 'past_limit_reason',
      detail: { bookMicrograms: '11340000001', limitMicrograms: '11340000000' },
    });
    expect(await firm.post([fill('R-32', '1', 'no other cylinder at hand')])).toHaveLength(2);
  });

  it('by a reversal', async () => {
    const purchase = firm.purchase('1000');
    await firm.post([purchase]);

    expect(await refusalOf(firm.post([firm.group({ reversesGroupId: purchase[0].id, reason: ' ' })]))).toMatchObject({
      code: '23514',
      rule: 'entry_group_reversal_reason_check',
    });
  });
});
