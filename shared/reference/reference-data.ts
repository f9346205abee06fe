import type { GwpComponent } from './gwp.ts';
import type { FlareJoint } from './joint.ts';
import type { Refrigerant } from './refrigerant.ts';
import type { SaturationTable } from './saturation-table.ts';
import type { Tube } from './tube.ts';

/**
 * The reference tables as the calculations see them. The server builds it once with everything; the browser with one
 * refrigerant's saturation table at a time. Tables are plain data from `data/`, checked by their schemas at start.
 */
export interface ReferenceData {
  findRefrigerant(designation: string): Refrigerant | null;
  refrigerantDesignations(): readonly string[];
  findSaturationTable(designation: string): SaturationTable | null;
  gwpComponents: readonly GwpComponent[];
  tubes: readonly Tube[];
  joints: readonly FlareJoint[];
  /** Version of each table by its name, stored with every result (`{ refrigerants: '2026-12-01', ... }`). */
  versions: Readonly<Record<string, string>>;
}
