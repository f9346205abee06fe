import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type {
  createPartyRequest,
  Party,
  PartyListQuery,
  updatePartyRequest,
} from '../../shared/parties/parties.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { changeRow, makeOnce, taken } from '../registers/register-rows.ts';
import { type PartyRow, partiesRepository, presentParty } from './party.repository.ts';

/** Another contractor is often one person under their own name. */
const PERSONAL = ['name', 'note'];
const factsOf = ({ kind, name, note }: Pick<Party, 'kind' | 'name' | 'note'>) => ({ kind, name, note });

export function listParties(parts: Parts, actor: Actor, query: PartyListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => partiesRepository(manager).list(query));
}

export function getParty(parts: Parts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createParty(parts: Parts, actor: Actor, request: z.output<typeof createPartyRequest>) {
  const { id, kind, name, note = null } = request;
  return makeOnce(
    parts,
    actor,
    { noun: 'party', subjectId: id, facts: factsOf({ kind, name, note }), personal: PERSONAL },
    {},
    (manager) => partiesRepository(manager).insert({ firmId: actor.firmId, id, kind, name, note }),
    (manager) => requireView(manager, id),
  );
}

export function updateParty(
  parts: Parts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updatePartyRequest>,
) {
  return changeRow<PartyRow, Party>(
    parts,
    actor,
    {
      noun: 'party',
      id,
      version,
      personal: PERSONAL,
      references: {},
      find: (manager) => partiesRepository(manager).find(id),
      factsOf,
      changed: (row) => ({ ...row, name: taken(request.name, row.name), note: taken(request.note, row.note) }),
      update: (manager, row) => partiesRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

async function requireView(manager: EntityManager, id: string): Promise<Party> {
  const found = await partiesRepository(manager).find(id);
  if (!found) throw new Problem('notFound');
  return presentParty(found);
}
