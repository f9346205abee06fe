import type { Locale } from '../../../shared/session/session.schema.ts';
import { NBSP } from '../../lib/format.ts';
import { decimalSeparatorOf } from '../../ui/quantity-draft.ts';

/**
 * A line of the engine's arithmetic as people of this locale write it: their decimal separator, true signs for times
 * and minus, and a figure never parted from its unit. The figures themselves stay as they are.
 */
export function localExpression(expression: string, locale: Locale): string {
  const separator = decimalSeparatorOf(locale);
  return expression
    .replace(/(\d)\.(\d)/g, `$1${separator}$2`)
    .replace(/ x /g, ' × ')
    .replace(/ - /g, ' \u2212 ')
    .replace(/(^|[\s(])-(?=[\d(])/g, '$1\u2212')
    .replace(/\bmm2\b/g, 'mm²')
    .replace(/\bkg\/m3\b/g, 'kg/m³')
    .replace(/(\d) (m|g|g\/m|kg|t|mm|mm²|kg\/m³)(?=$|[\s)+×/,])/g, `$1${NBSP}$2`);
}
