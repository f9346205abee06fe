import type { EntityManager } from 'typeorm';
import type { Role } from '../../shared/permissions/roles.ts';
import type { Parts } from '../http/parts.ts';
import { MembershipEntity } from './membership.entity.ts';
import { chainRegisterRecords } from './register-record.ts';

export interface MembershipFacts {
  roles: Role[];
  siteIds: string[] | null;
  active: boolean;
  van: string | null;
}

const factsOf = ({ roles, siteIds, active, van }: MembershipFacts): MembershipFacts => ({
  roles,
  siteIds,
  active,
  van,
});

/** Takes a person into the firm in scope, and chains the record of it. `recordedBy` is the person in scope. */
export async function addMembership(
  parts: Pick<Parts, 'now' | 'newId'>,
  manager: EntityManager,
  membership: { firmId: string; personId: string; recordedBy: string } & MembershipFacts,
): Promise<void> {
  const { firmId, personId, recordedBy } = membership;
  const facts = factsOf(membership);
  await manager.getRepository(MembershipEntity).insert({ firmId, personId, ...facts });
  await chainRegisterRecords(manager, [
    {
      type: 'register',
      id: parts.newId(),
      recordedAt: parts.now().toISOString(),
      recordedBy,
      noun: 'membership',
      subjectId: personId,
      version: 1,
      before: null,
      after: { ...facts },
    },
  ]);
}

/** The row, locked until the transaction ends. */
export function lockMembership(
  manager: EntityManager,
  firmId: string,
  personId: string,
): Promise<MembershipEntity | null> {
  return manager
    .getRepository(MembershipEntity)
    .findOne({ where: { firmId, personId }, lock: { mode: 'pessimistic_write' } });
}

/** Changes what a person may do in the firm, and chains what stood before and after. Returns the new version. */
export async function changeMembership(
  parts: Pick<Parts, 'now' | 'newId'>,
  manager: EntityManager,
  held: MembershipEntity,
  change: Partial<MembershipFacts>,
  recordedBy: string,
): Promise<number> {
  const { firmId, personId } = held;
  const before = factsOf(held);
  const after = { ...before, ...change };
  await manager.getRepository(MembershipEntity).update({ firmId, personId }, after);
  const version = held.version + 1;
  await chainRegisterRecords(manager, [
    {
      type: 'register',
      id: parts.newId(),
      recordedAt: parts.now().toISOString(),
      recordedBy,
      noun: 'membership',
      subjectId: personId,
      version,
      before: { ...before },
      after: { ...after },
    },
  ]);
  return version;
}
