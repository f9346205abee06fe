import type { Locale } from '../../shared/session/session.schema.ts';
import type { Parts } from '../http/parts.ts';
import { instantText } from '../mail/instant-text.ts';

/** Tells the person, after the answer, so that a stranger's change does not go unnoticed. */
export function tellOfChangedPassword(parts: Parts, account: { name: string; email: string; locale: Locale }): void {
  const { name, email, locale } = account;
  parts.background.run('tell a person that the password was changed', async () => {
    const link = `${parts.settings.publicUrl}/forgotten-password`;
    const values = { name, at: instantText(parts.now(), locale), link };
    await parts.mailer.send({ kind: 'passwordChanged', to: email, locale, values });
  });
}
