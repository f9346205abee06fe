import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { NOW, place, textOf } from './record-texts.ts';
import { type Connection, connect, createTestFirm, POST, refusalOf, type TestFirm } from './test-firm.ts';

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

describe('Every record', () => {
  it('names as its author the person who is asking', async () => {
    const colleague = uuid();
    const [group] = firm.purchase();

    expect(await refusalOf(firm.post([[{ ...group, entryIds: [], recordedBy: colleague }]]))).toMatchObject({
      code: 'TW003',
      detail: { recordedBy: colleague },
    });
  });

  it.each(['supplier', 'cylinder', 'unit', 'reclaimer', 'customer', 'otherContractor'] as const)(
    'moves refrigerant only to a %s that is registered',
    async (kind) => {
      const id = uuid();
      const stray = firm.group({ entries: [{ from: place('factory'), to: place(kind, id) }] });

      expect(await refusalOf(firm.post([stray]))).toMatchObject({ code: 'TW005', detail: { place: kind, id } });
    },
  );

  it('does not take a supplier for a reclaimer', async () => {
    const stray = firm.group({ entries: [{ from: place('factory'), to: place('reclaimer', firm.supplierId) }] });

    expect(await refusalOf(firm.post([stray]))).toMatchObject({ code: 'TW005' });
  });

  it.each([
    ['a mass of zero', { massMicrograms: '0' }, 'entry_mass_check'],
    ['a mass below zero', { massMicrograms: '-5' }, 'entry_mass_check'],
    ['the same place at both ends', { to: place('missing'), from: place('missing') }, 'entry_moves_check'],
    ['a cylinder without its id', { to: place('cylinder') }, 'entry_to_check'],
    ['an atmosphere without how', { to: place('atmosphere') }, 'entry_to_check'],
    ['an invented place', { to: { place: 'shed', id: null, as: null } }, undefined],
    ['no word on how the mass is known', { howKnown: null }, 'entry_how_known_check'],
  ])('is refused with %s', async (_what, wrong, rule) => {
    const [group, entry] = firm.group({
      entries: [{ from: place('supplier', firm.supplierId), to: place('missing') }],
    });

    const refusal = await refusalOf(firm.post([[group, { ...entry, ...wrong }]]));

    expect(refusal.code).toBe('23514');
    if (rule) expect(refusal.rule).toBe(rule);
  });

  it('is JSON of a known type', async () => {
    const call = (text: string) => refusalOf(app.as(firm.scope, (query) => query(POST, [[text], null])));

    expect((await call('not JSON')).code).toBe('22P02');
    expect((await call(textOf({ type: 'gossip', id: uuid(), recordedAt: NOW, recordedBy: firm.personId }))).rule).toBe(
      'journal_record_type_check',
    );
    expect((await refusalOf(app.as(firm.scope, (query) => query(POST, [[], null])))).code).toBe('TW002');
  });
});
