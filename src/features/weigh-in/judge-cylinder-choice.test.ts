import { describe, expect, it } from 'vitest';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { judgeCylinders, mayTakeHose } from './judge-cylinder-choice.ts';
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
    stampedLimitG: null,
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
const unit = { refrigerant: 'R-32', wantedG: 90, myId: ME, today: '2026-11-30', jurisdiction: 'US' as const };
const judge = (...cylinders: Cylinder[]) => judgeCylinders(cylinders, unit);
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
    expect(doubtsOf({ retestDue: '2026-10-31', pressureRatingHolds: null })).toEqual(['retestDue', 'ratingNotKnown']);
    // Due by month and year (49 CFR 180.205(c)): all of November is in time.
    expect(doubtsOf({ retestDue: '2026-11-01' })).toEqual([]);
    expect(doubtsOf({ contentG: 0, lastWeighedAt: null })).toEqual(['neverWeighed']);
  });
  /** Source: Regulation (EU) 2024/573, Article 8(6), case F22; 40 CFR 82.154(d), 82.156(h). */
  it('is stopped in the EU by recovered refrigerant that nobody has cleaned, and in the US a doubt of whose it is', () => {
    const recovered = cylinder({ contentState: 'recovered' });
    const at = (jurisdiction: 'US' | 'EU' | null, one = recovered) =>
      judgeCylinders([one], { ...unit, refrigerant: one.refrigerant, jurisdiction }).map(({ stopper, doubts }) => [
        stopper,
        ...doubts,
      ])[0];
    expect(at('EU')).toEqual(['notReclaimed']);
    expect(at('US')).toEqual([null, 'sameOwner']);
    expect(at(null)).toEqual([null, 'notCleaned']);
    expect(at('EU', cylinder({ contentState: 'recycled' }))).toEqual([null]);
    const byRefrigerant = [{ refrigerant: 'R-290', massG: 3825 }];
    const propane = cylinder({ contentState: 'recovered', refrigerant: 'R-290', byRefrigerant });
    expect([at('EU', propane), at('US', propane)]).toEqual([
      [null, 'notCleaned'],
      [null, 'notCleaned'],
    ]);
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

describe('A recovery cylinder for what is left in the hose', () => {
  const takes = (change: Partial<Cylinder>) =>
    mayTakeHose(cylinder({ kind: 'recovery', ...change }), 'R-32', '2026-11-30');

  it('holds nothing else, bears it and is not past its re-test', () => {
    expect(takes({})).toBe(true);
    expect(takes({ kind: 'refillable' })).toBe(false);
    expect(takes({ refrigerant: 'R-410A' })).toBe(false);
    expect(takes({ byRefrigerant: [{ refrigerant: 'R-22', massG: 100 }] })).toBe(false);
    expect(takes({ pressureRatingHolds: false })).toBe(false);
    expect([takes({ retestDue: '2026-11-01' }), takes({ retestDue: '2026-10-31' })]).toEqual([true, false]);
  });
});
