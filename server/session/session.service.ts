import { PERMISSIONS, type Permission } from '../../shared/permissions/roles.ts';
import { defaultPreferences } from '../../shared/session/default-preferences.ts';
import type { Session } from '../../shared/session/session.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import { type Actor, mayActor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfRefusals } from '../http/problem.ts';
import {
  firmIdsOf,
  noteSignIn,
  type PersonRow,
  requireFirm,
  requireMembership,
  requirePerson,
} from './session.repository.ts';
import type { SessionStore } from './session-store.ts';

export type Who = Pick<Actor, 'personId' | 'firmId' | 'tokenScopes'>;

/** Everything that a screen has to know about who is signed in, as it stands now. */
export async function describeSession(parts: Parts, who: Who): Promise<Session> {
  const { personId, firmId } = who;
  const scope = { firmId, personId, siteIds: null };
  const { person, firm, roles, siteIds } = await inFirm(parts.dataSource, scope, async (manager) => ({
    person: await requirePerson(manager, personId),
    firm: await requireFirm(manager, firmId),
    ...(await requireMembership(manager, firmId, personId)),
  }));
  const firms = [{ id: firmId, name: firm.name }];
  const otherIds = (await firmIdsOf(parts, personId)).filter((id) => id !== firmId);
  for (const id of otherIds) firms.push({ id, name: await firmName(parts, personId, id) });
  firms.sort((one, other) => one.name.localeCompare(other.name, 'en'));

  const rights = { ...who, roles, siteIds: null, locale: firm.locale };
  const permissions = (Object.keys(PERMISSIONS) as Permission[]).filter((permission) => mayActor(rights, permission));
  const onlyReads = roles.every((role) => role === 'reader');
  return {
    person: presentMe(person, firm),
    firm,
    firms,
    roles,
    permissions,
    siteIds: onlyReads ? siteIds : null,
  };
}

export function presentMe(
  person: PersonRow,
  firm: Pick<Session['firm'], 'jurisdiction' | 'locale'>,
): Session['person'] {
  const { id, name, email, version } = person;
  return { id, name, email, version, preferences: { ...defaultPreferences(firm), ...person.preferences } };
}

function firmName(parts: Parts, personId: string, firmId: string): Promise<string> {
  const scope = { firmId, personId, siteIds: null };
  return inFirm(parts.dataSource, scope, async (manager) => (await requireFirm(manager, firmId)).name);
}

/**
 * Lets a session work for another of the person's firms.
 * @throws Problem 422 `notAMember` at `/firmId`, also for a firm that does not exist
 */
export async function chooseFirm(
  parts: Parts,
  store: SessionStore,
  { sid, personId, firmId }: { sid: string; personId: string; firmId: string },
): Promise<Session> {
  const firmIds = await firmIdsOf(parts, personId);
  if (!firmIds.includes(firmId)) throw problemOfRefusals([{ code: 'notAMember', path: '/firmId' }]);
  await store.chooseFirm(sid, firmId);
  await noteSignIn(parts, personId, firmId);
  return describeSession(parts, { personId, firmId, tokenScopes: null });
}
