import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { EntryRecord } from '../../shared/journal/record.schema.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type EntryFields, type GroupFields, place } from './record-texts.ts';
import { type Connection, connect, createTestFirm, refusalOf, type TestFirm } from './test-firm.ts';

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

const mirrorOf = (entry: EntryRecord): EntryFields => ({
  from: entry.to,
  to: entry.from,
  massMicrograms: entry.massMicrograms,
  typed: entry.typed,
  howKnown: entry.howKnown,
  occurredAt: entry.occurredAt,
  reversesEntryId: entry.id,
});
const reversalOf = (groupId: string, entries: EntryFields[], fields: GroupFields = {}) =>
  firm.group({ reversesGroupId: groupId, reason: 'wrong cylinder', entries, ...fields });

describe('A reversal', () => {
  it('puts the books back and leaves what it reverses standing', async () => {
    const [group, entry] = firm.purchase('1000') as unknown as [{ id: string }, EntryRecord];
    await firm.post([[group, entry]]);

    await firm.post([reversalOf(group.id, [mirrorOf(entry)])]);

    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 0n });
    expect(await firm.book(`supplier:${firm.supplierId}`)).toEqual({ 'R-32': 0n });
    const entries = await app.as(firm.scope, (query) => query('select id from entry order by sequence'));
    expect(entries).toHaveLength(2);
  });

  it.each([
    ['another mass', { massMicrograms: '999' }],
    ['another refrigerant', { refrigerant: 'R-410A' }],
    ['another place', { to: place('missing') }],
    ['another time', { occurredAt: '2026-11-29T00:00:00.000Z' }],
  ])('with %s is refused', async (_what, wrong) => {
    const [group, entry] = firm.purchase('1000') as unknown as [{ id: string }, EntryRecord];
    await firm.post([[group, entry]]);
    await firm.post([
      firm.group({
        reason: 'r',
        entries: [{ from: place('factory'), to: place('cylinder', firm.cylinderId), refrigerant: 'R-410A' }],
      }),
    ]);

    expect(await refusalOf(firm.post([reversalOf(group.id, [{ ...mirrorOf(entry), ...wrong }])]))).toMatchObject({
      code: 'TW012',
      rule: 'reversal_mirrors',
    });
  });

  it('of half a group is refused', async () => {
    const group = firm.group({
      entries: [
        { from: place('supplier', firm.supplierId), to: place('cylinder', firm.cylinderId) },
        { from: place('supplier', firm.supplierId), to: place('cylinder', firm.recoveryCylinderId) },
      ],
    });
    await firm.post([group]);

    expect(await refusalOf(firm.post([reversalOf(group[0].id, [mirrorOf(group[1] as EntryRecord)])]))).toMatchObject({
      code: 'TW012',
    });
  });

  it('of an entry of another group than the one it names is refused', async () => {
    const [one, two] = [firm.purchase('1000'), firm.purchase('2000')];
    await firm.post([one, two]);
    const entries = [mirrorOf(one[1] as EntryRecord), mirrorOf(two[1] as EntryRecord)];

    expect(await refusalOf(firm.post([reversalOf(one[0].id, entries)]))).toMatchObject({ code: 'TW012' });
  });

  it('happens once', async () => {
    const purchase = firm.purchase('1000');
    await firm.post([purchase, firm.purchase('1000')]);
    const again = () => reversalOf(purchase[0].id, [mirrorOf(purchase[1] as EntryRecord)]);
    await firm.post([again()]);

    expect(await refusalOf(firm.post([again()]))).toMatchObject({ code: '23505' });
  });

  it('cannot take out of a cylinder what has left it', async () => {
    const purchase = firm.purchase('1000');
    await firm.post([purchase]);
    await firm.post([
      firm.group({
        entries: [{ from: place('cylinder', firm.cylinderId), to: place('unit', firm.unitId), massMicrograms: '1' }],
      }),
    ]);

    expect(
      await refusalOf(firm.post([reversalOf(purchase[0].id, [mirrorOf(purchase[1] as EntryRecord)])])),
    ).toMatchObject({
      code: 'TW006',
    });
  });

  it('of what makes a book known lets it be unknown again', async () => {
    const factory = firm.group({
      kind: 'factoryCharge',
      unitId: firm.unitId,
      entries: [{ from: place('factory'), to: place('unit', firm.unitId), howKnown: 'factory' }],
    });
    const state = (known: boolean) => ({
      placeStates: [{ place: 'unit' as const, id: firm.unitId, known, state: {}, lastOccurredAt: null }],
    });
    await firm.post([factory], state(true));

    await firm.post([reversalOf(factory[0].id, [mirrorOf(factory[1] as EntryRecord)])], state(false));

    expect(await app.as(firm.scope, (query) => query('select known from place_state'))).toEqual([{ known: false }]);
  });
});

describe('An open weigh-in', () => {
  const opening = () => firm.group({ kind: 'extraCharge', unitId: firm.unitId, openWeighIn: true });
  const closing = (groupId: string, fields: GroupFields = {}) =>
    firm.group({ kind: 'extraCharge', unitId: firm.unitId, closesGroupId: groupId, ...fields });

  it('is closed once', async () => {
    const open = opening();
    await firm.post([open]);
    await firm.post([closing(open[0].id)]);

    expect(await refusalOf(firm.post([closing(open[0].id)]))).toMatchObject({ code: 'TW013', rule: 'weigh_in_open' });
  });

  it('may be closed again when what closed it was reversed', async () => {
    const open = opening();
    const wrong = closing(open[0].id);
    await firm.post([open]);
    await firm.post([wrong]);

    await firm.post([reversalOf(wrong[0].id, []), closing(open[0].id, { replacesGroupId: wrong[0].id })]);

    expect(await refusalOf(firm.post([closing(open[0].id)]))).toMatchObject({ code: 'TW013' });
  });

  it('is the only thing that can be closed', async () => {
    const purchase = firm.purchase();
    await firm.post([purchase]);

    expect(await refusalOf(firm.post([closing(purchase[0].id)]))).toMatchObject({ code: 'TW013' });
  });

  it('that was reversed cannot be closed', async () => {
    const open = opening();
    await firm.post([open]);
    await firm.post([reversalOf(open[0].id, [])]);

    expect(await refusalOf(firm.post([closing(open[0].id)]))).toMatchObject({ code: 'TW013' });
  });
});
