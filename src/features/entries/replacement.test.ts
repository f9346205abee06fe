import { describe, expect, it } from 'vitest';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { newId } from '../../lib/new-id.ts';
import { cylinder, entryRow, groupView, idOf, nowhere } from './entry-row.fixture.ts';
import { massOfReadings, replacementRequest, type SimpleGroup, simpleGroup } from './replacement.ts';

describe('A group that can be put right at once', () => {
  it('is one mass to or from one cylinder', () => {
    expect(simpleGroup(groupView())).toMatchObject({
      cylinderId: idOf('cylinder', '7741'),
      gives: true,
      weighed: true,
    });
  });

  it.each([
    [
      'two masses',
      { entries: [entryRow({ sequence: 82 }), entryRow({ sequence: 83, to: nowhere('atmosphere', 'hose') })] },
    ],
    ['a transfer between cylinders', { entries: [entryRow({ sequence: 82, to: cylinder('R-09') })] }],
    ['a weigh-in that closes another', { closesGroupId: 'opening' }],
    ['nothing that a person entered', { entries: [entryRow({ sequence: 82, addedByServer: true })] }],
  ])('is not %s', (_, change) => {
    expect(simpleGroup(groupView(change))).toBeNull();
  });
});

describe('The mass of two readings', () => {
  const read = (before: string, after: string, unit: 'g' | 'oz' = 'g') => [
    { moment: 'before', typed: { value: before, unit } },
    { moment: 'after', typed: { value: after, unit } },
  ];

  it('is exact in their own unit', () => {
    expect(massOfReadings({ gives: true }, read('620.3', '617.1', 'oz'), null)).toEqual({
      value: '3.2',
      unit: 'oz',
      sign: 1,
    });
  });

  it('counts what a full hose held at the start', () => {
    expect(massOfReadings({ gives: true }, read('17330', '17212'), { value: '28', unit: 'g' })).toMatchObject({
      value: '146',
      sign: 1,
    });
  });

  it('is what came in where the cylinder takes it, and below zero the wrong way round', () => {
    expect(massOfReadings({ gives: false }, read('6120', '8430'), null)).toMatchObject({ value: '2310', sign: 1 });
    expect(massOfReadings({ gives: true }, read('6120', '8430'), null)).toMatchObject({ value: '2310', sign: -1 });
  });
});

describe('The right group', () => {
  const view = groupView({
    unitId: newId(),
    documents: [
      {
        kind: 'invoice',
        number: '20871',
        date: '2026-11-28',
        refrigerant: 'R-32',
        massG: 90,
        typed: { value: '90', unit: 'g' },
      },
      { kind: 'other', number: 'note 4', date: '2026-11-28', refrigerant: null, massG: null, typed: null },
    ],
    note: 'Line set 12.0 m',
  });
  const wrongId = newId();
  const rightId = newId();
  const withIds = {
    ...view,
    entries: view.entries.map((entry) => ({
      ...entry,
      from: { ...entry.from, id: wrongId },
      to: { ...entry.to, id: newId() },
    })),
    readings: view.readings.map((reading) => ({ ...reading, cylinderId: wrongId })),
  };
  const toolId = newId();
  const request = replacementRequest(
    withIds,
    simpleGroup(withIds) as SimpleGroup,
    {
      groupId: newId(),
      entryId: newId(),
      readingIds: [newId(), newId()],
      cylinderId: rightId,
      mass: { value: '110', unit: 'g' },
      readings: [
        { value: '17420', unit: 'g' },
        { value: '17310', unit: 'g' },
      ],
      reason: '',
    },
    { toolIdOf: () => toolId, supervisedBy: null },
  );

  it('is a request that the shared schema takes', () => {
    expect(entryGroupRequest.safeParse(request).error).toBeUndefined();
  });

  it('keeps what was right: time, unit, scale, note and the papers that carried another mass', () => {
    expect(request).toMatchObject({ occurredAt: view.occurredAt, unitId: view.unitId, note: view.note });
    expect(request.readings?.map((reading) => reading.toolId)).toEqual([toolId, toolId]);
    expect(request.documents?.[1]).toMatchObject({ number: 'note 4', mass: null });
  });

  it('puts the right cylinder everywhere and the right mass on the invoice', () => {
    expect(JSON.stringify(request)).not.toContain(wrongId);
    expect(request.entries?.[0]).toMatchObject({ from: { id: rightId }, mass: { value: '110', unit: 'g' } });
    expect(request.documents?.[0]).toMatchObject({ mass: { value: '110', unit: 'g' } });
  });
});
