import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { findSaturation } from './find-saturation.ts';
import { saturationFixtures } from './saturation.fixtures.ts';
import { type SaturationRequest, saturationRequest } from './saturation.schema.ts';

const find = (request: SaturationRequest) => requireValue(findSaturation(request, referenceData));

describe('Saturation of a refrigerant', () => {
  it.each(saturationFixtures)('$name ($source)', ({ request, result }) => {
    expect(findSaturation(saturationRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });

  it('keeps bubble and dew apart: R-407C glides by some 5 K at 1,500 kPa', () => {
    const { bubbleC, dewC } = find({ refrigerant: 'R-407C', pressureKPaAbs: 1500 }) as {
      bubbleC: number;
      dewC: number;
    };
    expect(dewC - bubbleC).toBeGreaterThan(4.5);
    expect(dewC - bubbleC).toBeLessThan(6);
  });

  it('boils at one atmosphere where the refrigerant table says', () => {
    for (const designation of ['R-134a', 'R-290', 'R-404A', 'R-600a', 'R-22']) {
      const { bubbleC } = find({ refrigerant: designation, pressureKPaAbs: 101.325 }) as { bubbleC: number };
      expect(bubbleC).toBeCloseTo(referenceData.findRefrigerant(designation)?.normalBoilingC ?? Number.NaN, 1);
    }
  });

  it('comes back from temperature over pressure to temperature', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...referenceData.refrigerantDesignations()),
        fc.double({ min: -40, max: 28, noNaN: true }),
        (refrigerant, tempC) => {
          const { bubbleKPaAbs } = find({ refrigerant, tempC }) as { bubbleKPaAbs: number };
          const { bubbleC } = find({ refrigerant, pressureKPaAbs: bubbleKPaAbs }) as { bubbleC: number };
          // Half a thousandth of a kPa is 0.01 K at the lowest pressures.
          expect(bubbleC).toBeCloseTo(tempC, 1);
        },
      ),
    );
  });

  it('says so where its own table is doubtful', () => {
    expect(find({ refrigerant: 'R-466A', tempC: 20 }).cautions).toMatchObject([{ code: 'saturationDoubtful' }]);
    expect(find({ refrigerant: 'R-32', tempC: 20 }).cautions).toEqual([]);
  });

  it('refuses both, neither, and what lies outside the table', () => {
    const refused = (request: SaturationRequest) => findSaturation(request, referenceData);
    expect(refused({ refrigerant: 'R-32' })).toMatchObject({ refusals: [{ code: 'exactlyOneOf', path: '' }] });
    expect(refused({ refrigerant: 'R-32', tempC: 0, pressureKPaAbs: 800 })).toMatchObject({
      refusals: [{ code: 'exactlyOneOf', path: '/tempC' }],
    });
    expect(refused({ refrigerant: 'R-744', tempC: 30.1 })).toMatchObject({
      refusals: [{ code: 'outOfRange', path: '/tempC', given: 30.1, allowed: [-50, 30] }],
    });
    const range = referenceData.findSaturationTable('R-455A');
    expect(refused({ refrigerant: 'R-455A', pressureKPaAbs: 1 })).toMatchObject({
      refusals: [{ path: '/pressureKPaAbs', allowed: [range?.bubbleKPaAbs[0], range?.dewKPaAbs.at(-1)] }],
    });
    expect(refused({ refrigerant: 'R-32 ', tempC: 0 })).toMatchObject({ refusals: [{ code: 'unknownRefrigerant' }] });
  });

  it('says that a table is not loaded, rather than that the refrigerant is unknown', () => {
    const oneTable = { ...referenceData, findSaturationTable: () => null };
    expect(findSaturation({ refrigerant: 'R-32', tempC: 0 }, oneTable)).toMatchObject({
      refusals: [{ code: 'noSaturationTable', path: '/refrigerant', given: 'R-32' }],
    });
  });
});
