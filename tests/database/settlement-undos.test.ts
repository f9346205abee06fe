import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type EntryFields, place, registerRecordOf, textOf } from './record-texts.ts';
import { type Connection, connect, createTestFirm, POST, type Query, refusalOf, type TestFirm } from './test-firm.ts';

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

const DIFFERENCE = place('cylinderDifference');
const MISSING = place('missing');

interface Settled {
  id: string;
  judgedGroupId: string;
}

/** 90 g that a weighing did not find; of them `massMicrograms` settled as missing. Below zero: a surplus, from missing. */
async function settled(massMicrograms = 90_000_000, judgedGroupId = uuid()): Promise<Settled> {
  const isOut = massMicrograms > 0;
  const size = String(Math.abs(massMicrograms));
  const weighing = firm.group({ id: judgedGroupId, kind: 'weighing' });
  const close = firm.group({
    kind: 'monthClose',
    entries: [
      isOut
        ? { from: DIFFERENCE, to: MISSING, massMicrograms: size, howKnown: 'estimated' }
        : { from: MISSING, to: DIFFERENCE, massMicrograms: size, howKnown: 'estimated' },
    ],
  });
  const id = uuid();
  await app.as(firm.scope, async (query) => {
    const known = await query('select from entry_group where id = $1', [judgedGroupId]);
    const groups = known.length > 0 ? [close] : [weighing, close];
    const record = registerRecordOf(firm.personId, { noun: 'settlement', subjectId: id });
    await query(POST, [[...groups.flat(), record].map(textOf), null]);
    await query(
      `insert into settlement (firm_id, id, entry_id, month, judged_group_id, judged_place, judged_place_id, difference,
          settled_to, refrigerant, mass_micrograms)
        values ($1, $2, $3, '2026-11', $4, 'cylinder', $5, 'cylinderDifference', 'missing', 'R-32', $6)`,
      [firm.firmId, id, close[1]?.id, judgedGroupId, firm.cylinderId, massMicrograms],
    );
  });
  return { id, judgedGroupId };
}

/** What the judge posts when a late entry explains the difference: the settled mass goes back. */
const takenBack = ({ judgedGroupId }: Settled, massMicrograms: string, fields: Partial<EntryFields> = {}) =>
  firm.group({
    entries: [
      {
        from: MISSING,
        to: DIFFERENCE,
        massMicrograms,
        typed: null,
        howKnown: null,
        addedByServer: true,
        correctsGroupId: judgedGroupId,
        ...fields,
      },
    ],
  });

const undo = (query: Query, { id }: Settled, groupId: string, massMicrograms: number | string) =>
  query('insert into settlement_undo (firm_id, settlement_id, group_id, mass_micrograms) values ($1, $2, $3, $4)', [
    firm.firmId,
    id,
    groupId,
    massMicrograms,
  ]);
const post = (query: Query, group: readonly unknown[]) => query(POST, [group.map(textOf), null]);
const undoWith = (of: Settled, group: ReturnType<typeof takenBack>, massMicrograms: number | string) =>
  app.as(firm.scope, async (query) => {
    await undo(query, of, group[0].id, massMicrograms);
    await post(query, group);
  });
const undone = () =>
  app.as(firm.scope, (query) => query<{ mass: string }>('select mass_micrograms as mass from settlement_undo'));

