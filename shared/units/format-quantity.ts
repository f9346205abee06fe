import { type AnyUnit, fromBase, type QuantityKind, type UnitOf } from './quantities.ts';
import { roundTo } from './round.ts';
import { COMPOUND_UNITS } from './unit-names.ts';

/** Compound forms are for reading only; they are typed as `12 ft 6 in` and `3 lb 7 oz`. */
export type DisplayUnit<Kind extends QuantityKind> =
  | UnitOf<Kind>
  | (Kind extends 'length' ? 'ft-in' : never)
  | (Kind extends 'mass' ? 'lb-oz' : never);

/** Places shown unless the caller says otherwise: about what the instruments of the trade resolve. */
const DECIMALS: Readonly<Record<AnyUnit | 'ft-in' | 'lb-oz', number>> = {
  g: 0,
  kg: 3,
  lb: 2,
  oz: 1,
  t: 3,
  'lb-oz': 1,
  m: 2,
  cm: 1,
  mm: 2,
  ft: 1,
  in: 2,
  'ft-in': 0,
  kPa: 1,
  bar: 2,
  psi: 1,
  MPa: 3,
  'kgf/cm2': 2,
  micron: 0,
  Pa: 1,
  mbar: 3,
  Torr: 3,
  'g/m': 1,
  'kg/m': 4,
  'oz/ft': 3,
  'g/ft': 2,
  m2: 2,
  ft2: 1,
  L: 2,
  m3: 3,
  ft3: 2,
  'N.m': 1,
  'ft.lbf': 1,
  '°C': 1,
  '°F': 1,
  K: 1,
};

const SYMBOLS: Partial<Record<AnyUnit, string>> = {
  m2: 'm²',
  ft2: 'ft²',
  m3: 'm³',
  ft3: 'ft³',
  'kgf/cm2': 'kgf/cm²',
  'N.m': 'N·m',
  'ft.lbf': 'ft·lbf',
};
const GAUGE_SYMBOLS: Partial<Record<AnyUnit, string>> = { psi: 'psig' };
const ABSOLUTE_SYMBOLS: Partial<Record<AnyUnit, string>> = { psi: 'psia' };
const MICRON: Readonly<Record<string, readonly [one: string, many: string]>> = {
  en: ['micron', 'microns'],
  es: ['micrón', 'micrones'],
};

const NO_BREAK_SPACE = '\u00a0';

export interface FormatOptions {
  /** A BCP 47 tag: `en-US`, `es-MX`. */
  locale: string;
  decimals?: number;
  /** Show a plus sign above zero: differences. */
  signed?: boolean;
}

/** The symbol of a unit as people read it: `psig` for a gauge pressure in psi. */
export function unitSymbol<Kind extends QuantityKind>(kind: Kind, unit: UnitOf<Kind>, locale: string): string {
  const named = unit as AnyUnit;
  if (named === 'micron') return (MICRON[locale.slice(0, 2)] ?? MICRON.en)?.[1] ?? named;
  if (kind === 'pressureGauge') return GAUGE_SYMBOLS[named] ?? SYMBOLS[named] ?? named;
  if (kind === 'pressureAbs') return ABSOLUTE_SYMBOLS[named] ?? `${SYMBOLS[named] ?? named} abs`;
  return SYMBOLS[named] ?? named;
}

function digits(value: number, decimals: number, { locale, signed }: FormatOptions): string {
  return new Intl.NumberFormat(locale, {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
    signDisplay: signed ? 'exceptZero' : 'negative',
  }).format(value);
}

/**
 * A value in the kind's base unit (g, m, kPa ...) as text with its unit, rounded half away from zero.
 * `ft-in` shows whole feet and inches, `lb-oz` whole pounds and ounces; a part that rounds up to a whole carries over.
 */
export function formatQuantity<Kind extends QuantityKind>(
  kind: Kind,
  base: number,
  unit: DisplayUnit<Kind>,
  options: FormatOptions,
): string {
  const decimals = options.decimals ?? DECIMALS[unit as AnyUnit];
  if (unit === 'ft-in') return compound('length', base, decimals, options);
  if (unit === 'lb-oz') return compound('mass', base, decimals, options);
  const single = unit as UnitOf<Kind>;
  const value = roundTo(fromBase(kind, single, base), decimals);
  const symbol =
    (single as AnyUnit) === 'micron' && Math.abs(value) === 1
      ? ((MICRON[options.locale.slice(0, 2)] ?? MICRON.en)?.[0] ?? single)
      : unitSymbol(kind, single, options.locale);
  return `${digits(value, decimals, options)}${NO_BREAK_SPACE}${symbol}`;
}

function compound(kind: 'length' | 'mass', base: number, decimals: number, options: FormatOptions): string {
  const { first, second, ratio } = COMPOUND_UNITS[kind];
  const total = roundTo(fromBase<'length' | 'mass'>(kind, second as never, base), decimals);
  const size = Math.abs(total);
  const whole = Math.floor(size / ratio);
  const rest = roundTo(size - whole * ratio, decimals);
  const sign = total < 0 ? '-' : options.signed && total > 0 ? '+' : '';
  const part = `${digits(rest, decimals, { locale: options.locale })}${NO_BREAK_SPACE}${second}`;
  if (whole === 0) return sign + part;
  return `${sign}${digits(whole, 0, { locale: options.locale })}${NO_BREAK_SPACE}${first}${NO_BREAK_SPACE}${part}`;
}

/**
 * A value for a field: digits alone, the locale's decimal separator, no grouping, and never exactly three decimals,
 * which would be read as thousands: 1.125 is written 1.1250.
 */
export function formatForInput<Kind extends QuantityKind>(
  kind: Kind,
  base: number,
  unit: UnitOf<Kind>,
  options: FormatOptions,
): string {
  const value = roundTo(fromBase(kind, unit, base), options.decimals ?? DECIMALS[unit as AnyUnit]);
  const format = (minimumFractionDigits: number) =>
    new Intl.NumberFormat(options.locale, {
      minimumFractionDigits,
      maximumFractionDigits: 12,
      useGrouping: false,
      numberingSystem: 'latn',
    }).format(value);
  const shortest = format(0);
  return /[.,]\d{3}$/.test(shortest) ? format(4) : shortest;
}
