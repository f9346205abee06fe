import type { TypedMass as PostedMass } from '../../../shared/ledger/entry-group.schema.ts';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import { microgramsOfTyped } from '../../../shared/units/mass.ts';
import { scaleStepIn } from '../../../shared/units/scale-step.ts';
import { formatNumber, NBSP } from '../../lib/format.ts';

/** How a scale of this trade shows a mass; `lbOz` is pounds and ounces side by side. */
export const READING_UNITS = ['g', 'kg', 'oz', 'lb', 'lbOz'] as const;
export type ReadingUnit = (typeof READING_UNITS)[number];

/**
 * A reading as it was keyed in: digits with a point whatever the locale, `11lb4.5` for pounds and ounces. Below zero is
 * never keyed in: a zeroed scale shows what has left it, and the sign follows from the way of weighing.
 */
export interface KeyedReading {
  text: string;
  unit: ReadingUnit;
}

/** What a scale of these steps shows, until somebody says otherwise; without its steps what this person reads masses in. */
export function usualUnit(resolutionG: number | null, mass: Preferences['mass']): ReadingUnit {
  if (resolutionG === null) return mass;
  const { unit } = scaleStepIn(resolutionG);
  return unit === 'oz' && mass === 'lbOz' ? 'lbOz' : unit;
}

export const emptyReading = (unit: ReadingUnit): KeyedReading => ({ text: '', unit });

const DECIMAL = /^\d{1,9}(\.\d{1,9})?$/;

/** One decimal and one unit, as a record keeps it; null while it is none (nothing keyed, `11lb`, 17 ounces after pounds). */
export function typedOf({ text, unit }: KeyedReading): PostedMass | null {
  if (unit !== 'lbOz') {
    const value = withoutPoint(text);
    return DECIMAL.test(value) ? { value, unit } : null;
  }
  const [pounds = '', ounces] = text.split('lb');
  if (ounces === undefined) {
    const value = withoutPoint(pounds);
    return DECIMAL.test(value) ? { value, unit: 'oz' } : null;
  }
  const rest = withoutPoint(ounces);
  if (!/^\d{1,5}$/.test(pounds) || !DECIMAL.test(rest)) return null;
  const [whole = '', decimals] = rest.split('.');
  if (Number(whole) >= 16) return null;
  return { value: `${Number(pounds) * 16 + Number(whole)}${decimals ? `.${decimals}` : ''}`, unit: 'oz' };
}

const withoutPoint = (text: string) => text.replace(/\.$/, '');

/** A whole number of micrograms, or null where there is no value yet. */
export function microgramsOf(reading: KeyedReading): bigint | null {
  const typed = typedOf(reading);
  return typed === null ? null : microgramsOfTyped(typed);
}

export type Key = '0' | '1' | '2' | '3' | '4' | '5' | '6' | '7' | '8' | '9' | 'point' | 'pounds' | 'back' | 'clear';

const MOST_DIGITS = 6;
const MOST_DECIMALS = 3;

/** What stands in the window after one key; a key that makes no sense there changes nothing. */
export function press({ text, unit }: KeyedReading, key: Key): KeyedReading {
  const part = text.slice(text.indexOf('lb') === -1 ? 0 : text.indexOf('lb') + 2);
  switch (key) {
    case 'clear':
      return { text: '', unit };
    case 'back':
      return { text: text.endsWith('lb') ? text.slice(0, -2) : text.slice(0, -1), unit };
    case 'point':
      if (part.includes('.')) return { text, unit };
      return { text: `${text}${part === '' ? '0' : ''}.`, unit };
    case 'pounds':
      return unit === 'lbOz' && /^\d+$/.test(text) ? { text: `${text}lb`, unit } : { text, unit };
    default: {
      const [whole = '', decimals] = part.split('.');
      if (decimals === undefined ? whole.length >= MOST_DIGITS : decimals.length >= MOST_DECIMALS) {
        return { text, unit };
      }
      return { text: part === '0' ? text.slice(0, -1) + key : text + key, unit };
    }
  }
}

/** What a keyboard or a paste put in: the person's decimal sign, digits, and `lb`; grouping signs are only for reading. */
export function readTyped(typed: string, unit: ReadingUnit, decimalSeparator: '.' | ','): KeyedReading {
  let reading = emptyReading(unit);
  for (const sign of typed.toLowerCase()) {
    if (/\d/.test(sign)) reading = press(reading, sign as Key);
    else if (sign === decimalSeparator) reading = press(reading, 'point');
    else if (sign === 'l') reading = press(reading, 'pounds');
  }
  return reading;
}

/** The window: grouped digits, the decimals as they were keyed, so that a trailing zero or point stays in sight. */
export function shown({ text }: KeyedReading, locale: string, decimalSeparator: '.' | ','): string {
  const grouped = (digits: string) => {
    const [whole = '', decimals] = digits.split('.');
    const left = whole === '' ? '' : formatNumber(locale as 'en-US', Number(whole));
    return decimals === undefined ? left : `${left}${decimalSeparator}${decimals}`;
  };
  if (!text.includes('lb')) return grouped(text);
  const [pounds = '', ounces = ''] = text.split('lb');
  return `${grouped(pounds)}${NBSP}lb${ounces === '' ? '' : ` ${grouped(ounces)}`}`;
}

/** Places after the point that such a scale shows, by its resolution in grams. */
function decimalsOf(unit: ReadingUnit, resolutionG: number): number {
  switch (unit) {
    case 'g':
      return resolutionG >= 1 ? 0 : 1;
    case 'kg':
      return resolutionG >= 10 ? 2 : 3;
    case 'lb':
      return 2;
    default:
      return resolutionG >= 2 ? 1 : 2;
  }
}

const GRAMS_PER: Record<Exclude<ReadingUnit, 'lbOz'>, () => number> = {
  g: () => 1,
  kg: () => 1000,
  oz: () => gramsIn('oz'),
  lb: () => gramsIn('lb'),
};
const gramsIn = (unit: 'oz' | 'lb') => Number(microgramsOfTyped({ value: '1000', unit })) / 1e9;

/** A mass as this scale would show it: `8,415 g`, `18.55 lb`, `18 lb 8.8 oz`; below zero with its sign. */
export function onScale(massG: number, unit: ReadingUnit, resolutionG: number, locale: string): string {
  const decimals = decimalsOf(unit, resolutionG);
  if (unit !== 'lbOz') {
    return `${formatNumber(locale as 'en-US', massG / GRAMS_PER[unit](), decimals)}${NBSP}${unit}`;
  }
  const step = 10 ** decimals;
  const total = Math.round((Math.abs(massG) / GRAMS_PER.oz()) * step);
  const pounds = Math.floor(total / (16 * step));
  const ounces = (total - pounds * 16 * step) / step;
  const sign = massG < 0 && total > 0 ? '\u2212' : '';
  const rest = `${formatNumber(locale as 'en-US', ounces, decimals)}${NBSP}oz`;
  return pounds === 0 ? sign + rest : `${sign}${formatNumber(locale as 'en-US', pounds)}${NBSP}lb ${rest}`;
}
