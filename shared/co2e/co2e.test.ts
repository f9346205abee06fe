import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { GWP_SETS, type GwpSet } from '../reference/gwp.ts';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { co2eFixtures } from './co2e.fixtures.ts';
import { co2eRequest } from './co2e.schema.ts';
import { co2e } from './co2e.ts';

const tonnes = (refrigerant: string, massG: number, gwpSet: GwpSet) =>
  requireValue(co2e({ refrigerant, massG, gwpSet }, referenceData)).co2eT;

describe('The CO2 equivalent of a mass', () => {
  it.each(co2eFixtures)('$name ($source)', ({ request, result }) => {
    expect(co2e(co2eRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });

  it('differs by set: 2.35 kg R-410A is 4.5202 t by AR5', () => {
    expect(tonnes('R-410A', 2350, 'AR5')).toBeCloseTo(4.5202, 4);
    expect(tonnes('R-404A', 12_000, 'AR4')).toBeCloseTo(47.059, 3);
    expect(tonnes('R-404A', 1800, 'AR4')).toBeCloseTo(7.059, 3);
  });

  // Regulation (EU) 2024/573 Article 5: kg at 5 t CO2e, to four decimals or three.
  it.each([
    ['R-32', 7407.4],
    ['R-134a', 3496.5],
    ['R-404A', 1275.0],
    ['R-407C', 2818.7],
    ['R-410A', 2395.2],
    ['R-454B', 10_747.4],
    ['R-449A', 3581.2],
    ['R-513A', 7943.1],
  ])('of %s reaches 5 t at %d g', (refrigerant, massG) => {
    expect(tonnes(refrigerant, massG, 'EU-2024-573')).toBeCloseTo(5, 3);
  });

  it('is never taken from a rounded column: 100 kg R-454B by 84.64 is 46.5386 t, not 46.54', () => {
    expect(tonnes('R-454B', 100_000, 'US-84.64')).toBe(46.5386);
  });

  it('says when a value is from memory, and when a set does not count a substance', () => {
    const source = (refrigerant: string, gwpSet: GwpSet) =>
      requireValue(co2e({ refrigerant, massG: 1, gwpSet }, referenceData)).source;
    expect(source('R-454B', 'AR4')).toContain('from memory');
    expect(source('R-290', 'US-AIM')).toContain('none of it is a listed HFC');
    expect(tonnes('R-290', 1000, 'US-AIM')).toBe(0);
    expect(co2e({ refrigerant: 'R-22', massG: 1, gwpSet: 'US-AIM' }, referenceData)).toMatchObject({
      refusals: [{ code: 'gwpNotCovered', path: '/gwpSet' }],
    });
  });

  it('doubles with the mass', () => {
    fc.assert(
      fc.property(fc.constantFrom(...GWP_SETS), fc.integer({ min: 0, max: 1_000_000 }), (set, massG) => {
        expect(tonnes('R-449A', 2 * massG, set)).toBeCloseTo(2 * tonnes('R-449A', massG, set), 4);
      }),
    );
  });
});
