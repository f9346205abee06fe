import type { Outcome } from '../problems/outcome.ts';
import { buildReferenceData } from './build-reference-data.ts';
import { checkTables } from './check-tables.ts';
import { everyTable } from './every-table.ts';

/** Every real table, for tests of the calculations. */
export const referenceData = buildReferenceData(checkTables(everyTable));

/** The value of an outcome that a test expects to be one; else the refusals as the test's error. */
export function requireValue<T>(outcome: Outcome<T>): T {
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.refusals));
  return outcome.value;
}
