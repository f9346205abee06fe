import { useMemo } from 'react';
import type { Locale, Preferences } from '../../shared/session/session.schema.ts';
import {
  LENGTH_FACTORS,
  type LengthUnit,
  MASS_FACTORS,
  MASS_PER_LENGTH_FACTORS,
  type MassPerLengthUnit,
} from '../../shared/units/factors.ts';
import { roundTo } from '../../shared/units/round.ts';
import { scaleStepIn } from '../../shared/units/scale-step.ts';
import { usePreferences } from './preferences.ts';

/** U+00A0: a figure and its unit stay on one line. */
export const NBSP = '\u00a0';
/** A true minus sign, as wide as a figure. */
const MINUS = '\u2212';

/** A figure and its unit, apart, so that a screen can set the unit smaller. */
export interface Quantity {
  value: string;
  unit: string;
}

const numberFormats = new Map<string, Intl.NumberFormat>();
/** Making a formatter is slow and using one is not: they are kept. */
export function formatNumber(locale: Locale, value: number, most = 3, least = 0): string {
  const key = `${locale} ${most} ${least}`;
  let format = numberFormats.get(key);
  if (!format) {
    format = new Intl.NumberFormat(locale, { maximumFractionDigits: most, minimumFractionDigits: least });
    numberFormats.set(key, format);
  }
  // Rounded by our own rule first (half away from zero on the decimal form), so that screen and record agree.
  return format.format(roundTo(value, most)).replace('-', MINUS);
}

const dateFormats = new Map<string, Intl.DateTimeFormat>();
function formatDate(
  locale: Locale,
  at: Date,
  timeZone: string | undefined,
  options: Intl.DateTimeFormatOptions,
): string {
  const key = `${locale} ${timeZone ?? ''} ${JSON.stringify(options)}`;
  let format = dateFormats.get(key);
  if (!format) {
    format = new Intl.DateTimeFormat(locale, { ...options, timeZone });
    dateFormats.set(key, format);
  }
  return format.format(at);
}

const gramsPer = (unit: keyof typeof MASS_FACTORS) => MASS_FACTORS[unit].perUnit.valueOf();
const GRAMS_PER_OUNCE = gramsPer('oz');
const GRAMS_PER_POUND = gramsPer('lb');
const METRES_PER_FOOT = LENGTH_FACTORS.ft.perUnit.valueOf();
const INCHES_PER_METRE = 1 / LENGTH_FACTORS.in.perUnit.valueOf();
const GPM_PER_OZ_PER_FT = MASS_PER_LENGTH_FACTORS['oz/ft'].perUnit.valueOf();

/** Grams in the unit that the person reads masses in. Pounds and ounces come as one text, `2 lb 13.5 oz`. */
export function massQuantity(preferences: Pick<Preferences, 'locale' | 'mass'>, massG: number): Quantity {
  const { locale } = preferences;
  switch (preferences.mass) {
    case 'g':
      return { value: formatNumber(locale, massG, 3), unit: 'g' };
    case 'kg':
      return { value: formatNumber(locale, massG / gramsPer('kg'), 3, 3), unit: 'kg' };
    case 'oz':
      return { value: formatNumber(locale, massG / GRAMS_PER_OUNCE, 2), unit: 'oz' };
    case 'lbOz': {
      const tenths = Math.round((Math.abs(massG) / GRAMS_PER_OUNCE) * 10);
      const pounds = Math.floor(tenths / 160);
      const ounces = (tenths - pounds * 160) / 10;
      const sign = massG < 0 && tenths > 0 ? MINUS : '';
      if (pounds === 0) return { value: sign + formatNumber(locale, ounces, 1), unit: 'oz' };
      return {
        value: `${sign}${formatNumber(locale, pounds)}${NBSP}lb ${formatNumber(locale, ounces, 1)}`,
        unit: 'oz',
      };
    }
  }
}

/** As `massQuantity`, with pounds and ounces apart: a large figure sets every unit small. */
export function massPieces(preferences: Pick<Preferences, 'locale' | 'mass'>, massG: number): Quantity[] {
  const { value, unit } = massQuantity(preferences, massG);
  const [pounds, ounces] = value.split(`${NBSP}lb `);
  return pounds !== undefined && ounces !== undefined
    ? [
        { value: pounds, unit: 'lb' },
        { value: ounces, unit },
      ]
    : [{ value, unit }];
}

/** Metres in the unit that the person reads lengths in: `12.0 m`, `39 ft 4 in` (to the nearest half inch). */
export function lengthQuantity(preferences: Pick<Preferences, 'locale' | 'length'>, lengthM: number): Quantity {
  const { locale } = preferences;
  if (preferences.length === 'm') return { value: formatNumber(locale, lengthM, 2, 1), unit: 'm' };
  const halves = Math.round(Math.abs(lengthM) * INCHES_PER_METRE * 2);
  const feet = Math.floor(halves / 24);
  const inches = (halves - feet * 24) / 2;
  const sign = lengthM < 0 && halves > 0 ? MINUS : '';
  if (inches === 0) return { value: sign + formatNumber(locale, feet), unit: 'ft' };
  if (feet === 0) return { value: sign + formatNumber(locale, inches, 1), unit: 'in' };
  return { value: `${sign}${formatNumber(locale, feet)}${NBSP}ft ${formatNumber(locale, inches, 1)}`, unit: 'in' };
}

