import pg from 'pg';
import { startCluster } from '../cluster/cluster.ts';
import type { Secrets } from '../cluster/home.ts';
import { migrate } from '../database/migrate.ts';
import { ensureRoles } from '../database/roles.ts';
import type { Settings } from '../settings.ts';
import { StartRefusal } from './bootstrap/start-refusal.mjs';
import { type DatabaseUrls, databaseNameOf, urlOfDatabase, urlsOfRoles, withoutPassword } from './database-urls.ts';

export interface PreparedDatabase {
  urls: DatabaseUrls;
  /** Resolves when the own PostgreSQL has ended; never for a server of one's own. */
  ended: Promise<void>;
  stop(): Promise<void>;
}

const ownDatabase = 'tarewright';

async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

const oldestServer = 150_000; // server_version_num of PostgreSQL 15.0
const unknownDatabase = '3D000';

/**
 * Checks a server of one's own: reachable, recent, and with an administrator who may make the roles.
 * @returns the address to administer from: of the database itself, or of `postgres` while it does not exist yet
 */
async function findMaintenanceUrl(url: string): Promise<string> {
  const shown = withoutPassword(url);
  const sql = `SELECT current_setting('server_version_num')::int AS version, rolsuper AS superuser
                 FROM pg_roles WHERE rolname = current_user`;
  const ask = (from: string) =>
    withClient(from, async (client) => (await client.query<{ version: number; superuser: boolean }>(sql)).rows[0]);
  let from = url;
  let facts: Awaited<ReturnType<typeof ask>>;
  try {
    facts = await ask(from).catch((error: { code?: string }) => {
      if (error.code !== unknownDatabase) throw error;
      from = urlOfDatabase(url, 'postgres');
      return ask(from);
    });
  } catch (error) {
    const { code, message } = error as { code?: string; message: string };
    throw new StartRefusal(`DATABASE_URL (${shown}) cannot be used: ${message || code}.`);
  }
  if (!facts || facts.version < oldestServer)
    throw new StartRefusal(
      `DATABASE_URL (${shown}) is a PostgreSQL before version 15, which is the oldest that will do.`,
    );
  if (!facts.superuser)
    throw new StartRefusal(
      `DATABASE_URL (${shown}) must name a superuser: one of the roles made at the start passes row security, to back up.`,
    );
  return from;
}

/**
 * Roles, ownership, migrations: all of it may be done again at each start and then changes nothing. Servers that start at
 * once on one database take turns.
 */
async function bringUpToDate(maintenanceUrl: string, database: string, secrets: Secrets): Promise<DatabaseUrls> {
  const urls = urlsOfRoles(urlOfDatabase(maintenanceUrl, database), secrets);
  const { owner, app, jobs, backup } = secrets;
  await withClient(maintenanceUrl, async (client) => {
    await client.query(`SELECT pg_advisory_lock(hashtextextended('tarewright start', 0))`);
    await ensureRoles({ superuserUrl: maintenanceUrl, database, passwords: { owner, app, jobs, backup } });
    await migrate({ ownerUrl: urls.owner });
  });
  return urls;
}

/**
 * The database that a server works on, migrated: a cluster of its own in the home folder, or the one that DATABASE_URL
 * leads to.
 * @throws StartRefusal with one line
 */
export async function prepareDatabase(options: {
  settings: Settings;
  secrets: Secrets;
  say: (line: string) => void;
}): Promise<PreparedDatabase> {
  const { settings, secrets, say } = options;
  if (settings.databaseUrl) {
    const maintenanceUrl = await findMaintenanceUrl(settings.databaseUrl);
    const urls = await bringUpToDate(maintenanceUrl, databaseNameOf(settings.databaseUrl), secrets);
    return { urls, ended: new Promise(() => undefined), stop: async () => undefined };
  }
  const cluster = await startCluster({ home: settings.home, secrets, say });
  try {
    const urls = await bringUpToDate(cluster.superuserUrl('postgres'), ownDatabase, secrets);
    return { urls, ended: cluster.exited, stop: () => cluster.stop() };
  } catch (error) {
    await cluster.stop();
    throw error;
  }
}
