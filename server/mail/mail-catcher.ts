import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { simpleParser } from 'mailparser';
import type { Logger } from 'pino';
import { SMTPServer } from 'smtp-server';

/** A mail that went nowhere. */
export interface KeptMail {
  id: string;
  receivedAt: string;
  from: string;
  to: string[];
  subject: string;
  text: string;
}

export interface MailCatcher {
  smtpUrl: string;
  /** Newest first. */
  mails(): Promise<KeptMail[]>;
  close(): Promise<void>;
}

interface MailCatcherOptions {
  /** Where the mails are kept, one JSON file each; null keeps them in memory. */
  folder: string | null;
  log: Logger;
  now(): Date;
  newId(): string;
}

const KEPT_AT_MOST = 200;

/**
 * A real SMTP server on loopback that keeps every mail and passes none on: what a first start uses instead of a mail
 * server. It listens on a free port and takes no sign-in, so it must never leave loopback.
 */
export async function startMailCatcher({ folder, log, now, newId }: MailCatcherOptions): Promise<MailCatcher> {
  const shelf = folder === null ? memoryShelf() : await folderShelf(folder);
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: 1_000_000,
    logger: false,
    onData(stream, session, done) {
      simpleParser(stream)
        .then((mail) =>
          shelf.keep({
            id: newId(),
            receivedAt: now().toISOString(),
            from: mail.from?.text ?? '',
            to: session.envelope.rcptTo.map(({ address }) => address),
            subject: mail.subject ?? '',
            text: mail.text ?? '',
          }),
        )
        .then(
          () => done(),
          (error: Error) => {
            log.error({ err: error }, 'the mail catcher could not keep a mail');
            done(new Error('could not be kept'));
          },
        );
    },
  });
  server.on('error', (error) => log.error({ err: error }, 'the mail catcher failed'));
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', () => resolve());
  });
  const { port } = server.server.address() as AddressInfo;
  return {
    smtpUrl: `smtp://127.0.0.1:${port}`,
    mails: () => shelf.mails(),
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

interface Shelf {
  keep(mail: KeptMail): Promise<void>;
  mails(): Promise<KeptMail[]>;
}

function memoryShelf(): Shelf {
  const kept: KeptMail[] = [];
  return {
    async keep(mail) {
      kept.unshift(mail);
      kept.length = Math.min(kept.length, KEPT_AT_MOST);
    },
    mails: async () => [...kept],
  };
}

/** File names are version 7 ids, which sort by time. A mail holds links that open accounts: for the owner's eyes only. */
async function folderShelf(folder: string): Promise<Shelf> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  return {
    async keep(mail) {
      const file = path.join(folder, `${mail.id}.json`);
      await writeFile(`${file}.part`, JSON.stringify(mail, null, 2), { mode: 0o600 });
      await rename(`${file}.part`, file);
    },
    async mails() {
      const names = (await readdir(folder)).filter((name) => name.endsWith('.json')).sort();
      const newest = names.reverse().slice(0, KEPT_AT_MOST);
      return Promise.all(newest.map(async (name) => JSON.parse(await readFile(path.join(folder, name), 'utf8'))));
    },
  };
}
