import { asReturned } from '../../shared/calculations/decimals.ts';
import { tonnesCo2e } from '../../shared/co2e/co2e.ts';
import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import { gwpOfRefrigerant } from '../../shared/reference/gwp-of-blend.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import type { Unit } from '../../shared/unit-register/unit.schema.ts';

/** Null where the set gives this refrigerant no value. `isFromMemory`: a component's value that it rests on is still to be confirmed. */
export function findGwp(
  reference: ReferenceData,
  refrigerant: string,
  gwpSet: GwpSet,
): { value: number; isFromMemory: boolean } | null {
  const found = gwpOfRefrigerant(reference, refrigerant, gwpSet);
  if (!found.ok) return null;
  return { value: asReturned(found.value.gwp, 'GWP'), isFromMemory: found.value.status === 'memory' };
}

/** t CO2 equivalent of the full charge, else of a known book. */
export function tonnesOfUnit(reference: ReferenceData, unit: Unit, gwpSet: GwpSet): number | null {
  const massG = unit.fullCharge?.massG ?? (unit.book.known ? unit.book.massG : null);
  const gwp = findGwp(reference, unit.refrigerant, gwpSet)?.value ?? null;
  return massG === null || gwp === null ? null : tonnesCo2e(massG, gwp);
}

/** Of the types that Regulation (EU) 2024/573, Annexes I and II, lists; fall under (EU) 2024/590. */
const FLUORINATED: ReadonlySet<string> = new Set(['HFC', 'HFO']);

/** Whether it is, or a blend of it holds, a fluorinated greenhouse gas. */
export function isFluorinatedGas(reference: ReferenceData, refrigerant: string): boolean {
  const found = reference.findRefrigerant(refrigerant);
  const parts = found?.composition?.map(({ component }) => component) ?? [refrigerant];
  return parts.some((part) => FLUORINATED.has(reference.findRefrigerant(part)?.type ?? 'HFC'));
}

/**
 * What the machine came with: of a replaced machine that of the new one, and nothing where another refrigerant was in it
 * when it left the factory. Null where the log does not know.
 * @param entries of the unit, in order of time, without what was reversed
 */
export function factoryChargeG(entries: readonly EntryRow[], unit: Unit): number | null {
  const fromFactory = entries.filter(({ from, to }) => from.place === 'factory' && to.id === unit.id);
  const last = fromFactory.at(-1);
  if (!last) return null;
  if (last.refrigerant !== unit.refrigerant) return 0;
  return fromFactory.filter(({ groupId }) => groupId === last.groupId).reduce((sum, { massG }) => sum + massG, 0);
}
