import type { Preferences } from '../../../shared/session/session.schema.ts';
import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import type { QuantityDraft, QuantityReading } from '../../ui/quantity-draft.ts';

/**
 * A mass as this scale shows it: in the unit of the reading, in pounds and ounces where both were typed or where the
 * person reads masses so.
 */
export function onScale(
  draft: QuantityDraft<'mass'>,
  { typed, understoodAs }: Extract<QuantityReading<'mass'>, { is: 'read' }>,
  massG: number,
  { locale, mass }: Pick<Preferences, 'locale' | 'mass'>,
): string {
  const unit = draft.held ? draft.unit : typed.unit;
  const both = understoodAs.length > 1 || (unit === 'lb' && mass === 'lbOz');
  return formatQuantity('mass', massG, both ? 'lb-oz' : unit, { locale });
}
