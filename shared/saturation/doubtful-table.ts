import type { UnsaidCaution } from '../calculations/fields.ts';
import type { SaturationTable } from '../reference/saturation-table.ts';

/** A table of low confidence (R-438A's dew side, R-466A) says so wherever its figures are shown. */
export function cautionsOfTable(table: SaturationTable): UnsaidCaution[] {
  if (table.confidence !== 'low') return [];
  const params = { refrigerant: table.designation, note: table.note ?? '' };
  return [{ code: 'saturationDoubtful', signal: 'notice', params }];
}
