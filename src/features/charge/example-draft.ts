import type { GwpSet } from '../../../shared/reference/gwp.ts';
import type { Locale } from '../../../shared/session/session.schema.ts';
import { quantityOf } from '../../ui/quantity-draft.ts';
import { type ChargeDraft, emptyDraft, type FieldUnits } from './charge-draft.ts';

/** An invented unit: R-32, 1,200 g, 7.5 m pre-charged, 20 g/m, with 12 m of quarter-inch pipe. Gives 90 g and 1,290 g. */
export function exampleDraft(units: FieldUnits, gwpSet: GwpSet, locale: Locale): ChargeDraft {
  const draft = emptyDraft(units, gwpSet);
  const [pipe] = draft.pipes;
  const imperial = units.length === 'ft';
  return {
    ...draft,
    refrigerant: 'R-32',
    factoryCharge: quantityOf('mass', 1200, units.mass, locale),
    prechargeLength: imperial ? { text: '24ft 7in', unit: 'ft' } : quantityOf('length', 7.5, 'm', locale),
    rate: quantityOf('massPerLength', 20, units.rate, locale),
    pipes: pipe
      ? [
          {
            ...pipe,
            liquidOd: '6.35',
            length: imperial ? { text: '39ft 4in', unit: 'ft' } : quantityOf('length', 12, 'm', locale),
          },
        ]
      : [],
  };
}
