import { describe, expect, it } from 'vitest';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { judgeCylinders } from './judge-cylinder-choice.ts';
import { idOf } from './weigh-in.fixture.ts';

const ME = idOf(90);
function cylinder(change: Partial<Cylinder> = {}): Cylinder {
  return {
    id: idOf(11),
    tag: '7741',
    kind: 'refillable',
    refrigerant: 'R-32',
    contentState: 'virgin',
    owner: { kind: 'ours' },
    tareG: 4680,
    tareTyped: { value: '4680', unit: 'g' },
    waterCapacityG: null,
    limitG: null,
    servicePressureKPaGauge: 4200,
    pressureRatingHolds: true,
    retestDue: '2031-01-01',
    heldBy: ME,
    heldByName: 'M. Oduya',
    batch: null,
    contentG: 3825,
    byRefrigerant: [{ refrigerant: 'R-32', massG: 3825 }],
    mixed: false,
    lastWeighedAt: '2026-11-30T10:00:00Z',
    lastReadingGrossG: 8505,
    openWeighInGroupId: null,
    version: 1,
    ...change,
  };
}
const judge = (...cylinders: Cylinder[]) =>
  judgeCylinders(cylinders, { refrigerant: 'R-32', wantedG: 90, myId: ME, today: '2026-11-30' });
const stopperOf = (change: Partial<Cylinder>) => judge(cylinder(change))[0]?.stopper;
const doubtsOf = (change: Partial<Cylinder>) => judge(cylinder(change))[0]?.doubts;

describe('Choosing a cylinder', () => {
  it('is stopped by another refrigerant, a mixture, a rating below the pressure at 55 °C and an open weigh-in', () => {
    expect(stopperOf({})).toBeNull();
    expect(stopperOf({ refrigerant: 'R-410A' })).toBe('otherRefrigerant');
    expect(stopperOf({ byRefrigerant: [{ refrigerant: 'R-410A', massG: 5 }] })).toBe('otherRefrigerant');
    expect(stopperOf({ mixed: true })).toBe('mixed');
    expect(stopperOf({ pressureRatingHolds: false })).toBe('pressureRating');
    expect(stopperOf({ openWeighInGroupId: idOf(5) })).toBe('openWeighIn');
    expect(stopperOf({ contentG: 0 })).toBe('empty');
  });
  it('goes on with a doubt where there is too little, a re-test due or no figure for the rating', () => {
    expect(doubtsOf({})).toEqual([]);
    expect(doubtsOf({ contentG: 60 })).toEqual(['tooLittle']);
    expect(doubtsOf({ retestDue: '2026-11-29', pressureRatingHolds: null })).toEqual(['retestDue', 'ratingNotKnown']);
    expect(doubtsOf({ retestDue: '2026-11-30' })).toEqual([]);
    expect(doubtsOf({ contentG: 0, lastWeighedAt: null })).toEqual(['neverWeighed']);
  });
  it('shows what fits first, the own van before others, and what is stopped last', () => {
    const order = judge(
      cylinder({ tag: 'other', heldBy: idOf(91) }),
      cylinder({ tag: 'stopped', refrigerant: 'R-410A' }),
      cylinder({ tag: 'little', contentG: 60 }),
      cylinder({ tag: 'mine' }),
    );
    expect(order.map((one) => one.cylinder.tag)).toEqual(['mine', 'little', 'other', 'stopped']);
  });
});
