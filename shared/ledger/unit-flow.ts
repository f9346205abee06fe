import type { JudgedGroup, JudgedMass, JudgedStatement } from './judged-group.ts';
import { type MassByRefrigerant, plus, plusAll } from './mass-by-refrigerant.ts';
import { ASSUMED_SCALE, netVarianceG2 } from './scale.ts';

/** What one group does to a unit: masses by refrigerant, all above zero, and the variances of what was weighed. */
export interface UnitFlow {
  /** From `factory` or `opening`: how a book begins. */
  readonly starts: MassByRefrigerant;
  /** Put in by anyone, of anyone's refrigerant. */
  readonly additions: MassByRefrigerant;
  readonly removals: MassByRefrigerant;
  readonly additionsVarianceG2: number;
  readonly removalsVarianceG2: number;
  readonly statement: JudgedStatement | null;
}

const varianceOf = (mass: JudgedMass): number =>
  mass.howKnown === 'weighed' ? netVarianceG2(mass.scale ?? ASSUMED_SCALE, mass.massMicrograms) : 0;

export function unitFlowOf(group: JudgedGroup, unitId: string): UnitFlow {
  let starts: MassByRefrigerant = {};
  let additions: MassByRefrigerant = {};
  let removals: MassByRefrigerant = {};
  let additionsVarianceG2 = 0;
  let removalsVarianceG2 = 0;
  for (const mass of group.masses) {
    const { from, to, refrigerant, massMicrograms } = mass;
    const goesIn = to.place === 'unit' && to.id === unitId;
    const goesOut = from.place === 'unit' && from.id === unitId;
    if (goesIn && (from.place === 'factory' || from.place === 'opening')) {
      starts = plus(starts, refrigerant, massMicrograms);
    } else if (goesIn) {
      additions = plus(additions, refrigerant, massMicrograms);
      additionsVarianceG2 += varianceOf(mass);
    } else if (goesOut) {
      removals = plus(removals, refrigerant, massMicrograms);
      removalsVarianceG2 += varianceOf(mass);
    }
  }
  const statement = group.statements.findLast(({ id }) => id === unitId) ?? null;
  return { starts, additions, removals, additionsVarianceG2, removalsVarianceG2, statement };
}

export const negated = (masses: MassByRefrigerant): MassByRefrigerant =>
  Object.fromEntries(Object.entries(masses).map(([refrigerant, mass]) => [refrigerant, -mass]));

/** Additions less what the group draws off. */
export const netAdded = (flow: UnitFlow): MassByRefrigerant => plusAll(flow.additions, negated(flow.removals));
