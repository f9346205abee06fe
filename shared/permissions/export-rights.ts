import type { ExportWhat } from '../exports/export.schema.ts';
import type { Role } from './roles.ts';

/** What a reader, who sees some sites only, sees whole of these. */
const FOR_READERS: ReadonlySet<ExportWhat> = new Set<ExportWhat>([
  'entries',
  'units',
  'readings',
  'flags',
  'customers',
  'sites',
  'jobs',
  'chargeSheets',
  'unitLog',
  'jobRecord',
  'chargeLabel',
]);
/** Papers of the work in hand. */
const FOR_TECHNICIANS: ReadonlySet<ExportWhat> = new Set<ExportWhat>([
  'unitLog',
  'jobRecord',
  'chargeLabel',
  'cylinderStatement',
]);

/** Whether a role lets somebody take this out who may not make every export: a reader what a reader sees, a technician the papers. */
export function isExportOfRoles(roles: readonly Role[], what: ExportWhat): boolean {
  // Whoever also works for the firm sees all of it, so that a reader's rights would let all of it out.
  if (roles.every((role) => role === 'reader')) return FOR_READERS.has(what);
  return roles.includes('technician') && FOR_TECHNICIANS.has(what);
}
