import path from 'node:path';
import { findExistingCluster } from '../cluster/data-folder.ts';
import { lockFolder } from '../cluster/folder-lock.ts';
import { whyNotListen } from '../cluster/free-port.ts';
import { prepareHome, readSecrets } from '../cluster/home.ts';
import { isLoopbackName } from '../http/loopback.ts';
import { readSettings, type Settings } from '../settings.ts';
import { StartRefusal } from './bootstrap/start-refusal.mjs';
import type { DatabaseUrls } from './database-urls.ts';
import { type DemoSignIn, loadDemoIfEmpty } from './demo.ts';
import { prepareDatabase } from './prepare-database.ts';
import { projectRoot } from './project-root.ts';

/** The data folder, held by this process, and a port that it can have. */
export interface Claim {
  settings: Settings;
  release(): void;
}

/** What `start` and `dev` both stand on: a migrated, filled database. */
export interface Installation {
  settings: Settings & { sessionSecret: string };
  databaseUrls: DatabaseUrls;
  demoPeople: DemoSignIn[];
  demoPassword: string;
  /** Resolves when the own PostgreSQL ended. */
  databaseEnded: Promise<void>;
  /** Stops the own PostgreSQL. */
  close(): Promise<void>;
}

const reasons: Record<string, string> = {
  EADDRINUSE: 'is already in use: stop what listens there, or set PORT to another one',
  EACCES: 'may not be listened on by this user: set PORT to 1024 or more',
  EADDRNOTAVAIL: 'is not an address of this computer: set HOST to one that is',
  ENOTFOUND: 'is not a known host name: set HOST to an address of this computer',
};

async function checkPort({ host, port }: Settings): Promise<void> {
  const code = await whyNotListen(host, port);
  if (code) throw new StartRefusal(`${host}:${port} ${reasons[code] ?? `cannot be listened on (${code})`}.`);
}

/** @throws StartRefusal with one line */
export async function claimHome(): Promise<Claim> {
  const settings = readSettings(process.env, projectRoot);
  prepareHome(settings.home);
  const release = lockFolder(settings.home);
  try {
    await checkPort(settings);
    return { settings, release };
  } catch (error) {
    release();
    throw error;
  }
}

/** @throws StartRefusal with one line; no database is left running then */
export async function openInstallation({ settings }: Claim, say: (line: string) => void): Promise<Installation> {
  const recordsExist = settings.databaseUrl === null && findExistingCluster(settings.home) !== null;
  const secrets = readSecrets(settings.home, { recordsExist });
  const database = await prepareDatabase({ settings, secrets, say });
  try {
    const demo = { databaseUrls: database.urls, password: secrets.demo, now: new Date() };
    return {
      settings: { ...settings, sessionSecret: settings.sessionSecret ?? secrets.session },
      databaseUrls: database.urls,
      demoPeople: settings.demo ? await loadDemoIfEmpty(demo) : [],
      demoPassword: secrets.demo,
      databaseEnded: database.ended,
      close: database.stop,
    };
  } catch (error) {
    await database.stop();
    throw error;
  }
}

/** The page of kept mail opens accounts, so the server shows it only where nobody else can ask; the files are always there. */
function whereMailIs({ host, publicUrl, trustProxy, demo, home }: Settings): string {
  const onlyHere = isLoopbackName(host) && isLoopbackName(new URL(publicUrl).hostname) && trustProxy === false;
  return onlyHere && demo ? `${publicUrl}/dev/mail` : path.join(home, 'mail');
}

/** The lines that a person sees when it is ready. */
export function describeInstallation({ settings, demoPeople, demoPassword }: Installation): string[] {
  const lines = [`Tarewright is ready: ${settings.publicUrl}`];
  if (settings.publicUrl !== `http://${settings.host}:${settings.port}`)
    lines.push(`It listens on ${settings.host}:${settings.port}.`);
  if (demoPeople.length > 0) {
    lines.push('', `Demo people (invented), each with the password ${demoPassword}`);
    const width = (key: 'email' | 'name' | 'role') => Math.max(...demoPeople.map((person) => person[key].length));
    for (const { firm, name, role, email } of demoPeople)
      lines.push(
        `  ${email.padEnd(width('email'))}  ${role.padEnd(width('role'))}  ${name.padEnd(width('name'))}  ${firm}`,
      );
    if (!isLoopbackName(settings.host))
      lines.push('  Others can reach this server: set TAREWRIGHT_DEMO=0 before the first start with real records.');
  }
  if (!settings.smtpUrl) lines.push('', `Mail is kept and not sent: ${whereMailIs(settings)}`);
  lines.push('', 'Ctrl-C stops it.');
  return lines;
}
