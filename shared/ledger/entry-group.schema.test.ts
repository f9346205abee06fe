import { describe, expect, it } from 'vitest';
import { refusalsOfIssues } from '../problems/refusals-of-issues.ts';
import { answerRequest, entryGroupRequest, reversalRequest } from './entry-group.schema.ts';

const id = (number: number): string => `0198a0d0-0000-7000-8000-${String(number).padStart(12, '0')}`;
const [GROUP, C1, U, SCALE] = [id(1), id(2), id(3), id(4)];
const extra = { place: 'cylinder', id: C1 };
const entry = {
  id: id(10),
  refrigerant: 'R-32',
  mass: { value: '90', unit: 'g' },
  from: extra,
  to: { place: 'unit', id: U },
  howKnown: 'weighed',
};
const before = {
  id: id(20),
  cylinderId: C1,
  toolId: SCALE,
  moment: 'before',
  mode: 'gross',
  value: '17105',
  unit: 'g',
};
const after = { ...before, id: id(21), moment: 'after', value: '17015' };

/** The example of the API contract. */
const weighIn = {
  groupId: GROUP,
  schema: 1,
  kind: 'extraCharge',
  unitId: U,
  jobId: null,
  chargeSheetId: null,
  supervisedBy: null,
  occurredAt: '2026-11-30T16:12:00-05:00',
  deviceSentAt: '2026-11-30T16:13:00-05:00',
  openWeighIn: false,
  closesGroupId: null,
  readings: [{ ...before, at: null, hoseFull: true, hose: { value: '28', unit: 'g' } }, after],
  entries: [
    entry,
    {
      ...entry,
      id: id(11),
      mass: { value: '28', unit: 'g' },
      to: { place: 'atmosphere', as: 'hose' },
      howKnown: 'estimated',
    },
  ],
  statements: [{ about: 'unit', id: U, is: 'full', by: null }],
  documents: [
    { kind: 'invoice', number: '20871', date: '2026-11-28', refrigerant: 'R-32', mass: { value: '11.34', unit: 'kg' } },
  ],
  reason: null,
  note: null,
};
const bare = { groupId: GROUP, schema: 1, kind: 'weighing', occurredAt: '2026-11-30T16:12:00Z' };
const only = { ...before, moment: 'only' };

/** What is refused, as `code path`. */
function refused(body: unknown, schema: typeof entryGroupRequest | typeof answerRequest = entryGroupRequest): string[] {
  const parsed = schema.safeParse(body);
  return parsed.success ? [] : refusalsOfIssues(parsed.error.issues, body).map(({ code, path }) => `${code} ${path}`);
}

