import { describe, expect, it } from 'vitest';
import { FIVE_GRAM_SCALE, g } from './judged-group-builder.ts';
import { grossVarianceG2, isBeyond, netVarianceG2 } from './scale.ts';

/** Reference, section (j): computed by JCGM 100, Type B (memory, the text was not re-read). */
describe('the uncertainty of a scale', () => {
  const twice = (varianceG2: number) => 2 * Math.sqrt(varianceG2);
  it('is 4.082 g for one net mass with d = 5 g', () => {
    expect(twice(netVarianceG2(FIVE_GRAM_SCALE, g(90)))).toBeCloseTo(4.082, 3);
  });
  it('is 6.976 g with a repeatability of 2 g, and u = 3.7427 g with 0.1 % of span on 2,350 g', () => {
    const repeatable = { ...FIVE_GRAM_SCALE, repeatabilityG: 2 };
    expect(twice(netVarianceG2(repeatable, g(2_350)))).toBeCloseTo(6.976, 3);
    const spanned = { ...repeatable, spanErrorRelative: 0.001 };
    expect(Math.sqrt(netVarianceG2(spanned, g(2_350)))).toBeCloseTo(3.7427, 4);
  });
  it('is 11.57 g for one net mass with d = 0.5 oz', () => {
    expect(twice(netVarianceG2({ ...FIVE_GRAM_SCALE, resolutionG: 14.1747615625 }, 0n))).toBeCloseTo(11.57, 2);
  });
  it('grows by the offset, taken as rectangular, for a gross reading only', () => {
    const shifted = { ...FIVE_GRAM_SCALE, offsetG: 3 };
    expect(grossVarianceG2(shifted, 0n) - netVarianceG2(shifted, 0n)).toBeCloseTo(3, 12);
  });
  it.each([
    [5, 6, 10],
    [1, 6, 2],
    [5, 54, 30],
  ])(
    'with d = %s g of %s weighed masses is %s g exactly: that much is within, a microgram more beyond',
    (d, n, limitG) => {
      const variance = netVarianceG2({ ...FIVE_GRAM_SCALE, resolutionG: d }, g(90));
      const sum = Array.from({ length: n }, () => variance).reduce((a, b) => a + b, 0);
      expect(isBeyond(g(limitG), sum)).toBe(false);
      expect(isBeyond(g(-limitG), sum)).toBe(false);
      expect(isBeyond(g(limitG) + 1n, sum)).toBe(true);
    },
  );
  it('leaves nothing within where nothing was weighed', () => {
    expect(isBeyond(0n, 0)).toBe(false);
    expect(isBeyond(1n, 0)).toBe(true);
  });
});
