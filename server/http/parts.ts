import type { Logger } from 'pino';
import type { DataSource } from 'typeorm';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import type { MailCatcher } from '../mail/mail-catcher.ts';
import type { Mailer } from '../mail/mailer.ts';
import type { Settings } from '../settings.ts';
import type { BackgroundWork } from './background-work.ts';

/**
 * What the server is put together from. Handed to every router and service; nothing below reads the environment, the
 * clock or a random source by itself.
 */
export interface Parts {
  settings: Settings & { sessionSecret: string };
  /** Connected as the application's role, which row-level security binds. */
  dataSource: DataSource;
  reference: ReferenceData;
  mailer: Mailer;
  /** Where mail is kept instead of sent and may be read on this machine; null: a mail server sends it, or nobody may. */
  keptMail: MailCatcher | null;
  background: BackgroundWork;
  log: Logger;
  now(): Date;
  /** A UUID version 7. */
  newId(): string;
  /** Answers are held against their documented schema before they are sent: on in tests and development. */
  checkAnswers: boolean;
  /** Folder of the built client; null serves the API alone. */
  clientFolder: string | null;
  version: string;
}
