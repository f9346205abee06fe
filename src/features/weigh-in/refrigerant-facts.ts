import refrigerants from '../../../data/refrigerants.json';
import { gramsPerMetre } from '../../../shared/line-content/line-content.ts';
import type { ReferenceData } from '../../../shared/reference/reference-data.ts';
import type { Refrigerant } from '../../../shared/reference/refrigerant.ts';
import { liquidDensityKgM3, vapourDensityKgM3 } from '../../../shared/reference/saturation.ts';
import type { SaturationTable } from '../../../shared/reference/saturation-table.ts';

/** One file for each refrigerant; a phone loads the one that it works with. Tests check every table by its schema. */
const SATURATION = import.meta.glob<SaturationTable>('../../../data/saturation/*.json', { import: 'default' });

const rows = refrigerants.rows as unknown as readonly Refrigerant[];

export const findRefrigerant: ReferenceData['findRefrigerant'] = (designation) =>
  rows.find((row) => row.designation === designation) ?? null;

/** What the room's rules ask of the tables: classes and limits, no saturation. */
export const referenceData: ReferenceData = {
  findRefrigerant,
  refrigerantDesignations: () => rows.map((row) => row.designation),
  findSaturationTable: () => null,
  gwpComponents: [],
  tubes: [],
  joints: [],
  versions: {},
};

export type Flammability = 'none' | 'flammable' | 'highlyFlammable';

export function hazardsOf(designation: string): { flammability: Flammability; blend: boolean; safetyClass: string } {
  const row = findRefrigerant(designation);
  const safetyClass = row?.safetyClass ?? '';
  const flammability = safetyClass.endsWith('3') ? 'highlyFlammable' : /2L?$/.test(safetyClass) ? 'flammable' : 'none';
  return { flammability, blend: row?.composition != null, safetyClass };
}

export type Phase = 'liquid' | 'vapour';

/** The saturation table of one refrigerant, or null where there is none. */
export async function loadSaturation(designation: string): Promise<SaturationTable | null> {
  const load = SATURATION[`../../../data/saturation/${designation}.json`];
  return load ? await load() : null;
}

/**
 * What a hose holds, in grams, full of saturated liquid or vapour at the temperature of the day; null outside the table.
 * The bore, not the outside diameter: charging hoses have thick walls.
 */
export function hoseContentG(
  table: SaturationTable,
  hose: { phase: Phase; tempC: number; boreMm: number; lengthM: number },
): number | null {
  const densityAt = hose.phase === 'liquid' ? liquidDensityKgM3 : vapourDensityKgM3;
  const density = densityAt(table, hose.tempC, { path: '/tempC' });
  if (!density.ok) return null;
  return gramsPerMetre(hose.boreMm, density.value) * hose.lengthM;
}
