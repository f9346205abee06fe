import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { createToolRequest, Tool, ToolListQuery, updateToolRequest } from '../../shared/tools/tools.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { changeRow, makeOnce, taken } from '../registers/register-rows.ts';
import { scaleOf, type ToolRow, toolsRepository } from './tool.repository.ts';

const REFERENCES = { tool_held_by_fkey: '/heldBy' };
const factsOf = (row: Omit<ToolRow, 'firmId' | 'id' | 'version'>) => ({
  kind: row.kind,
  name: row.name,
  serial: row.serial,
  scale: scaleOf(row),
  madeOn: row.madeOn,
  lastCheckedOn: row.lastCheckedOn,
  heldBy: row.heldBy,
});

export function listTools(parts: Parts, actor: Actor, query: ToolListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => toolsRepository(manager).list(query));
}

export function getTool(parts: Parts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createTool(parts: Parts, actor: Actor, request: z.output<typeof createToolRequest>) {
  const { id, kind, scale = null } = request;
  refuseScale(kind, scale);
  const row = {
    firmId: actor.firmId,
    id,
    kind,
    name: request.name,
    serial: request.serial ?? null,
    ...columnsOf(scale),
    madeOn: request.madeOn ?? null,
    lastCheckedOn: request.lastCheckedOn ?? null,
    heldBy: request.heldBy ?? null,
  };
  return makeOnce(
    parts,
    actor,
    { noun: 'tool', subjectId: id, facts: factsOf(row) },
    REFERENCES,
    (manager) => toolsRepository(manager).insert(row),
    (manager) => requireView(manager, id),
  );
}

/** A new accuracy holds for readings from now on; those taken keep the one of their day. */
export function updateTool(
  parts: Parts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateToolRequest>,
) {
  return changeRow<ToolRow, Tool>(
    parts,
    actor,
    {
      noun: 'tool',
      id,
      version,
      references: REFERENCES,
      find: (manager) => toolsRepository(manager).find(id),
      factsOf,
      changed: (row) => {
        const scale = taken(request.scale, scaleOf(row));
        refuseScale(row.kind, scale);
        return {
          ...row,
          name: taken(request.name, row.name),
          serial: taken(request.serial, row.serial),
          ...columnsOf(scale),
          madeOn: taken(request.madeOn, row.madeOn),
          lastCheckedOn: taken(request.lastCheckedOn, row.lastCheckedOn),
          heldBy: taken(request.heldBy, row.heldBy),
        };
      },
      update: (manager, row) => toolsRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

/** A scale without its accuracy could not be judged by; any other tool has none. */
function refuseScale(kind: Tool['kind'], scale: Tool['scale']): void {
  if (kind === 'scale' && scale === null) throw problemOfRefusals([{ code: 'required', path: '/scale' }]);
  if (kind !== 'scale' && scale !== null)
    throw problemOfRefusals([{ code: 'notForThisKind', path: '/scale', given: kind }]);
}

const columnsOf = (scale: Tool['scale']) => ({
  resolutionG: scale?.resolutionG ?? null,
  repeatabilityG: scale?.repeatabilityG ?? null,
  spanErrorRelative: scale?.spanErrorRelative ?? null,
  offsetG: scale?.offsetG ?? null,
});

async function requireView(manager: EntityManager, id: string): Promise<Tool> {
  const found = await toolsRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return found;
}
