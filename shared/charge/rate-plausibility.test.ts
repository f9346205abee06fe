import { describe, expect, it } from 'vitest';
import { referenceData } from '../reference/reference-data.fixture.ts';
import { charge, pipe } from './charge-request.fixture.ts';
import { findRefrigerantFacts } from './refrigerant-facts.ts';

const flat = (gPerM: number) => ({ kind: 'flat' as const, gPerM });
const judged = (refrigerant: string, odMm: number, gPerM: number) =>
  charge({ refrigerant, rate: flat(gPerM), precharge: null }, [pipe(10, odMm)]).ratePlausibility[0];

function contentGPerM(refrigerant: string, odMm: number): number {
  const { steps } = charge({ refrigerant }, [pipe(10, odMm)]);
  return steps.find(({ code }) => code === 'pipeContent')?.value ?? Number.NaN;
}
const density40 = (refrigerant: string) =>
  findRefrigerantFacts(referenceData, refrigerant)?.liquidDensityKgM3 ?? Number.NaN;

/** Computed values: tube geometry (EN 12735-1, ASTM B280) times saturated liquid density at 40 °C. */
describe('What a metre of pipe holds', () => {
  it('is area x density: R-32 in 6.35 x 0.8 mm 15.83 g/m, R-454B in 12.7 x 0.8 mm 88.72 g/m', () => {
    expect(contentGPerM('R-32', 6.35)).toBeCloseTo(15.83, 1);
    expect(contentGPerM('R-454B', 12.7)).toBeCloseTo(88.72, 2);
  });

  it('reproduces the column of R-410A in metric walls', () => {
    const column = [6.35, 9.52, 12.7, 15.88, 19.05, 22.22].map((odMm) => contentGPerM('R-410A', odMm));
    for (const [index, expected] of [17.3, 48.1, 94.4, 147.6, 222.8, 313.3].entries()) {
      expect(Math.abs((column[index] ?? 0) - expected)).toBeLessThanOrEqual(0.05 + 1e-9);
    }
  });

  it('rests on densities that give 47.82 g/m in 3/8 in ASTM B280 coil and the known ratios', () => {
    expect((density40('R-410A') * 49.009) / 1000).toBeCloseTo(47.82, 2);
    expect(density40('R-32') / density40('R-410A')).toBeCloseTo(0.9153, 4);
    expect(density40('R-454B') / density40('R-410A')).toBeCloseTo(0.9396, 4);
  });
});

describe('The plausible band', () => {
  it('passes every published rate that was compared (manuals for R-410A and R-32)', () => {
    const published: [string, number, readonly number[]][] = [
      ['R-410A', 6.35, [22, 20, 26, 25.1, 27.9, 15]],
      ['R-410A', 9.52, [57, 60, 56, 55.8, 30]],
      ['R-410A', 12.7, [110, 125, 128, 111.6, 60, 65]],
      ['R-410A', 15.88, [170, 185]],
      ['R-410A', 19.05, [260, 259]],
      ['R-410A', 22.22, [360, 366]],
      ['R-32', 6.35, [12]],
      ['R-32', 9.52, [24]],
      ['R-32', 12.7, [40]],
    ];
    for (const [refrigerant, odMm, rates] of published) {
      for (const gPerM of rates) {
        expect([refrigerant, odMm, gPerM, judged(refrigerant, odMm, gPerM)?.verdict]).toContain('plausible');
      }
    }
  });

  it('reads 6.3 to 26.9 g/m for R-32 in 6.35 mm pipe, bounds included', () => {
    expect(judged('R-32', 6.35, 20)).toEqual({ branch: 'A', lowGPerM: 6.3, highGPerM: 26.9, verdict: 'plausible' });
    expect(judged('R-32', 6.35, 6.3)?.verdict).toBe('plausible');
    expect(judged('R-32', 6.35, 26.9)?.verdict).toBe('plausible');
    expect(judged('R-32', 6.35, 6.2)?.verdict).toBe('tooLow');
    expect(judged('R-32', 6.35, 27)?.verdict).toBe('tooHigh');
  });

  it('catches oz/ft typed as g/m, g/m typed as oz/ft, and says the bounds', () => {
    expect(judged('R-410A', 9.52, 0.6)?.verdict).toBe('tooLow');
    const tooHigh = charge({ rate: flat(20 * 93.01) }, [pipe(12)]);
    expect(tooHigh.ratePlausibility[0]?.verdict).toBe('tooHigh');
    expect(tooHigh.warnings).toEqual([
      {
        code: 'rateTooHigh',
        params: { gPerM: 1860.2, lowGPerM: 6.3, highGPerM: 26.9, odMm: 6.35, refrigerant: 'R-32' },
      },
    ]);
  });

  it('judges every branch by its own pipe, and warns once for a size', () => {
    const result = charge({ rate: flat(20) }, [pipe(4), pipe(4, 12.7), pipe(5, 12.7)]);
    expect(result.ratePlausibility.map(({ branch, verdict }) => [branch, verdict])).toEqual([
      ['A', 'plausible'],
      ['B', 'tooLow'],
      ['C', 'tooLow'],
    ]);
    expect(result.warnings.map(({ code }) => code)).toEqual(['rateTooLow']);
  });

  it('takes each size of a table at its own rate', () => {
    const sizes = [
      { liquidOdMm: 6.35, gPerM: 12 },
      { liquidOdMm: 9.52, gPerM: 240 },
    ];
    const result = charge({ precharge: null, rate: { kind: 'byLiquidPipe', sizes } }, [pipe(4), pipe(4, 9.53)]);
    expect(result.ratePlausibility.map(({ verdict }) => verdict)).toEqual(['plausible', 'tooHigh']);
  });

  it('is the same for every place of the expansion device', () => {
    const of = (metering: 'indoor' | 'outdoor' | 'unknown') => charge({ metering }).ratePlausibility;
    expect(of('indoor')).toEqual(of('unknown'));
    expect(of('outdoor')).toEqual(of('unknown'));
  });

  it('is not given where there is no liquid at 40 °C (R-744) or no such tube, and that is said', () => {
    const co2 = charge({ refrigerant: 'R-744' });
    expect(co2.ratePlausibility).toEqual([]);
    expect(co2.warnings).toContainEqual({ code: 'plausibilityNotKnown', params: { refrigerant: 'R-744', tempC: 40 } });
    const odd = charge({}, [pipe(6), pipe(6, 7)]);
    expect(odd.ratePlausibility.map(({ branch }) => branch)).toEqual(['A']);
    expect(odd.warnings).toEqual([{ code: 'plausibilityNotKnownForSize', params: { odMm: 7 } }]);
    expect(charge({}, [pipe(9, 34.9)]).warnings.map(({ code }) => code)).toEqual(['plausibilityNotKnownForSize']);
  });

  it('says when the density that it rests on is of low confidence', () => {
    const codes = (refrigerant: string) => charge({ refrigerant }).warnings.map(({ code }) => code);
    expect(codes('R-466A')).toContain('plausibilityDoubtful');
    expect(codes('R-410A')).not.toContain('plausibilityDoubtful');
  });

  it('has no rate to judge in brackets, formulas and a fixed mass', () => {
    const precharge = null;
    const kinds = [
      { kind: 'stepped' as const, steps: [{ upToM: 50, extraG: 9000 }] },
      { kind: 'formula' as const, expression: 'L * 9000' },
      { kind: 'fixedMass' as const, extraG: 9000 },
    ];
    for (const rate of kinds) expect(charge({ precharge, rate }).ratePlausibility).toEqual([]);
  });
});
