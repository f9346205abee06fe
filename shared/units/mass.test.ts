import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  compareTyped,
  exactGramsOfTyped,
  gramsOfMicrograms,
  LARGEST_MICROGRAMS,
  MASS_UNITS,
  micrograms,
  microgramsOfGrams,
  microgramsOfTyped,
  sumTyped,
  typedMass,
  typedSignedMass,
} from './mass.ts';

describe('A typed mass as posted', () => {
  it('is a whole number of micrograms, halves away from zero', () => {
    expect(microgramsOfTyped({ value: '1', unit: 'g' })).toBe(1_000_000n);
    // 28,349,523.125 micrograms (international pound, 1959).
    expect(microgramsOfTyped({ value: '1', unit: 'oz' })).toBe(28_349_523n);
    expect(microgramsOfTyped({ value: '4', unit: 'oz' })).toBe(113_398_093n);
    expect(microgramsOfTyped({ value: '0.0000005', unit: 'g' })).toBe(1n);
    expect(microgramsOfTyped({ value: '-0.0000005', unit: 'g' })).toBe(-1n);
    expect(microgramsOfTyped({ value: '3.2', unit: 'oz' })).toBe(90_718_474n);
  });

  it('is exact for sixteen ounces and one pound', () => {
    expect(microgramsOfTyped({ value: '16', unit: 'oz' })).toBe(453_592_370n);
    expect(microgramsOfTyped({ value: '1', unit: 'lb' })).toBe(453_592_370n);
    expect(compareTyped({ value: '16', unit: 'oz' }, { value: '1', unit: 'lb' })).toBe(0);
  });

  it('turns 3 lb 7 oz into 1559.22377 g (55 oz)', () => {
    const sum = sumTyped([
      { value: '3', unit: 'lb' },
      { value: '7', unit: 'oz' },
    ]);
    expect(sum.equals('1559.223771875')).toBe(true);
  });

  it('comes back from a calculation in grams to the microgram', () => {
    expect(microgramsOfGrams(90.5)).toBe(90_500_000n);
    expect(microgramsOfGrams(1234567.890123)).toBe(1_234_567_890_123n);
    expect(microgramsOfGrams(-0.0000005)).toBe(-1n);
    expect(() => microgramsOfGrams(1e10)).toThrow(RangeError);
    expect(() => microgramsOfGrams(Number.NaN)).toThrow(RangeError);
    fc.assert(
      fc.property(fc.bigInt({ min: -LARGEST_MICROGRAMS, max: LARGEST_MICROGRAMS }), (posted) => {
        expect(microgramsOfGrams(gramsOfMicrograms(micrograms(posted)))).toBe(posted);
      }),
    );
  });
});

describe('Two typed masses', () => {
  it('are told apart where their micrograms are the same', () => {
    // 0.125 microgram apart, which rounding hides: a limit of "exceeds 1 oz" must not be tripped.
    const ounce = { value: '1', unit: 'oz' } as const;
    const rounded = { value: '28.349523', unit: 'g' } as const;
    expect(microgramsOfTyped(ounce)).toBe(microgramsOfTyped(rounded));
    expect(compareTyped(ounce, rounded)).toBe(1);
    expect(compareTyped(rounded, ounce)).toBe(-1);
  });

  it('compare the same way as their difference has its sign', () => {
    const mass = fc.record({
      value: fc.tuple(fc.nat(99_999), fc.nat(9999)).map(([whole, part]) => `${whole}.${part}`),
      unit: fc.constantFrom(...MASS_UNITS),
    });
    fc.assert(
      fc.property(mass, mass, (a, b) => {
        const difference = exactGramsOfTyped(a).sub(exactGramsOfTyped(b));
        expect(compareTyped(a, b)).toBe(Number(difference.s) === 0 || difference.n === 0n ? 0 : Number(difference.s));
        expect(compareTyped(b, a) + compareTyped(a, b)).toBe(0);
      }),
    );
  });
});

describe('The form of a typed mass', () => {
  it('is a plain decimal: no exponent, no sign, no separator for thousands', () => {
    for (const value of ['1e3', '+1', '1,5', '', '.5', '5.', ' 5', '0x10', 'Infinity', '-1']) {
      expect(typedMass.safeParse({ value, unit: 'g' }).success).toBe(false);
    }
    expect(typedMass.safeParse({ value: '0', unit: 'lb' }).success).toBe(true);
    expect(typedSignedMass.safeParse({ value: '-90', unit: 'g' }).success).toBe(true);
  });

  it('ends where grams in a double could no longer hold the microgram', () => {
    expect(typedMass.safeParse({ value: '4000', unit: 't' }).success).toBe(true);
    expect(typedMass.safeParse({ value: '4000.000001', unit: 't' }).success).toBe(false);
  });
});
