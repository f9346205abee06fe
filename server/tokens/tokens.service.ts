import type { z } from 'zod';
import type { createdToken, createTokenRequest, PersonalToken } from '../../shared/people/people.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { hashOfSecretToken, newSecretToken } from '../session/secret-token.ts';
import { TOKEN_PREFIX } from './token-actor.ts';
import { findToken, insertToken, listTokens, presentToken, revokeToken } from './tokens.repository.ts';

/** A forgotten token is not to open anything for ever. */
const LONGEST_DAYS = 366;
const MOST_TOKENS = 20;

export function readTokens(parts: Parts, actor: Actor): Promise<PersonalToken[]> {
  const { firmId, personId } = actor;
  return inFirm(parts.dataSource, actor, async (manager) =>
    (await listTokens(manager, firmId, personId)).map(presentToken),
  );
}

/**
 * Makes a token for this firm. Only its hash is kept: the secret is in this answer and nowhere else, so that the same
 * request sent again cannot show it again.
 * @throws Problem 409 `idReused`; 422 when the day is past or too far off, or there are too many
 */
export async function createToken(
  parts: Parts,
  actor: Actor,
  { id, name, scopes, expiresOn }: z.output<typeof createTokenRequest>,
): Promise<z.output<typeof createdToken>> {
  const { firmId, personId } = actor;
  const now = parts.now();
  const latest = new Date(now.getTime() + LONGEST_DAYS * 24 * 3600 * 1000).toISOString().slice(0, 10);
  const today = now.toISOString().slice(0, 10);
  if (expiresOn < today) {
    throw problemOfRefusals([{ code: 'dayPast', path: '/expiresOn', given: expiresOn, allowed: today }]);
  }
  if (expiresOn > latest) {
    throw problemOfRefusals([{ code: 'dayTooLate', path: '/expiresOn', given: expiresOn, allowed: latest }]);
  }
  const secret = newSecretToken(TOKEN_PREFIX);
  const token = { firmId, id, personId, name, scopes: [...new Set(scopes)], createdAt: now, expiresOn };
  await inFirm(parts.dataSource, actor, async (manager) => {
    if (await findToken(manager, firmId, id)) throw new Problem('idReused');
    const held = await listTokens(manager, firmId, personId);
    if (held.filter((other) => other.expiresOn >= today).length >= MOST_TOKENS) {
      throw problemOfRefusals([{ code: 'tooManyTokens', path: '', allowed: MOST_TOKENS }]);
    }
    await insertToken(manager, { ...token, tokenHash: hashOfSecretToken(secret) });
  });
  return { ...presentToken({ ...token, lastUsedAt: null } as never), secret };
}

/** @throws Problem 404, also for somebody else's */
export async function endToken(parts: Parts, actor: Actor, id: string): Promise<void> {
  await inFirm(parts.dataSource, actor, async (manager) => {
    if (!(await revokeToken(manager, actor.firmId, id, parts.now()))) throw new Problem('notFound');
  });
}
