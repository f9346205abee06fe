import { type EntityManager, IsNull } from 'typeorm';
import type { PersonalToken } from '../../shared/people/people.schema.ts';
import { PersonalTokenEntity } from './personal-token.entity.ts';

export type TokenRow = PersonalTokenEntity;

export function presentToken(row: TokenRow): PersonalToken {
  const { id, name, scopes, createdAt, expiresOn, lastUsedAt } = row;
  const at = { createdAt: createdAt.toISOString(), lastUsedAt: lastUsedAt?.toISOString() ?? null };
  return { id, name, scopes, expiresOn, ...at };
}

/** The person's own in the firm in scope, newest first; the revoked ones left out. */
export function listTokens(manager: EntityManager, firmId: string, personId: string): Promise<TokenRow[]> {
  return manager
    .getRepository(PersonalTokenEntity)
    .find({ where: { firmId, personId, revokedAt: IsNull() }, order: { createdAt: 'DESC', id: 'DESC' } });
}

export function findToken(manager: EntityManager, firmId: string, id: string): Promise<TokenRow | null> {
  return manager.getRepository(PersonalTokenEntity).findOneBy({ firmId, id });
}

export async function insertToken(
  manager: EntityManager,
  token: Omit<TokenRow, 'lastUsedAt' | 'revokedAt'>,
): Promise<void> {
  await manager.getRepository(PersonalTokenEntity).insert(token);
}

/** True when there was one to revoke. */
export async function revokeToken(manager: EntityManager, firmId: string, id: string, now: Date): Promise<boolean> {
  const revoked = await manager
    .getRepository(PersonalTokenEntity)
    .update({ firmId, id, revokedAt: IsNull() }, { revokedAt: now });
  return revoked.affected === 1;
}
