import { describe, expect, it } from 'vitest';
import type { TypedMass } from '../../../shared/units/mass.ts';
import { difference, sum, typedGrams } from './typed-mass.ts';

const of = (value: string, unit: TypedMass['unit'] = 'g'): TypedMass => ({ value, unit });

describe('A net mass', () => {
  it('stays in the unit of its readings, without binary noise', () => {
    expect(difference(of('12.4', 'oz'), of('9.2', 'oz'))).toEqual(of('3.2', 'oz'));
    expect(difference(of('0.3', 'kg'), of('0.1', 'kg'))).toEqual(of('0.2', 'kg'));
    expect(sum(of('17105'), of('28'))).toEqual(of('17133'));
  });

  it('of readings in two units is grams, to the microgram (an ounce is 28.349523125 g)', () => {
    expect(difference(of('100'), of('1', 'oz'))).toEqual(of('71.650477'));
  });

  it('below zero says so', () => {
    expect(difference(of('9380'), of('9500'))).toEqual(of('-120'));
  });

  it('of a book is its grams without a tail', () => {
    expect([typedGrams(5240), typedGrams(9381.281526), typedGrams(0)]).toEqual([
      of('5240'),
      of('9381.281526'),
      of('0'),
    ]);
  });
});
