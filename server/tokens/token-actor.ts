import type { TokenScope } from '../../shared/permissions/roles.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { findStanding } from '../session/actor-look-up.ts';
import { poolOf } from '../session/pool.ts';
import { hashOfSecretToken } from '../session/secret-token.ts';

/** Recognisable in logs and to secret scanners. */
export const TOKEN_PREFIX = 'twt_';
/** How old the note of the last use may get before it is written again. */
const USE_NOTE_AGE_MS = 60 * 1000;

interface TokenRow {
  scopes: TokenScope[];
  expiresOn: string;
  lastUsedAt: Date | null;
  revokedAt: Date | null;
}

/**
 * Who a personal token stands for: its person with the roles of this moment, narrowed by its scopes.
 * @throws Problem 401 when it is unknown, expired or revoked, or its person may no longer enter the firm
 */
export async function actorOfToken(parts: Parts, authorization: string): Promise<Actor> {
  const token = /^Bearer ([\w-]{20,200})$/i.exec(authorization.trim())?.[1];
  if (token === undefined) throw new Problem('tokenNotValid');
  const pool = poolOf(parts.dataSource);
  const found = await pool.query<{ firm_id: string; person_id: string; id: string }>(
    'SELECT firm_id, person_id, id FROM token_by_hash($1)',
    [hashOfSecretToken(token)],
  );
  const named = found.rows[0];
  if (!named) throw new Problem('tokenNotValid');
  const { firm_id: firmId, person_id: personId, id } = named;

  const row = await inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) => {
    const rows: TokenRow[] = await manager.query(
      `SELECT scopes, expires_on::text AS "expiresOn", last_used_at AS "lastUsedAt", revoked_at AS "revokedAt"
         FROM personal_token WHERE firm_id = $1 AND id = $2`,
      [firmId, id],
    );
    return rows[0];
  });
  const now = parts.now();
  const today = now.toISOString().slice(0, 10);
  if (!row || row.revokedAt || row.expiresOn < today) throw new Problem('tokenNotValid');
  const standing = await findStanding(pool, personId, firmId);
  if (!standing) throw new Problem('tokenNotValid');

  if (!row.lastUsedAt || now.getTime() - row.lastUsedAt.getTime() > USE_NOTE_AGE_MS) {
    parts.background.run('note that a token was used', () =>
      inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) => {
        await manager.query('UPDATE personal_token SET last_used_at = $3 WHERE firm_id = $1 AND id = $2', [
          firmId,
          id,
          now,
        ]);
      }),
    );
  }
  const { roles, siteIds, locale } = standing;
  return { personId, firmId, roles, siteIds, locale, tokenScopes: row.scopes };
}
