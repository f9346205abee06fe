import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { fromBase, toBase } from '../units/quantities.ts';
import { cylinderFillFixtures } from './cylinder-fill.fixtures.ts';
import { type CylinderFillRequest, cylinderFillRequest } from './cylinder-fill.schema.ts';
import { cylinderFill } from './cylinder-fill.ts';

const lb = (value: number) => toBase('mass', 'lb', value);
const inLb = (massG: number) => fromBase('mass', 'lb', massG);
const fill = (request: Partial<CylinderFillRequest>) =>
  requireValue(cylinderFill({ refrigerant: 'R-410A', waterCapacityG: lb(47.7), tareG: 0, ...request }, referenceData));

describe('The most that a recovery cylinder may hold', () => {
  it.each(cylinderFillFixtures)('$name ($source)', ({ request, result }) => {
    expect(cylinderFill(cylinderFillRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });

  // Table for WC 47.7 lb and for WC 21.6 kg, liquid at 25 °C (computed, SG against 1,000 kg/m3).
  it.each([
    ['R-22', 45.44, 20.57],
    ['R-32', 36.67, 16.61],
    ['R-134a', 46.05, 20.85],
    ['R-404A', 39.84, 18.04],
    ['R-407C', 43.41, 19.66],
    ['R-410A', 40.41, 18.3],
    ['R-448A', 41.88, 18.96],
    ['R-449A', 41.88, 18.96],
    ['R-452B', 37.96, 17.19],
    ['R-454B', 37.63, 17.04],
    ['R-454C', 39.88, 18.06],
    ['R-513A', 43.28, 19.6],
  ])('of %s is %d lb and %d kg', (refrigerant, netLb, netKg) => {
    expect(inLb(fill({ refrigerant }).maxNetG)).toBeCloseTo(netLb, 2);
    expect(fill({ refrigerant, waterCapacityG: 21_600 }).maxNetG / 1000).toBeCloseTo(netKg, 2);
  });

  it('is 957.6 lb and 1,337.6 lb gross in the guideline’s own example: R-22, WC 1000 lb, SG 1.197, tare 380 lb', () => {
    const r22 = { refrigerant: 'R-22', waterCapacityG: lb(1000), tareG: lb(380) };
    expect(inLb(fill({ ...r22, specificGravity: 1.197 }).maxNetG)).toBeCloseTo(957.6, 4);
    expect(inLb(fill({ ...r22, specificGravity: 1.197 }).maxGrossG)).toBeCloseTo(1337.6, 4);
    expect(inLb(fill(r22).maxNetG)).toBeCloseTo(952.52, 2);
  });

  it('is below 80 % of the water capacity for light refrigerants: R-32 20.12 lb, R-290 10.27 lb of 26.2 lb', () => {
    const small = { waterCapacityG: lb(26.2) };
    expect(inLb(fill({ ...small, refrigerant: 'R-32', specificGravity: 0.96 }).maxNetG)).toBeCloseTo(20.12, 2);
    expect(inLb(fill({ ...small, refrigerant: 'R-290', specificGravity: 0.49 }).maxNetG)).toBeCloseTo(10.27, 2);
    expect(inLb(fill({ ...small, refrigerant: 'R-32' }).maxNetG)).toBeCloseTo(20.14, 2);
    // The shortcut without the specific gravity would allow 20.96 lb.
    for (const refrigerant of ['R-32', 'R-454B', 'R-452B', 'R-290', 'R-600a', 'R-717', 'R-1270', 'R-744']) {
      expect(inLb(fill({ ...small, refrigerant }).maxNetG)).toBeLessThan(20.96);
    }
  });

  it('follows a stamped lower fill factor in proportion', () => {
    expect(fill({ fillFactor: 0.4 }).maxNetG).toBeCloseTo(fill({}).maxNetG / 2, 3);
    for (const fillFactor of [0, 0.81, 1]) {
      expect(
        cylinderFillRequest.safeParse({ refrigerant: 'R-32', waterCapacityG: 1, tareG: 0, fillFactor }).success,
      ).toBe(false);
    }
  });
});

describe('A cylinder on the scale', () => {
  it('says what it holds and what room is left, also below zero', () => {
    const over = fill({ tareG: 12_000, grossG: 31_000, waterCapacityG: 21_600 });
    expect(over).toMatchObject({ contentG: 19_000, roomLeftG: -702.208 });
    expect(over.cautions).toEqual([{ code: 'cylinderOverfilled', signal: 'danger', params: { overG: 702.208 } }]);
    // A wrong tare stamp shows as a content below zero: it is a reading, not an error.
    expect(fill({ tareG: 12_000, grossG: 11_900 }).contentG).toBe(-100);
  });

  it('adds up: content and room left are the largest net mass', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 60_000 }),
        fc.integer({ min: 1000, max: 60_000 }),
        (grossG, waterCapacityG) => {
          const { contentG, roomLeftG, maxNetG, maxGrossG, cautions } = fill({ tareG: 9500, grossG, waterCapacityG });
          expect((contentG ?? 0) + (roomLeftG ?? 0)).toBeCloseTo(maxNetG, 2);
          expect(maxGrossG - maxNetG).toBeCloseTo(9500, 2);
          expect(cautions.some((caution) => caution.code === 'cylinderOverfilled')).toBe(grossG > maxGrossG);
        },
      ),
    );
  });
});

describe('A flammable refrigerant', () => {
  it('comes with a caution that names 70 % as common practice; others do not', () => {
    for (const refrigerant of ['R-32', 'R-454B', 'R-290', 'R-717']) {
      expect(fill({ refrigerant }).cautions.map((caution) => caution.code)).toEqual(['flammableFillLimit']);
    }
    expect(fill({ refrigerant: 'R-134a' }).cautions).toEqual([]);
  });

  it('is refused when it is not known', () => {
    expect(
      cylinderFill({ refrigerant: 'R-999', waterCapacityG: 1, tareG: 0, specificGravity: 1 }, referenceData),
    ).toMatchObject({
      refusals: [{ code: 'unknownRefrigerant', path: '/refrigerant' }],
    });
  });
});
