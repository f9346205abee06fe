import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { requireValue } from '../reference/reference-data.fixture.ts';
import { reconcileRequest } from './reconcile.schema.ts';
import { reconcile, verdictOf } from './reconcile.ts';
import { reconcileFixtures } from './scale.fixtures.ts';

describe('A cylinder against what was issued from it', () => {
  it.each(reconcileFixtures)('$name ($source)', ({ request, result }) => {
    expect(reconcile(reconcileRequest.parse(request))).toEqual({ ok: true, value: result });
  });

  it('is within the scales below 2 u, to be looked at again to and with 3 u, then not explained', () => {
    expect(verdictOf(1.999, 1)).toBe('withinScales');
    expect(verdictOf(2, 1)).toBe('lookAgain');
    expect(verdictOf(3, 1)).toBe('lookAgain');
    expect(verdictOf(3.001, 1)).toBe('notExplained');
    expect(verdictOf(0.1 + 0.2, 0.1)).toBe('lookAgain');
  });

  it('knows the sign: more left than was issued is above zero, a wrong way round below', () => {
    const asked = (endGrossG: number) =>
      requireValue(reconcile({ resolutionG: 5, startGrossG: 1000, endGrossG, issuedG: [100] }));
    expect(asked(850).differenceG).toBe(50);
    expect(asked(950).differenceG).toBe(-50);
    expect(asked(950).verdict).toBe('notExplained');
  });

  it('grows more uncertain with each issue that has its own readings: sqrt(2 + 2 n)', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 200 }), (issues) => {
        const issuedG = Array.from({ length: issues }, () => 10);
        const request = { resolutionG: 5, startGrossG: 5000, endGrossG: 5000 - 10 * issues, issuedG };
        const { standardUncertaintyG, differenceG } = requireValue(reconcile(request));
        expect(standardUncertaintyG).toBeCloseTo(Math.sqrt(2 + 2 * issues) * 1.44337567, 2);
        expect(differenceG).toBe(0);
      }),
    );
  });

  it('counts the span error once, on what left the cylinder: 0.1 % of 3,000 g', () => {
    const request = {
      resolutionG: 1,
      startGrossG: 20_000,
      endGrossG: 17_000,
      issuedG: [3000],
      spanErrorRelative: 0.001,
    };
    // sqrt(4 / 12 + 3^2 / 3)
    expect(requireValue(reconcile(request)).standardUncertaintyG).toBe(1.826);
  });
});
