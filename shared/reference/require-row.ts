import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { ReferenceData } from './reference-data.ts';
import type { Refrigerant } from './refrigerant.ts';
import type { SaturationTable } from './saturation-table.ts';

/** The refrigerant's row, or `unknownRefrigerant`. */
export function requireRefrigerant(
  reference: Pick<ReferenceData, 'findRefrigerant'>,
  designation: string,
  path = '/refrigerant',
): Outcome<Refrigerant> {
  const row = reference.findRefrigerant(designation);
  return row
    ? done(row)
    : refused({ code: 'unknownRefrigerant', path, given: designation, params: { given: designation } });
}

/** The refrigerant's saturation table, or `unknownRefrigerant`, or `noSaturationTable` (the browser loads one at a time). */
export function requireSaturationTable(
  reference: Pick<ReferenceData, 'findRefrigerant' | 'findSaturationTable'>,
  designation: string,
  path = '/refrigerant',
): Outcome<SaturationTable> {
  const row = requireRefrigerant(reference, designation, path);
  if (!row.ok) return row;
  const table = reference.findSaturationTable(designation);
  return table
    ? done(table)
    : refused({ code: 'noSaturationTable', path, given: designation, params: { given: designation } });
}
