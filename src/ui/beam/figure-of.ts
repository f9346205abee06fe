import type { Locale } from '../../../shared/session/session.schema.ts';
import { formatNumber, NBSP } from '../../lib/format.ts';

/** `1,250`; pounds and ounces carry their units: `21 lb 4 oz`. */
export function figureOf(value: number, unit: string, locale: Locale): string {
  if (unit !== 'lbOz') return formatNumber(locale, value, 3);
  const hundredths = Math.round(Math.abs(value) * 100);
  const pounds = Math.floor(hundredths / 1600);
  const ounces = `${formatNumber(locale, (hundredths % 1600) / 100, 2)}${NBSP}oz`;
  const sign = value < 0 && hundredths > 0 ? '\u2212' : '';
  if (pounds === 0) return sign + ounces;
  return `${sign}${formatNumber(locale, pounds)}${NBSP}lb${hundredths % 1600 === 0 ? '' : `${NBSP}${ounces}`}`;
}
