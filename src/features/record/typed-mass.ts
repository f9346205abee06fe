import { microgramsOfTyped, type TypedMass } from '../../../shared/units/mass.ts';

export interface Term {
  sign: 1 | -1;
  mass: TypedMass;
}

const plus = (mass: TypedMass): Term => ({ sign: 1, mass });
const minus = (mass: TypedMass): Term => ({ sign: -1, mass });

/**
 * Adds typed masses exactly. In one unit the result stays in that unit, digit for digit as on paper (`12.4 oz - 9.2 oz`
 * is `3.2 oz`); mixed units meet in grams, each rounded to the microgram as the books round it. May be below zero.
 */
export function sumOfTerms(terms: readonly Term[]): TypedMass {
  const units = new Set(terms.map(({ mass }) => mass.unit));
  const [first] = units;
  if (first === undefined) return { value: '0', unit: 'g' };
  if (units.size === 1) {
    const decimals = Math.max(...terms.map(({ mass }) => mass.value.split('.')[1]?.length ?? 0));
    return {
      value: sumText(
        terms.map(({ sign, mass }) => BigInt(sign) * scaled(mass.value, decimals)),
        decimals,
      ),
      unit: first,
    };
  }
  return {
    value: sumText(
      terms.map(({ sign, mass }) => BigInt(sign) * microgramsOfTyped(mass)),
      6,
    ),
    unit: 'g',
  };
}

/** `first - second`, and so on for the rest. */
export const difference = (first: TypedMass, ...rest: readonly TypedMass[]): TypedMass =>
  sumOfTerms([plus(first), ...rest.map(minus)]);
export const sum = (...masses: readonly TypedMass[]): TypedMass => sumOfTerms(masses.map(plus));

export const isBelowZero = ({ value }: TypedMass): boolean => value.startsWith('-');
export const isZero = ({ value }: TypedMass): boolean => /^-?[0.]*$/.test(value);
export const withoutSign = ({ value, unit }: TypedMass): TypedMass => ({ value: value.replace(/^-/, ''), unit });
export const gramsOf = (mass: TypedMass): number => Number(microgramsOfTyped(mass)) / 1e6;

/** Grams of a book, which are whole micrograms, as a typed mass. */
export function typedGrams(massG: number): TypedMass {
  return { value: sumText([BigInt(Math.round(massG * 1e6))], 6), unit: 'g' };
}

function scaled(value: string, decimals: number): bigint {
  const [whole = '0', fraction = ''] = value.replace('-', '').split('.');
  const size = BigInt(whole + fraction.padEnd(decimals, '0'));
  return value.startsWith('-') ? -size : size;
}

function sumText(parts: readonly bigint[], decimals: number): string {
  const total = parts.reduce((all, part) => all + part, 0n);
  const digits = (total < 0n ? -total : total).toString().padStart(decimals + 1, '0');
  const cut = digits.length - decimals;
  const text = decimals === 0 ? digits : `${digits.slice(0, cut)}.${digits.slice(cut)}`.replace(/\.?0+$/, '');
  return total < 0n ? `-${text}` : text;
}
