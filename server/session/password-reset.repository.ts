import { type EntityManager, IsNull, MoreThan } from 'typeorm';
import { defaultPreferences } from '../../shared/session/default-preferences.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import type { Parts } from '../http/parts.ts';
import { PasswordResetEntity } from './password-reset.entity.ts';
import { poolOf } from './pool.ts';
import { requirePerson } from './session.repository.ts';

export async function findPersonIdOfReset(parts: Parts, tokenHash: Buffer): Promise<string | null> {
  const { rows } = await poolOf(parts.dataSource).query<{ person_id: string }>(
    'SELECT person_id FROM password_reset_by_token_hash($1)',
    [tokenHash],
  );
  return rows[0]?.person_id ?? null;
}

/** Keeps a new link; the earlier ones that were not used work no longer. */
export async function insertPasswordReset(
  manager: EntityManager,
  reset: Omit<PasswordResetEntity, 'usedAt'>,
): Promise<void> {
  const rows = manager.getRepository(PasswordResetEntity);
  const { personId, requestedAt } = reset;
  await rows.update({ personId, usedAt: IsNull(), expiresAt: MoreThan(requestedAt) }, { expiresAt: requestedAt });
  await rows.insert(reset);
}

/** True for the one caller that uses the link while it is valid. */
export async function usePasswordReset(manager: EntityManager, tokenHash: Buffer, now: Date): Promise<boolean> {
  const used = await manager
    .getRepository(PasswordResetEntity)
    .update({ tokenHash, usedAt: IsNull(), expiresAt: MoreThan(now) }, { usedAt: now });
  return used.affected === 1;
}

/** Name, address and language for a mail; the scope is the person's, in which no firm's language is known. */
export async function requireAccount(
  manager: EntityManager,
  personId: string,
): Promise<{ name: string; email: string; locale: Locale }> {
  const { name, email, preferences } = await requirePerson(manager, personId);
  const { locale } = { ...defaultPreferences({ jurisdiction: 'US', locale: 'en-US' }), ...preferences };
  return { name, email, locale };
}
