import type { CreateExportRequest } from '../../shared/exports/export.schema.ts';
import { isExportOfRoles } from '../../shared/permissions/export-rights.ts';
import { type Actor, mayActor } from '../http/actor.ts';

/**
 * Who makes exports takes out everything; a reader what a reader sees; a technician the papers of the work and their own
 * entries. Row-level security holds besides. Asked at the request, when the job runs, and at each download.
 */
export function mayExport(
  actor: Pick<Actor, 'roles' | 'tokenScopes' | 'personId'>,
  request: Pick<CreateExportRequest, 'what' | 'filters'>,
): boolean {
  if (mayActor(actor as Actor, 'exports:make')) return true;
  if (isExportOfRoles(actor.roles, request.what)) return true;
  const isReader = actor.roles.every((role) => role === 'reader');
  return !isReader && request.what === 'entries' && isOfOwn(actor, request.filters);
}

const isOfOwn = ({ personId }: Pick<Actor, 'personId'>, filters: CreateExportRequest['filters']): boolean =>
  (filters as { personId?: string }).personId === personId;
