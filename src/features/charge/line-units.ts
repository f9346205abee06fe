import type { LineUnits } from '../../../shared/charge/written-line.ts';
import type { UnitOf } from '../../../shared/units/quantities.ts';
import { type QuantityDraft, readQuantity } from '../../ui/quantity-draft.ts';
import type { ChargeDraft } from './charge-draft.ts';

/** The units in which the pipe and the manual's rate stand on the screen: the arithmetic is followed in those. */
export function lineUnits(draft: ChargeDraft, locale: string): Partial<LineUnits> {
  const length = draft.pipes.map((pipe) => typedIn(pipe.length, locale)).find((unit) => unit !== null);
  return {
    ...(length ? { length: length === 'ft' || length === 'in' ? 'ft' : 'm' } : {}),
    rate: (draft.rateKind === 'byLiquidPipe' ? draft.sizes[0]?.rate.unit : null) ?? draft.rate.unit,
  };
}

/** `12ft 6in` in a field of metres was typed in feet; a unit switched since shows in the field. */
function typedIn(field: QuantityDraft<'length'>, locale: string): UnitOf<'length'> | null {
  const reading = readQuantity('length', field, { locale });
  if (reading.is !== 'read') return null;
  return field.held ? field.unit : reading.typed.unit;
}
