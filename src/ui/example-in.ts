import { unitSymbol } from '../../shared/units/format-quantity.ts';
import { fromBase, type QuantityKind, type UnitOf } from '../../shared/units/quantities.ts';
import { NBSP } from '../lib/format.ts';
import { readQuantity } from './quantity-draft.ts';

/**
 * An example as the field's own unit says it, to two figures: a blank that reads ounces must not show `28 g`. One that is
 * already in that unit stays as it was written. Examples are written with a decimal point.
 */
export function exampleIn<Kind extends QuantityKind>(
  kind: Kind,
  example: string,
  unit: UnitOf<Kind>,
  locale: string,
): string {
  const reading = readQuantity(kind, { text: example, unit }, { locale: 'en-US' });
  if (reading.is !== 'read' || (reading.typed.unit === unit && !example.includes('.'))) return example;
  const compound = reading.understoodAs.length > 1;
  if (compound && reading.understoodAs.some((part) => part.unit === unit)) return example;
  const value = fromBase(kind, unit, reading.base);
  const shown = reading.typed.unit === unit ? value : Number(value.toPrecision(2));
  return `${shown.toLocaleString(locale, { maximumFractionDigits: 6 })}${NBSP}${unitSymbol(kind, unit, locale)}`;
}