describe('What is taken back of a settlement', () => {
  it('is kept with the group that takes it back, whole or in parts', async () => {
    const settlement = await settled();
    await undoWith(settlement, takenBack(settlement, '40000000'), 40_000_000);
    await undoWith(settlement, takenBack(settlement, '50000000'), 50_000_000);
    expect((await undone()).map(({ mass }) => mass).sort()).toEqual(['40000000', '50000000']);
  });

  it('is kept of a surplus too, the other way', async () => {
    const settlement = await settled(-90_000_000);
    const group = takenBack(settlement, '90000000', { from: DIFFERENCE, to: MISSING });
    await undoWith(settlement, group, -90_000_000);
    expect(await undone()).toEqual([{ mass: '-90000000' }]);
  });

  it('is never more than was settled, in one piece or in several, nor of the other sign', async () => {
    const settlement = await settled();
    const more = takenBack(settlement, '90000001');
    expect(await refusalOf(undoWith(settlement, more, 90_000_001))).toEqual({
      code: 'TW023',
      rule: 'settlement_undo_within',
      detail: {
        settlementId: settlement.id,
        groupId: more[0].id,
        settledMicrograms: '90000000',
        undoneMicrograms: '90000001',
      },
    });
    await undoWith(settlement, takenBack(settlement, '60000000'), 60_000_000);
    expect(await refusalOf(undoWith(settlement, takenBack(settlement, '30000001'), 30_000_001))).toMatchObject({
      code: 'TW023',
      detail: { undoneMicrograms: '90000001' },
    });
    const other = takenBack(settlement, '10000000', { from: DIFFERENCE, to: MISSING });
    expect(await refusalOf(undoWith(settlement, other, -10_000_000))).toMatchObject({ code: 'TW023' });
    expect(await undone()).toEqual([{ mass: '60000000' }]);
  });

  it('is what the group takes back: not without it, not more, and not by an entry of something else', async () => {
    const settlement = await settled();
    const another = await settled();
    const wrong: Record<string, ReturnType<typeof takenBack>> = {
      less: takenBack(settlement, '39999999'),
      'of another refrigerant': takenBack(settlement, '40000000', { refrigerant: 'R-410A' }),
      'further into the place it was settled to': takenBack(settlement, '40000000', { from: DIFFERENCE, to: MISSING }),
      'from somewhere else': takenBack(settlement, '40000000', { from: place('atmosphere', null, 'measured') }),
      'into another difference': takenBack(settlement, '40000000', { to: place('unitDifference') }),
      'of the difference of another group': takenBack(another, '40000000'),
      'correcting nothing': takenBack(settlement, '40000000', { correctsGroupId: null }),
      'entered by a person': takenBack(settlement, '40000000', { addedByServer: false, howKnown: 'weighed' }),
      'in a group without entries': firm.group({ kind: 'weighing' }) as ReturnType<typeof takenBack>,
    };
    for (const [what, group] of Object.entries(wrong)) {
      expect(await refusalOf(undoWith(settlement, group, 40_000_000)), what).toMatchObject({
        code: 'TW024',
        rule: 'settlement_undo_of_entry',
        detail: { settlementId: settlement.id, groupId: group[0].id, undoneMicrograms: '40000000' },
      });
    }
    expect(await refusalOf(app.as(firm.scope, (query) => undo(query, settlement, uuid(), 1)))).toMatchObject({
      code: expect.stringMatching(/^(TW024|23503)$/),
    });
    expect(await undone()).toEqual([]);
  });

  it('is counted once: two settlements of one difference share what the group takes back', async () => {
    const judgedGroupId = uuid();
    const [one, two] = [await settled(60_000_000, judgedGroupId), await settled(30_000_000, judgedGroupId)];
    const group = takenBack(one, '60000000');
    const both = (of: number) =>
      app.as(firm.scope, async (query) => {
        await undo(query, one, group[0].id, 60_000_000 - of);
        await undo(query, two, group[0].id, 30_000_000);
        await post(query, group);
      });
    expect(await refusalOf(both(0))).toMatchObject({
      code: 'TW024',
      detail: { undoneMicrograms: '90000000', enteredMicrograms: '60000000' },
    });
    await both(30_000_000);
    expect(await undone()).toHaveLength(2);
  });

  it('cannot be told in a later transaction of a group that took nothing back, nor hidden by leaving the firm', async () => {
    const settlement = await settled();
    const purchase = firm.purchase();
    await firm.post([purchase]);
    const later = app.as(firm.scope, (query) => undo(query, settlement, purchase[0].id, 90_000_000));
    expect(await refusalOf(later)).toMatchObject({ code: 'TW024' });

    const other = await createTestFirm(app);
    const hidden = app.as(firm.scope, async (query) => {
      await undo(query, settlement, purchase[0].id, 90_000_000);
      await query(`select set_config('app.firm_id', $1, true)`, [other.firmId]);
    });
    expect(await refusalOf(hidden)).toMatchObject({ code: 'TW024' });
    expect(await undone()).toEqual([]);
  });
});
