import { buildReferenceData } from '../../shared/reference/build-reference-data.ts';
import { checkTables } from '../../shared/reference/check-tables.ts';
import { everyTable } from '../../shared/reference/every-table.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';

/**
 * Every reference table, checked; the server calls it once at start. Throws `BadTable`, which names file, row and
 * column, so that a program with a wrong table does not start. The tables are imported, not read from disk: they are
 * inside the built server and cannot be missing beside it.
 */
export function loadReferenceData(): ReferenceData {
  return buildReferenceData(checkTables(everyTable));
}
