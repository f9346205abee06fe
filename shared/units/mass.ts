import Fraction from 'fraction.js';
import { z } from 'zod';
import { MASS_FACTORS, type MassUnit } from './factors.ts';
import { shiftDecimalPoint } from './round.ts';

/** A posted mass: a whole number of micrograms, so that a book of any length still sums exactly. */
export type Micrograms = bigint & { readonly unit: 'microgram' };

export const MICROGRAMS_PER_GRAM = 1_000_000n;

export const micrograms = (value: bigint): Micrograms => value as Micrograms;

export const MASS_UNITS = Object.keys(MASS_FACTORS) as [MassUnit, ...MassUnit[]];
export const massUnit = z.enum(MASS_UNITS);

/** A mass as a person typed it: kept beside the micrograms for prints, corrections and legal comparisons. */
export interface TypedMass {
  /** A plain decimal with a point, without exponent: `3.2`. */
  value: string;
  unit: MassUnit;
}

/** 4,000 t: up to there grams in a double still tell one microgram from the next (2^32 g is the bound). */
export const LARGEST_MICROGRAMS = micrograms(4_000_000_000_000_000n);

const DECIMAL = /^\d{1,12}(\.\d{1,12})?$/;
const SIGNED_DECIMAL = /^-?\d{1,12}(\.\d{1,12})?$/;

const withinRange = (mass: TypedMass) => {
  if (!SIGNED_DECIMAL.test(mass.value)) return true; // its pattern has refused it already
  const size = microgramsOfTyped(mass);
  return size <= LARGEST_MICROGRAMS && size >= -LARGEST_MICROGRAMS;
};

/** `{ value: '3.2', unit: 'oz' }`, zero or more. */
export const typedMass = z
  .strictObject({
    value: z.string().regex(DECIMAL).describe('a decimal with a point, as typed'),
    unit: massUnit,
  })
  .refine(withinRange, 'largest mass: 4,000 t');

/** A scale reading as typed: as `typedMass`, but a scale that was zeroed reads below zero. */
export const typedSignedMass = z
  .strictObject({
    value: z.string().regex(SIGNED_DECIMAL).describe('a decimal with a point, as typed'),
    unit: massUnit,
  })
  .refine(withinRange, 'largest mass: 4,000 t');

/** The typed mass in grams, exactly. */
export function exactGramsOfTyped({ value, unit }: TypedMass): Fraction {
  return new Fraction(value).mul(MASS_FACTORS[unit].perUnit);
}

/** The nearest whole number, halves away from zero. */
export function wholeNearest(exact: Fraction): bigint {
  return exact.s * ((2n * exact.n + exact.d) / (2n * exact.d));
}

/** The typed mass as posted: rounded once, half away from zero (1 oz is 28,349,523.125 micrograms, so 28,349,523). */
export function microgramsOfTyped(mass: TypedMass): Micrograms {
  return micrograms(wholeNearest(exactGramsOfTyped(mass).mul(MICROGRAMS_PER_GRAM)));
}

/** Grams from a calculation as posted: the decimal form of the double, rounded half away from zero. */
export function microgramsOfGrams(massG: number): Micrograms {
  const size = Math.round(shiftDecimalPoint(Math.abs(massG), 6));
  if (!(size <= Number(LARGEST_MICROGRAMS))) throw new RangeError(`Expected a mass up to 4,000 t, got ${massG} g`);
  return micrograms(BigInt(Math.sign(massG) * size));
}

/** Grams for a calculation. A double holds every posted mass up to 4,000 t without loss of the microgram. */
export function gramsOfMicrograms(mass: bigint): number {
  return Number(mass) / 1e6;
}

/** -1, 0 or 1: two typed masses compared exactly, as legal limits have to be. */
export function compareTyped(a: TypedMass, b: TypedMass): -1 | 0 | 1 {
  return Math.sign(exactGramsOfTyped(a).compare(exactGramsOfTyped(b))) as -1 | 0 | 1;
}

/** The exact sum in grams. */
export function sumTyped(masses: readonly TypedMass[]): Fraction {
  return masses.reduce((sum, mass) => sum.add(exactGramsOfTyped(mass)), new Fraction(0));
}
