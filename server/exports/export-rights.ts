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
  'unitLog',
  'jobRecord',
  'chargeLabel',
]);
/** Papers of the work in hand. */
const FOR_TECHNICIANS: ReadonlySet<string> = new Set(['unitLog', 'jobRecord', 'chargeLabel', 'cylinderStatement']);

/**
 * Who makes exports takes out everything; a reader what a reader sees; a technician the papers of the work and their own
 * entries. Row-level security holds besides. Asked at the request, and again when the job runs.
 */
export function mayExport(
  actor: Pick<Actor, 'roles' | 'tokenScopes' | 'personId'>,
  request: Pick<CreateExportRequest, 'what' | 'filters'>,
): boolean {
  if (mayActor(actor as Actor, 'exports:make')) return true;
  if (actor.roles.includes('reader') && FOR_READERS.has(request.what)) return true;
  if (!actor.roles.includes('technician')) return false;
  if (FOR_TECHNICIANS.has(request.what)) return true;
  return request.what === 'entries' && (request.filters as { personId?: string }).personId === actor.personId;
}
