import { done, type Outcome, refused } from '../problems/outcome.ts';
import { snap12 } from '../units/round.ts';
import type { GwpComponent, GwpSet } from './gwp.ts';
import type { ReferenceData } from './reference-data.ts';

/** A 100-year GWP with what it rests on. */
export interface Gwp {
  /** Unrounded (snapped to 12 significant digits). */
  gwp: number;
  set: GwpSet;
  /** The set's citation, then the sum that gave the value. */
  source: string;
  /** That sum alone: `R-32 50 % x 675 + R-125 50 % x 3500`; empty where nothing of it is listed. */
  terms: string;
  /** `memory` where a component's value that was used is marked so in the table. */
  status: 'yes' | 'memory';
  /** Components that the set has no value for and that its rule leaves out of the sum. */
  leftOut: readonly string[];
}

const CITATION: Record<GwpSet, string> = {
  AR4: 'IPCC AR4, 100 years',
  AR5: 'IPCC AR5, 100 years',
  AR6: 'IPCC AR6, 100 years',
  'US-AIM': 'US exchange values, 42 U.S.C. 7675(c) (HFC share only)',
  'US-84.64': 'US 40 CFR 84.64(b), (c) (a constituent without a listed value is left out)',
  'EU-2024-573': 'Regulation (EU) 2024/573, Annexes I, II and VI',
};

/** Says beside the source that a component's value is from memory. */
export const citationOf = ({ source, status }: Pick<Gwp, 'source' | 'status'>): string =>
  status === 'memory' ? `${source} (a component value is from memory)` : source;

/** IPCC reports give every component a value; the laws list some substances only, and count a blend by those. */
const LEAVES_OUT: Record<GwpSet, boolean> = {
  AR4: false,
  AR5: false,
  AR6: false,
  'US-AIM': true,
  'US-84.64': true,
  'EU-2024-573': true,
};

/**
 * GWP of a refrigerant in one set: the sum of mass fraction x component GWP over the nominal composition (Regulation
 * (EU) 2024/573 Annex VI; 40 CFR 84.64(b)), never a rounded column.
 *
 * US-AIM counts the listed HFCs alone: a substance that is none (R-1234yf, R-290) is 0 there. An ozone-depleting
 * substance lies outside the US and EU sets: refused as `gwpNotCovered`, since a 0 would be read as
 * "harmless". So is any other single substance without a value. Also refuses `unknownRefrigerant`.
 */
export function gwpOfRefrigerant(
  reference: Pick<ReferenceData, 'findRefrigerant' | 'gwpComponents'>,
  designation: string,
  set: GwpSet,
  paths: { refrigerant: string; gwpSet: string } = { refrigerant: '/refrigerant', gwpSet: '/gwpSet' },
): Outcome<Gwp> {
  const refrigerant = reference.findRefrigerant(designation);
  if (!refrigerant) {
    return refused({
      code: 'unknownRefrigerant',
      path: paths.refrigerant,
      given: designation,
      params: { given: designation },
    });
  }
  const parts = refrigerant.composition ?? [{ component: designation, massPct: 100 }];
  const single = parts.length === 1;
  const notCovered = (component: string) =>
    refused({
      code: 'gwpNotCovered',
      path: paths.gwpSet,
      given: set,
      allowed: setsWithValue(reference.gwpComponents, component),
      params: { refrigerant: designation, component },
    });

  let sum = 0;
  let status: Gwp['status'] = 'yes';
  const terms: string[] = [];
  const leftOut: string[] = [];
  for (const { component, massPct } of parts) {
    const row = reference.gwpComponents.find((candidate) => candidate.component === component);
    if (!row) return notCovered(component);
    const value = row.gwp[set];
    if (value !== null) {
      sum += massPct * value;
      terms.push(single ? `${component} ${value}` : `${component} ${massPct} % x ${value}`);
      if (row.fromMemory.includes(set)) status = 'memory';
      continue;
    }
    const isOzoneDepleting =
      (reference.findRefrigerant(component)?.odp ?? 0) > 0 && reference.findRefrigerant(component)?.type === 'HCFC';
    const countsAsNothing = LEAVES_OUT[set] && !isOzoneDepleting && (!single || set === 'US-AIM');
    if (!countsAsNothing) return notCovered(component);
    leftOut.push(component);
  }
  const gwp = snap12(sum / 100);
  const outside = leftOut.length > 0 ? `; no value in this set: ${leftOut.join(', ')}` : '';
  return done({
    gwp,
    set,
    source: `${CITATION[set]}: ${terms.join(' + ') || 'none of it is a listed HFC, 0'}${outside}`,
    terms: terms.join(' + '),
    status,
    leftOut,
  });
}

function setsWithValue(components: readonly GwpComponent[], component: string): GwpSet[] {
  const row = components.find((candidate) => candidate.component === component);
  return row ? (Object.keys(row.gwp) as GwpSet[]).filter((set) => row.gwp[set] !== null) : [];
}
