import Fraction from 'fraction.js';
import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { type QuantityKind, toBaseExact, type UnitOf, unitsOf } from './quantities.ts';
import { readNumber, type SeparatorMeaning } from './read-number.ts';
import { COMPOUND_UNITS, UNIT_NAMES } from './unit-names.ts';

/** One number with its unit as understood: `12 ft`, `6 in`, `3/8 in`. */
export interface UnderstoodPart<Unit extends string> {
  /** A decimal with a point. */
  value: string;
  unit: Unit;
  /** As typed, where a fraction was: `1-1/8`. */
  fraction?: string;
}

export interface Quantity<Kind extends QuantityKind> {
  kind: Kind;
  /** In the kind's base unit (g, m, mm, kPa, Pa, g/m, m2, L, N m, °C, K). */
  base: number;
  /** The same without rounding. */
  exact: Fraction;
  /** One decimal and one unit, to keep beside what is stored: `11 lb 4.5 oz` is 180.5 oz. */
  typed: { value: string; unit: UnitOf<Kind> };
  /** For the line under the field: what the program read, the sign included. */
  understoodAs: readonly UnderstoodPart<UnitOf<Kind>>[];
}

export interface ParseOptions<Kind extends QuantityKind> {
  /** The unit of a number that stands alone. */
  defaultUnit: UnitOf<Kind>;
  /** Of the person's locale; decides only which reading of an ambiguous number is offered first. */
  decimalSeparator?: '.' | ',';
  /** The person's answer to `ambiguousSeparator`. */
  separatorMeans?: SeparatorMeaning;
  /** Temperatures and their differences may be below zero, other kinds only where this says so. */
  allowNegative?: boolean;
  /** JSON Pointer for the refusals. */
  path?: string;
}

interface RawPart {
  negative: boolean;
  text: string;
  unit: string | null;
}

const VULGAR: Readonly<Record<string, string>> = {
  '¼': '1/4',
  '½': '1/2',
  '¾': '3/4',
  '⅛': '1/8',
  '⅜': '3/8',
  '⅝': '5/8',
  '⅞': '7/8',
};
/** Fractions are how inches, feet, pounds and ounces are written; nobody writes 3/8 m. */
const TAKES_FRACTIONS: ReadonlySet<string> = new Set(['in', 'ft', 'lb', 'oz']);
const FRACTION = /^(?:(\d{1,6})(?:\s*-\s*|\s+))?(\d{1,4})\s*\/\s*(\d{1,4})(?![\d.,])/;
const DECIMAL = /^[.,]?\d(?:[.,]?\d)*(?:[\u0020\u00a0\u202f\u2009]\d{3}(?!\d))*(?:[.,]\d+)*/;

/**
 * Reads what a person types into a quantity field.
 *
 * Refuses with `notANumber`, `unknownUnit` (allowed: the units), `negative`, `partTooLarge` (14 in after feet) and
 * `ambiguousSeparator` (allowed: both readings, the locale's first; ask, then call again with `separatorMeans`).
 *
 * @example parseQuantity('length', `12' 6"`, { defaultUnit: 'ft' }) // 3.81 m, understood as 12 ft 6 in
 */
export function parseQuantity<Kind extends QuantityKind>(
  kind: Kind,
  text: string,
  options: ParseOptions<Kind>,
): Outcome<Quantity<Kind>> {
  const path = options.path ?? '';
  const refuse = (code: string, more: Partial<Refusal> = {}) =>
    refused({ code, path, given: text, ...more, params: { given: text, ...more.params } });
  const units = unitsOf(kind);

  const split = splitParts(kind, text);
  if (split.fault === 'unknownUnit') {
    return refuse('unknownUnit', { allowed: units, params: { unit: split.word } });
  }
  if (split.fault || split.parts.length === 0 || split.parts.length > 2) return refuse('notANumber');

  const negative = split.parts[0]?.negative === true;
  if (split.parts.slice(1).some((part) => part.negative)) return refuse('notANumber');
  const parts: UnderstoodPart<UnitOf<Kind>>[] = [];
  for (const raw of split.parts) {
    const unit = unitOfPart(kind, raw, parts.at(-1)?.unit ?? null, options.defaultUnit);
    if (unit === null) return refuse('notANumber');
    const fraction = FRACTION.exec(raw.text);
    if (fraction) {
      const value = decimalOfFraction(fraction);
      if (value === null || !TAKES_FRACTIONS.has(unit)) return refuse('notANumber');
      parts.push({ value, unit, fraction: raw.text.replace(/\s*\/\s*/, '/').replace(/\s*-\s*|\s+/, '-') });
      continue;
    }
    const number = readNumber(raw.text, options.separatorMeans);
    if (number.is === 'none') return refuse('notANumber');
    if (number.is === 'ambiguous') {
      const readings = [number.grouped, number.decimal];
      const localeGroups = raw.text.includes((options.decimalSeparator ?? '.') === '.' ? ',' : '.');
      return refuse('ambiguousSeparator', {
        allowed: localeGroups ? readings : readings.reverse(),
        params: { grouped: number.grouped, decimal: number.decimal, unit },
      });
    }
    parts.push({ value: number.value, unit });
  }

  const typed = joinParts(kind, parts);
  if (typed === null) return refuse('notANumber');
  if (typed.tooLarge) {
    return refuse('partTooLarge', {
      allowed: typed.tooLarge.below,
      params: { unit: typed.tooLarge.unit },
    });
  }
  const isZero = new Fraction(typed.value).equals(0);
  const mayBeNegative = options.allowNegative ?? (kind === 'temperature' || kind === 'temperatureDifference');
  if (negative && !isZero && !mayBeNegative) return refuse('negative');
  const sign = negative && !isZero ? '-' : '';
  const value = sign + typed.value;
  const exact = toBaseExact(kind, typed.unit, new Fraction(value));
  const [first, ...rest] = parts as [UnderstoodPart<UnitOf<Kind>>, ...UnderstoodPart<UnitOf<Kind>>[]];
  return done({
    kind,
    base: exact.valueOf(),
    exact,
    typed: { value, unit: typed.unit },
    understoodAs: [{ ...first, value: sign + first.value }, ...rest],
  });
}

