import type { Cylinder } from '../cylinders/cylinder.schema.ts';
import { gramsOfMicrograms, microgramsOfGrams } from '../units/mass.ts';
import { cylinderLimit, pressureRatingHolds } from './cylinder-limits.ts';
import type { FillJurisdiction } from './filling-table.ts';

export type Fillable = Pick<
  Cylinder,
  'kind' | 'refrigerant' | 'byRefrigerant' | 'stampedLimitG' | 'waterCapacityG' | 'servicePressureKPaGauge'
>;

/**
 * What a cylinder would be once these refrigerants are in it, with what it holds: its limit (null: none, or not known),
 * and whether it bears each of those that come in (null: not known). By what goes in, never by what the cylinder is
 * meant for.
 */
export function judgeFill(
  cylinder: Fillable,
  incoming: readonly string[],
  jurisdiction: FillJurisdiction | null,
): { limitG: number | null; bears: boolean | null } {
  const held = cylinder.byRefrigerant.filter(({ massG }) => massG > 0).map(({ refrigerant }) => refrigerant);
  const micrograms = (massG: number | null) => (massG === null ? null : microgramsOfGrams(massG));
  const limit = cylinderLimit(
    {
      kind: cylinder.kind,
      refrigerant: cylinder.refrigerant,
      stampedLimitMicrograms: micrograms(cylinder.stampedLimitG),
      waterCapacityMicrograms: micrograms(cylinder.waterCapacityG),
    },
    [...new Set([...held, ...incoming])],
  );
  return {
    limitG: limit === null ? null : gramsOfMicrograms(limit),
    bears: pressureRatingHolds(cylinder.servicePressureKPaGauge, incoming, jurisdiction),
  };
}
