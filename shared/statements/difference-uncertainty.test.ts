import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Issue, ScaleReading } from '../ledger/book-basis.ts';
import type { Scale } from '../ledger/scale.ts';
import { requireValue } from '../reference/reference-data.fixture.ts';
import { reconcile, verdictOf } from '../scale/reconcile.ts';
import { differenceUncertainty } from './difference-uncertainty.ts';

const FIVE: Scale = { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 };
let keys = 0;
const reading = (grossG: number, scale: Scale = FIVE, scaleKey = 'scale 1'): ScaleReading => {
  keys += 1;
  return { key: `reading ${keys}`, scaleKey, scale, grossG };
};
const here = (beforeG: number, afterG: number, scale?: Scale, scaleKey?: string): Issue => ({
  weighed: 'here',
  before: reading(beforeG, scale, scaleKey),
  after: reading(afterG, scale, scaleKey),
});

/** Source of the figures: GUM (JCGM 100) Type B worked by hand for d = 5 g, one reading u = 1.4434 g. */
describe('The uncertainty of a difference', () => {
  it('of eight issues with their own readings is sqrt(18) readings: 12 g are within, 20 g are not explained', () => {
    const issues = Array.from({ length: 8 }, (_, n) => here(20_000 - n * 100, 19_900 - n * 100));
    const found = differenceUncertainty({ start: reading(20_000), end: reading(19_188), contentG: 11_488, issues });
    expect(found).toEqual({
      standardG: expect.closeTo(6.1237, 3),
      independentReadings: 18,
      sharedReadings: 0,
      notWeighed: 0,
    });
    expect(verdictOf(12, found.standardG)).toBe('withinScales');
    expect(verdictOf(20, found.standardG)).toBe('notExplained');
  });

  it('leaves shared readings out: weighings that follow each other telescope to the first and the last', () => {
    const all = Array.from({ length: 9 }, (_, n) => reading(20_000 - n * 100));
    const issues = all.slice(1).map((after, n): Issue => ({ weighed: 'here', before: all[n] as ScaleReading, after }));
    const found = differenceUncertainty({ start: all[0] as ScaleReading, end: reading(19_195), contentG: 1, issues });
    // sqrt(2) x 1.4434
    expect(found).toMatchObject({ standardG: expect.closeTo(2.0412, 3), independentReadings: 2, sharedReadings: 8 });
  });

  it('agrees with the calculation of the same name for any number of independent issues on one scale', () => {
    const scale = fc.record({
      resolutionG: fc.constantFrom(0.5, 1, 5, 14.17),
      repeatabilityG: fc.constantFrom(0, 2),
      spanErrorRelative: fc.constantFrom(0, 0.001),
    });
    fc.assert(
      fc.property(scale, fc.array(fc.integer({ min: 1, max: 400 }), { maxLength: 20 }), (facts, issuedG) => {
        const whole = { ...facts, offsetG: 3 };
        const endGrossG = 20_000 - issuedG.reduce((sum, mass) => sum + mass, 0) - 7;
        const issues = issuedG.map((massG) => here(15_000, 15_000 - massG, whole));
        const own = differenceUncertainty({
          start: reading(20_000, whole),
          end: reading(endGrossG, whole),
          contentG: endGrossG - 7_700,
          issues,
        });
        const asked = requireValue(reconcile({ ...facts, startGrossG: 20_000, endGrossG, issuedG }));
        expect(own.standardG).toBeCloseTo(asked.standardUncertaintyG, 2);
      }),
    );
  });

  it('never judges two scales by their resolution alone: span and zero of both enter', () => {
    const rough: Scale = { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0.001, offsetG: 10 };
    const [start, end] = [reading(17_000, rough, 'scale 1'), reading(16_000, rough, 'scale 2')];
    // 2 x 25/12 + (17^2 + 16^2 + 10^2 + 10^2)/3
    const between = differenceUncertainty({ start, end, contentG: 8_300, issues: [] }).standardG;
    expect(between).toBeCloseTo(Math.sqrt(50 / 12 + 745 / 3), 6);
    const same = differenceUncertainty({ start, end: { ...end, scaleKey: 'scale 1' }, contentG: 8_300, issues: [] });
    // 2 x 25/12 + 1^2/3
    expect(same.standardG).toBeCloseTo(Math.sqrt(50 / 12 + 1 / 3), 6);
  });

  it('of a book that rests on a paper is that of one net mass, with zero and span of the scale', () => {
    const scale: Scale = { resolutionG: 5, repeatabilityG: 2, spanErrorRelative: 0.001, offsetG: 3 };
    // sqrt(2 (25/12 + 4) + 2.35^2/3 + 9/3): the net mass of 2,350 g with repeatability 2 g, and the zero.
    const found = differenceUncertainty({ start: null, end: reading(10_050, scale), contentG: 2_350, issues: [] });
    expect(found.standardG).toBeCloseTo(Math.sqrt(3.7427 ** 2 + 3), 3);
  });

  it('counts a pair of readings for a mass that was weighed elsewhere, and says what no scale vouches for', () => {
    const issues: Issue[] = [{ weighed: 'elsewhere', scale: FIVE, massG: 90 }, { weighed: 'no' }];
    const found = differenceUncertainty({ start: reading(17_000), end: reading(16_900), contentG: 1, issues });
    expect(found).toMatchObject({ standardG: expect.closeTo(2 * 1.4434, 3), independentReadings: 4, notWeighed: 1 });
  });
});
