import { describe, expect, it } from 'vitest';
import { fillDangers } from './fill-dangers.ts';

const cylinder = {
  kind: 'refillable' as const,
  contentG: 5000,
  limitG: 9620,
  pressureRatingHolds: true,
  byRefrigerant: [{ refrigerant: 'R-410A', massG: 5000 }],
  used: true,
};

describe('Planning to put refrigerant into a cylinder', () => {
  it('is free up to its limit and stopped past it, with what it would hold and what it may', () => {
    expect(fillDangers(cylinder, 4620, 'R-410A')).toEqual([]);
    expect(fillDangers(cylinder, 4621, 'R-410A')).toEqual([{ is: 'overLimit', wouldHoldG: 9621, limitG: 9620 }]);
  });

  it('is stopped for a non-refillable one that has held something, not for its first filling', () => {
    const once = { ...cylinder, kind: 'nonRefillable' as const, limitG: null };
    expect(fillDangers(once, 100, 'R-410A')).toEqual([{ is: 'refill' }]);
    expect(fillDangers({ ...once, used: false, contentG: 0, byRefrigerant: [] }, 100, 'R-410A')).toEqual([]);
  });

  it('is stopped where the service pressure does not bear the refrigerant, not where it is not known', () => {
    expect(fillDangers({ ...cylinder, pressureRatingHolds: false }, 100, 'R-410A')).toEqual([{ is: 'pressure' }]);
    expect(fillDangers({ ...cylinder, pressureRatingHolds: null }, 100, 'R-410A')).toEqual([]);
  });

  it('is stopped where it would become a mixture', () => {
    expect(fillDangers(cylinder, 100, 'R-32')).toEqual([{ is: 'otherRefrigerant', holds: 'R-410A' }]);
  });
});
