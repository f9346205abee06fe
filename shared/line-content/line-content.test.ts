import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { lineContentFixtures } from './line-content.fixtures.ts';
import { lineContentRequest } from './line-content.schema.ts';
import { lineContent } from './line-content.ts';

const contentOf = (refrigerant: string, phase: 'liquid' | 'vapour', tempC: number, odMm: number, wallMm: number) =>
  requireValue(lineContent({ refrigerant, phase, tempC, odMm, wallMm, lengthM: 1 }, referenceData)).gPerM;

describe('What a full line holds', () => {
  it.each(lineContentFixtures)('$name ($source)', ({ request, result }) => {
    expect(lineContent(lineContentRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });

  // Table of line contents in g/m, metric walls of 0.8 mm to 1/2 in and 1.0 mm above; computed with the same tables.
  it.each([
    ['R-410A', 'liquid', 25, [18.8, 52.2, 102.5, 160.2, 241.8]],
    ['R-410A', 'liquid', 40, [17.3, 48.1, 94.4, 147.6, 222.8]],
    ['R-410A', 'vapour', 8, [0.7, 1.94, 3.81, 5.96, 8.99]],
    ['R-32', 'liquid', 25, [17.0, 47.3, 93.0, 145.4, 219.4]],
    ['R-32', 'liquid', 40, [15.8, 44.0, 86.4, 135.1, 203.9]],
    ['R-454B', 'liquid', 40, [16.2, 45.2, 88.7, 138.7, 209.3]],
    ['R-452B', 'vapour', 8, [0.56, 1.55, 3.05, 4.78, 7.21]],
    ['R-22', 'liquid', 25, [21.1, 58.7, 115.2, 180.2, 271.8]],
  ] as const)('%s %s at %d °C in the five usual metric sizes', (refrigerant, phase, tempC, printed) => {
    const sizes = [
      [6.35, 0.8],
      [9.52, 0.8],
      [12.7, 0.8],
      [15.88, 1],
      [19.05, 1],
    ] as const;
    sizes.forEach(([odMm, wallMm], index) => {
      const halfOfLastDigit = phase === 'vapour' ? 0.00501 : 0.0501;
      const gPerM = contentOf(refrigerant, phase, tempC, odMm, wallMm);
      expect(Math.abs(gPerM - (printed[index] as number))).toBeLessThan(halfOfLastDigit);
    });
  });

  it('is a twenty-fifth as much vapour as liquid, and less R-32 than R-410A', () => {
    expect(contentOf('R-32', 'liquid', 40, 9.52, 0.8) / contentOf('R-410A', 'liquid', 40, 9.52, 0.8)).toBeCloseTo(
      0.9153,
      3,
    );
    expect(contentOf('R-454B', 'liquid', 40, 9.52, 0.8) / contentOf('R-410A', 'liquid', 40, 9.52, 0.8)).toBeCloseTo(
      0.9396,
      3,
    );
    expect(contentOf('R-410A', 'vapour', 8, 9.52, 0.8) / contentOf('R-410A', 'liquid', 40, 9.52, 0.8)).toBeCloseTo(
      1 / 25,
      2,
    );
  });

  it('grows with the length and the bore, and shrinks as the liquid warms', () => {
    const temp = fc.double({ min: -40, max: 60, noNaN: true });
    fc.assert(
      fc.property(temp, fc.double({ min: 4, max: 40, noNaN: true }), (tempC, odMm) => {
        const here = contentOf('R-32', 'liquid', tempC, odMm, 0.8);
        expect(contentOf('R-32', 'liquid', tempC + 1, odMm, 0.8)).toBeLessThan(here);
        expect(contentOf('R-32', 'liquid', tempC, odMm + 0.1, 0.8)).toBeGreaterThan(here);
      }),
    );
  });

  it('refuses a wall that leaves no bore, and a temperature outside the table', () => {
    const pipe = { refrigerant: 'R-32', phase: 'liquid', tempC: 40, odMm: 6.35, wallMm: 3.175, lengthM: 1 } as const;
    expect(lineContent(pipe, referenceData)).toMatchObject({
      refusals: [{ code: 'notBelow', path: '/wallMm', given: 3.175, allowed: 3.175 }],
    });
    expect(lineContent({ ...pipe, wallMm: 0.8, tempC: 66 }, referenceData)).toMatchObject({
      refusals: [{ code: 'outOfRange', path: '/tempC', given: 66, allowed: [-50, 65] }],
    });
  });
});
