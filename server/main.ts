import { existsSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import path from 'node:path';
import { pino } from 'pino';
import { v7 as uuidV7 } from 'uuid';
import { version } from '../package.json';
import { createApp } from './app.ts';
import { createDataSource } from './database/data-source.ts';
import { writeDocument } from './documents/write-document.ts';
import { startExportWorker } from './exports/export-worker.ts';
import { backgroundWork } from './http/background-work.ts';
import { isLoopbackName } from './http/loopback.ts';
import type { Parts } from './http/parts.ts';
import { REDACTED_PATHS } from './http/request-log.ts';
import { startMailCatcher } from './mail/mail-catcher.ts';
import { smtpMailer } from './mail/smtp-mailer.ts';
import { loadReferenceData } from './reference/load-reference-data.ts';
import { sealWhatIsDue } from './seals/seal.service.ts';
import { readSealSecrets } from './seals/seal-secrets.ts';
import { removeExpiredSignIns } from './session/remove-expired.ts';
import type { Settings } from './settings.ts';

export interface StartOptions {
  settings: Settings & { sessionSecret: string };
  databaseUrls: { app: string; jobs: string };
  /** Folder of the built client; null when something else serves it, as in development. */
  clientFolder?: string | null;
}

export interface RunningServer {
  /** Where it listens: `http://127.0.0.1:3000`. */
  address: string;
  /** Takes no new requests, lets those under way and their mails end, then closes the database's connections. */
  close(): Promise<void>;
}

const LONGEST_WAIT_FOR_REQUESTS_MS = 10_000;
const CLEAN_UP_EVERY_MS = 3600 * 1000;
/** How soon after midnight in a firm's zone its log is sealed at the latest. */
const SEAL_EVERY_MS = 10 * 60 * 1000;

/** Puts the parts together from the outside world (clock, random ids, network, files) and listens. */
export async function startServer({ settings, databaseUrls, clientFolder }: StartOptions): Promise<RunningServer> {
  const log = pino({ level: settings.logLevel, redact: { paths: REDACTED_PATHS, censor: '[redacted]' } });
  const development = clientFolder === null;
  const now = () => new Date();
  const newId = () => uuidV7();

  const reference = loadReferenceData();
  readSealSecrets(settings.sealKeyFile);
  const dataSource = createDataSource({ url: databaseUrls.app });
  await dataSource.initialize();
  const jobs = createDataSource({ url: databaseUrls.jobs, poolSize: 2, applicationName: 'tarewright jobs' });
  await jobs.initialize();
  const catcher = settings.smtpUrl
    ? null
    : await startMailCatcher({ folder: path.join(settings.home, 'mail'), log, now, newId });
  const mailer = smtpMailer({ smtpUrl: settings.smtpUrl ?? String(catcher?.smtpUrl), from: settings.mailFrom, log });
  const mayShowMail = (development || settings.demo) && isOnlyForThisMachine(settings);
  const parts: Parts = {
    settings,
    dataSource,
    reference,
    mailer,
    keptMail: mayShowMail ? catcher : null,
    background: backgroundWork(log),
    log,
    now,
    newId,
    checkAnswers: development,
    clientFolder: clientFolder && existsSync(clientFolder) ? clientFolder : null,
    version,
  };
  if (!isLoopbackName(new URL(settings.publicUrl).hostname) && !settings.publicUrl.startsWith('https:')) {
    log.warn('PUBLIC_URL is neither https nor this machine: browsers will not keep the sign-in');
  }

  const server = createServer(createApp(parts));
  await listen(server, settings.port, settings.host);
  const exports = await startExportWorker({ parts, jobsUrl: databaseUrls.jobs, writeDocument });
  const cleaning = setInterval(() => {
    parts.background.run('remove what has expired', () => removeExpiredSignIns(parts));
  }, CLEAN_UP_EVERY_MS);
  cleaning.unref();
  const seal = () => parts.background.run('seal what is due', () => sealWhatIsDue(parts, jobs));
  seal();
  const sealing = setInterval(seal, SEAL_EVERY_MS);
  sealing.unref();

  return {
    address: addressOf(server, settings.host),
    async close() {
      clearInterval(cleaning);
      clearInterval(sealing);
      await closeGently(server);
      await exports.stop();
      await parts.background.settled();
      await mailer.close();
      await catcher?.close();
      await jobs.destroy();
      await dataSource.destroy();
      log.flush();
    },
  };
}

/** Kept mail opens accounts: it is shown only where nobody else can ask, neither over the network nor through a proxy. */
function isOnlyForThisMachine({ host, publicUrl, trustProxy }: Settings): boolean {
  return isLoopbackName(host) && isLoopbackName(new URL(publicUrl).hostname) && trustProxy === false;
}

function listen(server: Server, port: number, host: string): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      server.removeListener('error', reject);
      resolve();
    });
  });
}

function addressOf(server: Server, host: string): string {
  const address = server.address();
  const port = typeof address === 'object' && address ? address.port : 0;
  return `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
}

async function closeGently(server: Server): Promise<void> {
  const closed = new Promise<void>((resolve) => server.close(() => resolve()));
  server.closeIdleConnections();
  const impatient = setTimeout(() => server.closeAllConnections(), LONGEST_WAIT_FOR_REQUESTS_MS);
  await closed;
  clearTimeout(impatient);
}
