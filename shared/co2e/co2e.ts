import { asReturned } from '../calculations/decimals.ts';
import { done, type Outcome } from '../problems/outcome.ts';
import { citationOf, gwpOfRefrigerant } from '../reference/gwp-of-blend.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import type { Co2eRequest, Co2eResponse } from './co2e.schema.ts';

/** t CO2e of a mass in g at a GWP; unrounded. */
export const tonnesCo2e = (massG: number, gwp: number) => (massG * gwp) / 1e6;

/** CO2 equivalent of a mass by a named GWP set; rounded once, at the end. Refuses as `gwpOfRefrigerant` does. */
export function co2e(request: Co2eRequest, reference: ReferenceData): Outcome<Co2eResponse> {
  const found = gwpOfRefrigerant(reference, request.refrigerant, request.gwpSet);
  if (!found.ok) return found;
  const { gwp } = found.value;
  return done({
    co2eT: asReturned(tonnesCo2e(request.massG, gwp), 't'),
    gwpValue: asReturned(gwp, 'GWP'),
    source: citationOf(found.value),
  });
}
