import type { Locale } from '../../shared/session/session.schema.ts';
import type { MessageValues } from '../messages/translate.ts';

/** One mail; subject and text come from the catalogue: `mail.<kind>.subject` and `mail.<kind>.text`. */
export interface Mail {
  kind: string;
  to: string;
  locale: Locale;
  values: MessageValues;
}

export interface Mailer {
  /** Hands the mail to the mail server and waits for its yes. Never call it inside a transaction: locks would wait too. */
  send(mail: Mail): Promise<MailResult>;
  close(): Promise<void>;
}

/** A refused mail is an answer and not an exception: the caller says honestly what became of it. */
export type MailResult = { sent: true; messageId: string } | { sent: false; reason: string };
