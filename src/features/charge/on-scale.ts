import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import type { QuantityReading } from '../../ui/quantity-draft.ts';

/** A mass as this scale shows it: in the unit of the reading, in pounds and ounces where both were typed. */
export function onScale(
  { typed, understoodAs }: Extract<QuantityReading<'mass'>, { is: 'read' }>,
  massG: number,
  locale: string,
): string {
  return formatQuantity('mass', massG, understoodAs.length > 1 ? 'lb-oz' : typed.unit, { locale });
}
