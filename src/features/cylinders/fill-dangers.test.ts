import { describe, expect, it } from 'vitest';
import { fillDangers } from './fill-dangers.ts';

const cylinder = {
  kind: 'refillable' as const,
  refrigerant: 'R-410A',
  contentG: 5000,
  stampedLimitG: 9620,
  waterCapacityG: null,
  servicePressureKPaGauge: 4200,
  retestDue: null,
  byRefrigerant: [{ refrigerant: 'R-410A', massG: 5000 }],
  used: true,
};
const dangers = (over: Partial<typeof cylinder> | Record<string, unknown>, addedG: number, refrigerant = 'R-410A') =>
  fillDangers({ ...cylinder, ...over }, { addedG, refrigerant, day: '2026-11-30', jurisdiction: 'US' });

describe('Planning to put refrigerant into a cylinder', () => {
  it('is free up to its limit and stopped past it, with what it would hold and what it may', () => {
    expect(dangers({}, 4620)).toEqual([]);
    expect(dangers({}, 4621)).toEqual([{ is: 'overLimit', wouldHoldG: 9621, limitG: 9620 }]);
  });

  it('is stopped for a non-refillable one that has held something, not for its first filling', () => {
    const once = { kind: 'nonRefillable', stampedLimitG: null };
    expect(dangers(once, 100)).toEqual([{ is: 'refill' }]);
    expect(dangers({ ...once, used: false, contentG: 0, byRefrigerant: [] }, 100)).toEqual([]);
  });

  it('is stopped where the service pressure does not bear what goes in, not where it is not known', () => {
    const empty = { refrigerant: 'R-134a', contentG: 0, byRefrigerant: [], servicePressureKPaGauge: 1793 };
    expect(dangers(empty, 100)).toEqual([{ is: 'pressure', comes: 'R-410A' }]);
    expect(dangers(empty, 100, 'R-134a')).toEqual([]);
    expect(dangers({ ...empty, servicePressureKPaGauge: null }, 100)).toEqual([]);
  });

  it('is held to the limit of what is in it then: the lightest of it', () => {
    const held = { stampedLimitG: null, waterCapacityG: 21_636.356, contentG: 18_000 };
    expect(dangers({ ...held, byRefrigerant: [{ refrigerant: 'R-410A', massG: 18_000 }] }, 300)).toEqual([]);
    expect(dangers({ ...held, byRefrigerant: [{ refrigerant: 'R-410A', massG: 18_000 }] }, 10, 'R-32')).toMatchObject([
      { is: 'overLimit', limitG: 16_634.204 },
      { is: 'otherRefrigerant' },
    ]);
  });

  /** Source: 49 CFR 180.205(c): due by month and year. */
  it('is stopped after the month in which the re-test is due, not for what a new one comes with', () => {
    expect(dangers({ retestDue: '2026-11-01' }, 100)).toEqual([]);
    expect(dangers({ retestDue: '2026-10-31' }, 100)).toEqual([{ is: 'retest', due: '2026-10-31' }]);
    expect(dangers({ retestDue: '2026-10-31', used: false }, 100)).toEqual([]);
  });

  it('is stopped where it would become a mixture', () => {
    expect(dangers({}, 100, 'R-32')).toEqual([{ is: 'otherRefrigerant', holds: 'R-410A' }]);
  });
});
