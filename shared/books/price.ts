import Fraction from 'fraction.js';
import { MASS_FACTORS } from '../units/factors.ts';
import { wholeNearest } from '../units/mass.ts';

/** A price as typed: so much of the currency for one of `per`. */
export interface TypedPrice {
  readonly value: string;
  readonly per: 'kg' | 'lb';
}

/** Millionths of the currency a kilogram, rounded once: a price a pound is no round one a kilogram. */
export function microsPerKg({ value, per }: TypedPrice): bigint {
  const perKg = new Fraction(value).mul(MASS_FACTORS.kg.perUnit).div(MASS_FACTORS[per].perUnit);
  return wholeNearest(perKg.mul(1_000_000));
}
