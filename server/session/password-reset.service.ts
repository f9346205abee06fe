import { asPerson } from '../database/firm-scope.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { instantText } from '../mail/instant-text.ts';
import { replacePassword } from '../people/account.ts';
import { hashPassword } from './password.ts';
import { tellOfChangedPassword } from './password-mail.ts';
import {
  findPersonIdOfReset,
  insertPasswordReset,
  requireAccount,
  usePasswordReset,
} from './password-reset.repository.ts';
import { hashOfSecretToken, newSecretToken } from './secret-token.ts';
import { findPersonId } from './session.repository.ts';
import { takeTurn } from './throttle.ts';

const VALID_MS = 3600 * 1000;
const MAILS_PER_ACCOUNT = 3;
const REQUESTS_PER_ADDRESS = 20;

/**
 * Mails a link that sets a new password, if the address has an account. All of it happens after the answer, so that
 * neither the answer nor its time tells whether it has.
 */
export function startPasswordReset(parts: Parts, email: string, address: string): void {
  parts.background.run('mail a password reset', async () => {
    if (!(await takeTurn(parts, 'reset from', address, REQUESTS_PER_ADDRESS))) return;
    if (!(await takeTurn(parts, 'reset of', email, MAILS_PER_ACCOUNT))) return;
    const personId = await findPersonId(parts, email);
    if (personId === null) return;
    const token = newSecretToken();
    const now = parts.now();
    const expiresAt = new Date(now.getTime() + VALID_MS);
    const account = await asPerson(parts.dataSource, personId, async (manager) => {
      const reset = { id: parts.newId(), personId, tokenHash: hashOfSecretToken(token), requestedAt: now, expiresAt };
      await insertPasswordReset(manager, reset);
      return requireAccount(manager, personId);
    });
    await parts.mailer.send({
      kind: 'passwordReset',
      to: account.email,
      locale: account.locale,
      values: {
        name: account.name,
        until: instantText(expiresAt, account.locale),
        link: `${parts.settings.publicUrl}/reset-password#token=${token}`,
      },
    });
  });
}

/**
 * Sets a new password by a mailed link, which works once, and ends every session of the person.
 * @throws Problem 422 `linkNotValid` at `/token`
 */
export async function finishPasswordReset(parts: Parts, token: string, newPassword: string): Promise<void> {
  const tokenHash = hashOfSecretToken(token);
  const personId = await findPersonIdOfReset(parts, tokenHash);
  if (personId === null) throw linkNotValid();
  const passwordHash = await hashPassword(newPassword);
  const account = await asPerson(parts.dataSource, personId, async (manager) => {
    if (!(await usePasswordReset(manager, tokenHash, parts.now()))) throw linkNotValid();
    await replacePassword(parts, manager, personId, passwordHash);
    return requireAccount(manager, personId);
  });
  tellOfChangedPassword(parts, account);
}

function linkNotValid() {
  return problemOfRefusals([{ code: 'linkNotValid', path: '/token' }]);
}
