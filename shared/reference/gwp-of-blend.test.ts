import { describe, expect, it } from 'vitest';
import type { GwpSet } from './gwp.ts';
import { gwpOfRefrigerant } from './gwp-of-blend.ts';
import { referenceData, requireValue } from './reference-data.fixture.ts';

const gwp = (designation: string, set: GwpSet) => requireValue(gwpOfRefrigerant(referenceData, designation, set));

describe('The GWP of a blend', () => {
  it('is the sum over its mass fractions, unrounded', () => {
    expect(gwp('R-410A', 'AR4').gwp).toBe(2087.5);
    expect(gwp('R-410A', 'AR5').gwp).toBe(1923.5);
    expect(gwp('R-404A', 'AR4').gwp).toBe(3921.6);
    expect(gwp('R-407C', 'EU-2024-573').gwp).toBe(1773.85);
    // Older printed figures with 4 for R-1234yf: R-449A 1397, R-513A 631.
    expect(gwp('R-449A', 'AR4').gwp).toBeCloseTo(1397, 0);
    expect(gwp('R-513A', 'AR4').gwp).toBeCloseTo(631.44, 6);
  });

  it('differs by set: R-454B is 466.3 in AR4, 466.8 in AR5, 465.1 US-AIM, 465.386 in 84.64, 465.231 in the EU', () => {
    expect(gwp('R-454B', 'AR4').gwp).toBeCloseTo(466.319, 9);
    expect(gwp('R-454B', 'AR5').gwp).toBeCloseTo(466.764, 9);
    expect(gwp('R-454B', 'US-AIM').gwp).toBeCloseTo(465.075, 9);
    expect(gwp('R-454B', 'US-84.64').gwp).toBeCloseTo(465.386, 9);
    expect(gwp('R-454B', 'EU-2024-573').gwp).toBeCloseTo(465.231, 3);
  });

  // Derived from Annex I, II and VI of Regulation (EU) 2024/573 and 40 CFR 84.64(b), (c).
  it.each([
    ['R-448A', 1385.996, 1386.07],
    ['R-449A', 1396.162, 1396.288],
    ['R-452A', 2139.4, 2139.55],
    ['R-452B', 697.38, 697.51],
    ['R-454C', 145.518, 145.91],
    ['R-455A', 145.533, 145.91],
    ['R-507A', 3985, 3985],
    ['R-513A', 629.481, 629.76],
  ])('of %s is %d under the EU regulation and %d under 84.64', (designation, eu, us) => {
    expect(gwp(designation, 'EU-2024-573').gwp).toBeCloseTo(eu, 2);
    expect(gwp(designation, 'US-84.64').gwp).toBeCloseTo(us, 2);
  });

  it('says which components the set leaves out, and that memory was used', () => {
    expect(gwp('R-438A', 'US-84.64').leftOut).toEqual(['R-600', 'R-601a']);
    expect(gwp('R-454B', 'US-AIM')).toMatchObject({ leftOut: ['R-1234yf'], status: 'yes' });
    expect(gwp('R-454B', 'AR4').status).toBe('memory');
    expect(gwp('R-454B', 'EU-2024-573').status).toBe('yes');
    expect(gwp('R-454B', 'US-84.64').status).toBe('yes');
    expect(gwp('R-454B', 'US-AIM').source).toBe(
      'US exchange values, 42 U.S.C. 7675(c) (HFC share only): R-32 68.9 % x 675; no value in this set: R-1234yf',
    );
  });
});

describe('A refrigerant that a set does not count', () => {
  it('is 0 under US-AIM when it is no HFC, and the source says so', () => {
    for (const designation of ['R-1234yf', 'R-290', 'R-744', 'R-1233zd(E)']) {
      expect(gwp(designation, 'US-AIM').gwp).toBe(0);
      expect(gwp(designation, 'US-AIM').source).toContain('none of it is a listed HFC');
    }
  });

  it.each(['US-AIM', 'US-84.64', 'EU-2024-573'] as const)(
    'is refused under %s when it depletes the ozone layer',
    (set) => {
      for (const designation of ['R-22', 'R-123']) {
        expect(gwpOfRefrigerant(referenceData, designation, set)).toMatchObject({
          ok: false,
          refusals: [{ code: 'gwpNotCovered', path: '/gwpSet', given: set, allowed: ['AR4', 'AR5', 'AR6'] }],
        });
      }
      expect(gwp('R-22', 'AR5').gwp).toBe(1760);
    },
  );

  it('is refused where a single substance has no value: R-1270 under 84.64', () => {
    expect(gwpOfRefrigerant(referenceData, 'R-1270', 'US-84.64')).toMatchObject({ ok: false });
  });

  it('is refused when its designation is not known', () => {
    expect(gwpOfRefrigerant(referenceData, 'R-999', 'AR4')).toMatchObject({
      refusals: [{ code: 'unknownRefrigerant', path: '/refrigerant', given: 'R-999' }],
    });
  });
});