/** Grams a metre in the unit in which the person's manuals print rates. */
function rateQuantity({ locale, mass }: Pick<Preferences, 'locale' | 'mass'>, gPerM: number): Quantity {
  return mass === 'oz' || mass === 'lbOz'
    ? { value: formatNumber(locale, gPerM / GPM_PER_OZ_PER_FT, 3), unit: 'oz/ft' }
    : { value: formatNumber(locale, gPerM, 2), unit: 'g/m' };
}

/** Whole grams from ten on, below that tenths. */
const aboutGrams = (massG: number) => roundTo(massG, Math.abs(massG) >= 10 ? 0 : 1);

const totalGrams = (massG: number) => roundTo(massG, Math.abs(massG) >= 1000 ? 0 : 1);

function scaleStep(locale: Locale, stepG: number): string {
  const { value, unit } = scaleStepIn(stepG);
  return `${formatNumber(locale, value, unit === 'g' ? 3 : 2)}${NBSP}${unit}`;
}

const joined = ({ value, unit }: Quantity) => `${value}${NBSP}${unit}`;

/** All formats of one person, as plain functions. */
export function formatsFor(preferences: Preferences) {
  const { locale } = preferences;
  return {
    locale,
    number: (value: number, most = 3, least = 0) => formatNumber(locale, value, most, least),
    massPieces: (massG: number) => massPieces(preferences, massG),
    mass: (massG: number) => joined(massQuantity(preferences, massG)),
    /** Only the figure, for a table whose head names the unit; pounds and ounces keep theirs, or 0.5 could be either. */
    massFigure: (massG: number) => {
      const quantity = massQuantity(preferences, massG);
      return preferences.mass === 'lbOz' ? joined(quantity) : quantity.value;
    },
    /** To what a scale of this trade can show: a worked-out mass carries no more figures than that. */
    massAbout: (massG: number) => joined(massQuantity(preferences, aboutGrams(massG))),
    /** A worked-out total: whole grams from a kilogram on, tenths below it. */
    massTotal: (massG: number) => joined(massQuantity(preferences, totalGrams(massG))),
    massTotalPieces: (massG: number) => massPieces(preferences, totalGrams(massG)),
    /** One step of a scale's display, in the unit that it was made in: a round number of ounces or pounds, else grams. */
    scaleStep: (stepG: number) => scaleStep(locale, stepG),
    massAboutParts: (massG: number) => massQuantity(preferences, aboutGrams(massG)),
    massAboutPieces: (massG: number) => massPieces(preferences, aboutGrams(massG)),
    massUnit: preferences.mass === 'lbOz' ? 'lb oz' : preferences.mass,
    /** What a person typed, `2,310 g`, where it reads otherwise than the mass is shown; else null. */
    massAsTyped: (typed: { value: string; unit: string }, massG: number): string | null => {
      const sameUnits = preferences.mass === 'lbOz' ? ['lb', 'oz'] : [preferences.mass];
      if (sameUnits.includes(typed.unit)) return null;
      const text = `${formatNumber(locale, Number(typed.value), 9)}${NBSP}${typed.unit}`;
      return text === joined(massQuantity(preferences, massG)) ? null : text;
    },
    /** A whole stock at a glance: pounds for those who read pounds or ounces, else kilograms. */
    stock: (massG: number) =>
      preferences.mass === 'lbOz' || preferences.mass === 'oz'
        ? `${formatNumber(locale, massG / GRAMS_PER_POUND, 1, 1)}${NBSP}lb`
        : `${formatNumber(locale, massG / gramsPer('kg'), 1, 1)}${NBSP}kg`,
    pounds: (massG: number) => `${formatNumber(locale, massG / GRAMS_PER_POUND, 2)}${NBSP}lb`,
    lengthParts: (lengthM: number) => lengthQuantity(preferences, lengthM),
    length: (lengthM: number) => joined(lengthQuantity(preferences, lengthM)),
    metres: (lengthM: number) => `${formatNumber(locale, lengthM, 2, 1)}${NBSP}m`,
    feet: (lengthM: number) => `${formatNumber(locale, lengthM / METRES_PER_FOOT, 2)}${NBSP}ft`,
    rate: (gPerM: number) => joined(rateQuantity(preferences, gPerM)),
    rateFigure: (gPerM: number) => rateQuantity(preferences, gPerM).value,
    tonnes: (co2eT: number) => `${formatNumber(locale, co2eT, 3, 3)}${NBSP}t`,
    /** `30 Nov 2026`; a calendar day as it stands (`2026-11-30`) is shown without a zone. */
    day: (day: string) => formatDate(locale, new Date(`${day}T12:00:00Z`), 'UTC', { dateStyle: 'medium' }),
    /** A booking month (`2026-11`): `Nov 2026`. */
    month: (month: string) =>
      formatDate(locale, new Date(`${month}-15T12:00:00Z`), 'UTC', { month: 'short', year: 'numeric' }),
    /** `30 Nov, 16:12` on the clock of the place. */
    dateTime: (instant: string, timeZone?: string) =>
      formatDate(locale, new Date(instant), timeZone, {
        day: 'numeric',
        month: 'short',
        hour: locale.endsWith('US') ? 'numeric' : '2-digit', // 1:40 PM, but 08:05
        minute: '2-digit',
      }),
    longDateTime: (instant: string, timeZone?: string) =>
      formatDate(locale, new Date(instant), timeZone, { dateStyle: 'medium', timeStyle: 'short' }),
    list: (parts: readonly string[]) => new Intl.ListFormat(locale, { type: 'conjunction' }).format(parts),
  };
}
export type Formats = ReturnType<typeof formatsFor>;

export function useFormat(): Formats {
  const preferences = usePreferences();
  return useMemo(() => formatsFor(preferences), [preferences]);
}

export type { LengthUnit, MassPerLengthUnit };
