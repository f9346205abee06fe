import type { EntityManager } from 'typeorm';
import type { Parts } from '../http/parts.ts';
import { PersonEntity } from './person.entity.ts';

/** A new account. The scope has to be that person's: nobody else may write it. */
export async function insertAccount(
  parts: Pick<Parts, 'now'>,
  manager: EntityManager,
  account: { id: string; name: string; email: string; passwordHash: string; preferences?: PersonEntity['preferences'] },
): Promise<void> {
  const { id, name, email, preferences = {} } = account;
  await manager.getRepository(PersonEntity).insert({ id, name, email, preferences });
  await manager.query('INSERT INTO person_secret (person_id, password_hash, changed_at) VALUES ($1, $2, $3)', [
    id,
    account.passwordHash,
    parts.now(),
  ]);
}

/** Replaces the password; every session that began before is over with it. */
export async function replacePassword(
  parts: Pick<Parts, 'now'>,
  manager: EntityManager,
  personId: string,
  passwordHash: string,
): Promise<void> {
  await manager.query('UPDATE person_secret SET password_hash = $2, changed_at = $3 WHERE person_id = $1', [
    personId,
    passwordHash,
    parts.now(),
  ]);
  await manager.query('DELETE FROM session WHERE person_id = $1', [personId]);
}
