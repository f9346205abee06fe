import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { Person, updatePersonRequest } from '../../shared/people/people.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { changeMembership, lockMembership } from './membership.repository.ts';
import { findPerson, findUnknownSites, hasOtherOwner, listPeople, type PeopleQuery } from './people.repository.ts';
import { lockFirmHead } from './register-record.ts';

export function readPeople(parts: Parts, actor: Actor, query: PeopleQuery) {
  return inFirm(parts.dataSource, actor, (manager) => listPeople(manager, query));
}

/** @throws Problem 404, also for somebody of another firm */
export function readPerson(parts: Parts, actor: Actor, personId: string): Promise<Person> {
  return inFirm(parts.dataSource, actor, (manager) => requirePerson(manager, personId));
}

async function requirePerson(manager: EntityManager, personId: string): Promise<Person> {
  const person = await findPerson(manager, personId);
  if (!person) throw new Problem('notFound');
  return person;
}

/**
 * Changes what somebody may do in the firm. It acts at that person's next request, signed in or not.
 * @throws Problem 404; 412 when changed meanwhile; 422 `lastOwner`, `notKnownHere`
 */
export function updatePerson(
  parts: Parts,
  actor: Actor,
  personId: string,
  version: number,
  change: z.output<typeof updatePersonRequest>,
): Promise<Person> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockFirmHead(manager); // of two owners who take each other's role, one is too late
    const held = await lockMembership(manager, actor.firmId, personId);
    if (!held) throw new Problem('notFound');
    if (held.version !== version) throw new Problem('stale', { params: { version } });
    await requireKnownSites(manager, change.siteIds ?? []);

    const after = { roles: change.roles ?? held.roles, active: change.active ?? held.active };
    const staysOwner = after.active && after.roles.includes('owner');
    if (!staysOwner && !(await hasOtherOwner(manager, personId))) {
      throw problemOfRefusals([{ code: 'lastOwner', path: after.active ? '/roles' : '/active' }]);
    }
    await changeMembership(parts, manager, held, withoutAbsent(change), actor.personId);
    return requirePerson(manager, personId);
  });
}

/** @throws Problem 422 `notKnownHere` at each site that the firm does not have */
export async function requireKnownSites(manager: EntityManager, siteIds: readonly string[]): Promise<void> {
  const unknown = await findUnknownSites(manager, siteIds);
  if (unknown.length === 0) return;
  throw problemOfRefusals(
    unknown.map((id) => ({ code: 'notKnownHere', path: `/siteIds/${siteIds.indexOf(id)}`, given: id })),
  );
}

function withoutAbsent<T extends object>(change: T): { [K in keyof T]?: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined)) as never;
}
