import { describe, expect, it } from 'vitest';
import { replayCylinder } from './judge-cylinder.ts';
import { replayUnit } from './judge-unit.ts';
import {
  cylinderRegister,
  filledWith,
  group,
  moved,
  openedAt,
  read,
  says,
  unitRegister,
} from './judged-group-builder.ts';
import { cylinderFromSnapshot, isInOrder, toSnapshot, unitFromSnapshot } from './snapshot.ts';

const stored = (value: unknown) => JSON.parse(JSON.stringify(value));

describe('a snapshot', () => {
  it('comes back from JSON as the state that it was taken of', () => {
    const lost = group('a', 2, { masses: [moved('C1 -> U', 300)], statements: [says('U', 'notFull')] });
    const unit = replayUnit(unitRegister('U', 1_290), [openedAt('U', 1_290), lost]).state;
    expect(unit.losses).toHaveLength(1);
    expect(unitFromSnapshot(stored(toSnapshot(unit)))).toEqual(unit);
    const gone = group('b', 2, { readings: [read('C1', 'only', 9_000)], masses: [moved('C1 -> missing', 9_000)] });
    const cylinder = replayCylinder(cylinderRegister('C1'), [filledWith('C1', 9_500), gone]).state;
    expect(cylinder.missingMicrograms).toBeGreaterThan(0n);
    expect(cylinderFromSnapshot(stored(toSnapshot(cylinder)))).toEqual(cylinder);
  });
  it('of another version of the rules is not used', () => {
    const snapshot = toSnapshot(replayUnit(unitRegister('U', 1_290), [openedAt('U', 1_290)]).state);
    expect(unitFromSnapshot({ ...snapshot, version: snapshot.version + 1 })).toBeNull();
  });
});

it('a group is in order behind the last one of the place, by time, then by sequence', () => {
  const state = { lastPosition: { occurredAt: 100, sequence: 7 } };
  expect(isInOrder(state, { occurredAt: 101, sequence: 1 })).toBe(true);
  expect(isInOrder(state, { occurredAt: 100, sequence: 8n })).toBe(true);
  expect(isInOrder(state, { occurredAt: 100, sequence: 6 })).toBe(false);
  expect(isInOrder(state, { occurredAt: 99, sequence: 9 })).toBe(false);
  expect(isInOrder({ lastPosition: null }, { occurredAt: 0, sequence: 0 })).toBe(true);
});
