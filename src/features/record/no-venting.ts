import type { FormContext } from './answers.ts';
import type { SaidCaution } from './form.ts';

/** Outside the US ban in every use; those after it in some uses alone (40 CFR 82.154(a)(1)): no offence is named there. */
const NEVER_BANNED = new Set(['R-744']);
const SOMETIMES_EXEMPT = new Set(['R-290', 'R-600a', 'R-1270', 'R-717']);

/** That refrigerant is not let out, with the law where it is the law of the site and of this refrigerant. */
export function noVenting({ unit, jurisdiction }: Pick<FormContext, 'unit' | 'jurisdiction'>): SaidCaution[] {
  if (unit && NEVER_BANNED.has(unit.refrigerant)) return [];
  const isOffence = unit !== null && jurisdiction === 'US' && !SOMETIMES_EXEMPT.has(unit.refrigerant);
  return [{ signal: 'warning', key: isOffence ? 'record.caution.noVentingUs' : 'record.caution.noVenting' }];
}
