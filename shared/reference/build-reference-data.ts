import type { CheckedTables } from './check-tables.ts';
import type { ReferenceData } from './reference-data.ts';

/** Checked tables as the calculations see them. In the browser `saturation` may hold one refrigerant only. */
export function buildReferenceData(tables: CheckedTables): ReferenceData {
  const refrigerants = new Map(tables.refrigerants.rows.map((row) => [row.designation, row]));
  const saturation = new Map(tables.saturation.map((table) => [table.designation, table]));
  const designations = [...refrigerants.keys()];
  const versions: Record<string, string> = {
    refrigerants: tables.refrigerants.version,
    gwp: tables.gwp.version,
    tubes: tables.tubes.version,
    joints: tables.joints.version,
  };
  for (const table of tables.saturation) versions[`saturation/${table.designation}`] = table.version;
  return {
    findRefrigerant: (designation) => refrigerants.get(designation) ?? null,
    refrigerantDesignations: () => designations,
    findSaturationTable: (designation) => saturation.get(designation) ?? null,
    gwpComponents: tables.gwp.rows,
    tubes: tables.tubes.rows,
    joints: tables.joints.rows,
    versions,
  };
}