describe('a group of entries', () => {
  it('is taken as the contract shows it, and with everything optional absent', () => {
    expect(refused(weighIn)).toEqual([]);
    expect(refused({ ...bare, readings: [only] })).toEqual([]);
  });
  it('may be a document alone, but not nothing at all', () => {
    expect(refused({ ...bare, documents: weighIn.documents })).toEqual([]);
    expect(refused(bare)).toEqual(['groupEmpty ']);
  });
  it('has ids of version 7 where the client makes them', () => {
    const version4 = 'f47ac10b-58cc-4372-a567-0e02b2c3d479';
    expect(refused({ ...weighIn, groupId: version4 })).toEqual(['notId /groupId']);
    expect(refused({ ...weighIn, entries: [{ ...entry, id: version4 }] })).toEqual(['notId /entries/0/id']);
    expect(refused({ ...weighIn, unitId: version4, entries: [] })).toEqual([]);
  });
  it('refuses names it does not know, kinds outside the list and another schema', () => {
    expect(refused({ ...weighIn, kinds: 1 })).toEqual(['unknownKey /kinds']);
    expect(refused({ ...weighIn, kind: 'topUp' })).toEqual(['notAllowedValue /kind']);
    expect(refused({ ...weighIn, schema: 2 })).toEqual(['notAllowedValue /schema']);
  });
  it.each([
    ['0', 'massNotPositive /entries/0/mass/value'],
    ['0.000', 'massNotPositive /entries/0/mass/value'],
    ['-90', 'wrongFormat /entries/0/mass/value'],
    ['9e1', 'wrongFormat /entries/0/mass/value'],
    ['1,250', 'wrongFormat /entries/0/mass/value'],
    ['', 'wrongFormat /entries/0/mass/value'],
    [90, 'wrongType /entries/0/mass/value'],
  ])('refuses the mass %j', (value, refusal) => {
    expect(refused({ ...weighIn, entries: [{ ...entry, mass: { value, unit: 'g' } }] })).toContain(refusal);
  });
  it('refuses more than 4,000 t, in an entry and in a reading, and throws at nothing', () => {
    const tons = { value: '999999999999', unit: 'kg' };
    expect(refused({ ...weighIn, entries: [{ ...entry, mass: tons }] })).toHaveLength(1);
    expect(refused({ ...bare, readings: [{ ...only, ...tons }] })).toEqual(['massTooLarge /readings/0/value']);
    for (const broken of [
      null,
      [],
      'x',
      { ...weighIn, entries: [{}] },
      { ...weighIn, readings: [{ mode: 'gross' }] },
    ]) {
      expect(refused(broken).length).toBeGreaterThan(0);
    }
  });
  it.each([
    [{ place: 'unit' }, 'placeIdRequired /entries/0/to/id'],
    [{ place: 'missing', id: U }, 'placeIdNotAllowed /entries/0/to/id'],
    [{ place: 'atmosphere' }, 'placeAsRequired /entries/0/to/as'],
    [{ place: 'unit', id: U, as: 'hose' }, 'placeAsNotAllowed /entries/0/to/as'],
    [{ place: 'cylinder', id: C1 }, 'entryToItself /entries/0/to'],
    [{ place: 'cylinderDifference' }, 'placeOnlyByServer /entries/0/to/place'],
  ])('refuses the place %j', (to, refusal) => {
    expect(refused({ ...weighIn, entries: [{ ...entry, to }] })).toEqual([refusal]);
  });
  it('takes a place whose other fields are null', () => {
    const to = { place: 'atmosphere', id: null, as: 'measured' };
    expect(refused({ ...weighIn, entries: [{ ...entry, to }] })).toEqual([]);
  });
  it('leaves the refrigerant open only out of a cylinder', () => {
    expect(refused({ ...weighIn, entries: [{ ...entry, refrigerant: null }] })).toEqual([]);
    const fromUnit = { ...entry, refrigerant: null, from: entry.to, to: entry.from };
    expect(refused({ ...weighIn, entries: [fromUnit] })).toEqual(['refrigerantRequired /entries/0/refrigerant']);
  });
  it('names what stands twice: an id, a reading of one cylinder at one moment, an answer for one unit', () => {
    expect(refused({ ...weighIn, entries: [entry, entry] })).toEqual(['repeated /entries/1/id']);
    const readings = [before, { ...before, id: id(22) }];
    expect(refused({ ...weighIn, readings })).toEqual(['repeated /readings/1/moment']);
    const statements = [weighIn.statements[0], { ...weighIn.statements[0], is: 'notFull' }];
    expect(refused({ ...weighIn, statements })).toEqual(['repeated /statements/1/id']);
  });
  it('knows by what only of an empty unit, and a gross reading not below zero', () => {
    const statements = [{ about: 'unit', id: U, is: 'full', by: 'vacuum' }];
    expect(refused({ ...weighIn, statements })).toEqual(['statementByNotAllowed /statements/0/by']);
    expect(refused({ ...bare, readings: [{ ...only, value: '-5' }] })).toEqual([
      'grossReadingNegative /readings/0/value',
    ]);
    expect(refused({ ...bare, readings: [{ ...only, mode: 'zeroed', value: '-5' }] })).toEqual([]);
    expect(refused({ ...bare, readings: [{ ...only, hoseFull: true }] })).toEqual([
      'hoseContentRequired /readings/0/hose',
    ]);
  });
  it('opens a weigh-in with one start reading and its unit, and closes it with an end reading', () => {
    const open = { ...bare, kind: 'extraCharge', openWeighIn: true, unitId: U, readings: [before] };
    expect(refused(open)).toEqual([]);
    expect(refused({ ...open, unitId: null })).toEqual(['openWeighInForm /openWeighIn']);
    expect(refused({ ...open, entries: [entry] })).toEqual(['openWeighInForm /openWeighIn']);
    expect(refused({ ...open, readings: [only] })).toEqual(['openWeighInForm /openWeighIn']);
    expect(refused({ ...weighIn, closesGroupId: id(5) })).toEqual([]);
    expect(refused({ ...weighIn, closesGroupId: id(5), readings: [] })).toEqual(['closingReadingRequired /readings']);
  });
  it('holds at most 50 readings and 100 entries', () => {
    const readings = Array.from({ length: 51 }, (_, index) => ({
      ...only,
      id: id(100 + index),
      cylinderId: id(200 + index),
    }));
    expect(refused({ ...bare, readings: readings.slice(1) })).toEqual([]);
    expect(refused({ ...bare, readings })).toEqual(['tooMany /readings']);
    const entries = Array.from({ length: 101 }, (_, index) => ({ ...entry, id: id(300 + index) }));
    expect(refused({ ...weighIn, entries })).toEqual(['tooMany /entries']);
  });
  it('refuses text that cannot be stored', () => {
    expect(refused({ ...weighIn, note: 'a\u0000b' })).toEqual(['textNotStorable /note']);
    expect(refused({ ...weighIn, reason: '\ud800' })).toEqual(['textNotStorable /reason']);
    expect(refused({ ...weighIn, note: 'señal débil, 5 °C 🙂' })).toEqual([]);
  });
});

it('a reversal needs its reason and may bring the right group with it', () => {
  const reversal = { groupId: id(6), schema: 1, deviceSentAt: null, reason: 'wrong cylinder', replacement: weighIn };
  expect(reversalRequest.safeParse(reversal).success).toBe(true);
  expect(reversalRequest.safeParse({ ...reversal, replacement: undefined }).success).toBe(true);
  expect(reversalRequest.safeParse({ ...reversal, reason: '' }).success).toBe(false);
  expect(reversalRequest.safeParse({ ...reversal, replacement: bare }).success).toBe(false);
});

it('a later answer is one statement', () => {
  const answer = { groupId: id(7), schema: 1, statement: { about: 'unit', id: U, is: 'notFull' } };
  expect(refused(answer, answerRequest)).toEqual([]);
  expect(refused({ ...answer, statement: { ...answer.statement, is: 'maybe' } }, answerRequest)).toEqual([
    'notAllowedValue /statement/is',
  ]);
});