/** Cuts the text into numbers and the unit behind each. */
function splitParts(
  kind: QuantityKind,
  text: string,
): { parts: RawPart[]; fault?: undefined } | { fault: 'notANumber' } | { fault: 'unknownUnit'; word: string } {
  const names = namesOf(kind);
  let rest = text
    .replace(/[¼½¾⅛⅜⅝⅞]/g, (sign) => ` ${VULGAR[sign]}`)
    .replace(/\u2044/g, '/')
    .replace(/\u2212/g, '-')
    .replace(/[\u2019\u2032]/g, "'")
    .replace(/''|[\u201d\u2033]/g, '"')
    .trim();
  const parts: RawPart[] = [];
  while (rest !== '') {
    const sign = /^([-+])\s*/.exec(rest);
    if (sign) rest = rest.slice(sign[0].length);
    // A hyphen behind a unit joins: 12'-6".
    const negative = sign?.[1] === '-' && parts.length === 0;
    const number = FRACTION.exec(rest) ?? DECIMAL.exec(rest);
    if (!number) return { fault: 'notANumber' };
    rest = rest.slice(number[0].length).trimStart();
    const name = names.find(([written]) => startsWithUnit(rest, written));
    if (name) rest = rest.slice(name[0].length).replace(/^\./, '').trimStart();
    else if (/^[^\d\s.,+/-]/.test(rest)) return { fault: 'unknownUnit', word: rest.slice(0, 20) };
    parts.push({ negative, text: number[0], unit: name ? name[1] : null });
    if (!name && rest !== '') return { fault: 'notANumber' };
  }
  return { parts };
}

/** Longest first, so that `kg/m` is not taken for `kg`. */
function namesOf(kind: QuantityKind): [written: string, unit: string][] {
  const names = Object.entries(UNIT_NAMES[kind]).flatMap(([unit, written]) =>
    (written as readonly string[]).map((name): [string, string] => [name, unit]),
  );
  return names.sort((a, b) => b[0].length - a[0].length);
}

function startsWithUnit(text: string, name: string): boolean {
  if (text.slice(0, name.length).toLowerCase() !== name.toLowerCase()) return false;
  return !/\p{L}$/u.test(name) || !/^[\p{L}/]/u.test(text.slice(name.length));
}

function compoundOf(kind: QuantityKind) {
  return kind === 'length' || kind === 'mass' ? COMPOUND_UNITS[kind] : null;
}

/** The second part of `12' 6` is in inches; a bare fraction in a pipe size is in inches whatever the default. */
function unitOfPart<Kind extends QuantityKind>(
  kind: Kind,
  part: RawPart,
  before: string | null,
  defaultUnit: UnitOf<Kind>,
): UnitOf<Kind> | null {
  if (part.unit !== null) return part.unit as UnitOf<Kind>;
  if (before === null) {
    return kind === 'pipeDiameter' && part.text.includes('/') ? ('in' as UnitOf<Kind>) : defaultUnit;
  }
  const compound = compoundOf(kind);
  return compound?.first === before ? (compound.second as UnitOf<Kind>) : null;
}

/** Halves down to 64ths, as on rules and fittings; others have no finite decimal to keep. */
function decimalOfFraction([, whole, above, below]: RegExpExecArray): string | null {
  const denominator = Number(below);
  if (![2, 4, 8, 16, 32, 64].includes(denominator) || Number(above) >= denominator) return null;
  return new Fraction(Number(above), denominator).add(Number(whole ?? 0)).toString();
}

function joinParts<Kind extends QuantityKind>(
  kind: Kind,
  parts: readonly UnderstoodPart<UnitOf<Kind>>[],
): { value: string; unit: UnitOf<Kind>; tooLarge?: { unit: string; below: number } } | null {
  const [first, second] = parts;
  if (!first) return null;
  if (!second) return { value: first.value, unit: first.unit };
  const compound = compoundOf(kind);
  if (!compound || first.unit !== compound.first || second.unit !== compound.second) return null;
  if (!/^\d+$/.test(first.value)) return null;
  const value = new Fraction(first.value).mul(compound.ratio).add(second.value).toString();
  const tooLarge = new Fraction(second.value).gte(compound.ratio)
    ? { unit: compound.second, below: compound.ratio }
    : undefined;
  return { value, unit: second.unit, ...(tooLarge ? { tooLarge } : {}) };
}
