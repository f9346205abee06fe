import { co2e } from '../../shared/co2e/co2e.ts';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import type { Unit } from '../../shared/unit-register/unit.schema.ts';

/** Null where the set gives this refrigerant no value. */
export function findGwp(reference: ReferenceData, refrigerant: string, gwpSet: GwpSet): number | null {
  const outcome = co2e({ refrigerant, massG: 1000, gwpSet }, reference);
  return outcome.ok ? outcome.value.gwpValue : null;
}

/** t CO2 equivalent of the full charge, else of a known book. */
export function tonnesOfUnit(reference: ReferenceData, unit: Unit, gwpSet: GwpSet): number | null {
  const massG = unit.fullCharge?.massG ?? (unit.book.known ? unit.book.massG : null);
  const gwp = findGwp(reference, unit.refrigerant, gwpSet);
  return massG === null || gwp === null ? null : (massG * gwp) / 1e6;
}
