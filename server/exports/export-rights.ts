import type { CreateExportRequest } from '../../shared/exports/export.schema.ts';
import { type Actor, mayActor } from '../http/actor.ts';

/** What a reader who sees only some sites would find empty or half. */
const FOR_READERS: ReadonlySet<string> = new Set([
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
const FOR_TECHNICIANS: ReadonlySet<string> = new Set(['unitLog', 'jobRecord', 'chargeLabel', 'cylinderStatement']);

/**
 * Who makes exports takes out everything; a reader what a reader sees; a technician the papers of the work and their own
 * entries. Row-level security holds besides. Asked at the request, when the job runs, and at each download.
 */
export function mayExport(
  actor: Pick<Actor, 'roles' | 'tokenScopes' | 'personId'>,
  request: Pick<CreateExportRequest, 'what' | 'filters'>,
): boolean {
  if (mayActor(actor as Actor, 'exports:make')) return true;
  // Whoever also works for the firm sees all of it, so that a reader's rights would let all of it out.
  if (actor.roles.every((role) => role === 'reader')) return FOR_READERS.has(request.what);
  if (request.what === 'entries') return (request.filters as { personId?: string }).personId === actor.personId;
  return actor.roles.includes('technician') && FOR_TECHNICIANS.has(request.what);
}
