import type { DataSource } from 'typeorm';
import type { Session } from '../../shared/session/session.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Parts } from '../http/parts.ts';
import { hashPassword } from '../session/password.ts';
import { insertAccount } from './account.ts';
import { addMembership } from './membership.repository.ts';
import { chainRegisterRecords } from './register-record.ts';

/** A person who has no account yet. */
export interface NewPerson {
  id: string;
  name: string;
  email: string;
  password: string;
  preferences?: Partial<Session['person']['preferences']>;
}

/**
 * Founds a firm with its owner, and chains its first records. How firms come into being at all: the demo data and the
 * tests; nobody can do it over HTTP.
 */
export async function foundFirm(
  parts: Pick<Parts, 'now' | 'newId'> & { dataSource: DataSource },
  firm: Session['firm'],
  owner: NewPerson,
): Promise<void> {
  const passwordHash = await hashPassword(owner.password);
  await inFirm(parts.dataSource, { firmId: firm.id, personId: owner.id, siteIds: null }, async (manager) => {
    const { id, name, jurisdiction, timeZone, locale, gwpSet } = firm;
    await manager.query('SELECT create_firm($1, $2, $3, $4, $5, $6)', [
      id,
      name,
      jurisdiction,
      timeZone,
      locale,
      gwpSet,
    ]);
    await chainRegisterRecords(manager, [
      {
        type: 'register',
        id: parts.newId(),
        recordedAt: parts.now().toISOString(),
        recordedBy: owner.id,
        noun: 'firm',
        subjectId: id,
        version: 1,
        before: null,
        after: { name, jurisdiction, timeZone, locale, gwpSet },
      },
    ]);
    await insertAccount(parts, manager, { ...owner, passwordHash });
    await addMembership(parts, manager, {
      firmId: id,
      personId: owner.id,
      recordedBy: owner.id,
      roles: ['owner'],
      siteIds: null,
      active: true,
      van: null,
    });
  });
}

/** Adds one more person to a firm without the round by mail: for demo data and tests. */
export async function addColleague(
  parts: Pick<Parts, 'now' | 'newId'> & { dataSource: DataSource },
  firmId: string,
  person: NewPerson,
  membership: Pick<Parameters<typeof addMembership>[2], 'roles'> & { siteIds?: string[] | null; van?: string | null },
): Promise<void> {
  const passwordHash = await hashPassword(person.password);
  await inFirm(parts.dataSource, { firmId, personId: person.id, siteIds: null }, async (manager) => {
    await insertAccount(parts, manager, { ...person, passwordHash });
    await addMembership(parts, manager, {
      firmId,
      personId: person.id,
      recordedBy: person.id,
      roles: membership.roles,
      siteIds: membership.siteIds ?? null,
      active: true,
      van: membership.van ?? null,
    });
  });
}
