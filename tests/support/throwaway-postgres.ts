import { spawnSync } from 'node:child_process';
import { accessSync, chmodSync, chownSync, constants, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { asDatabaseUser, canEnter, type DatabaseUser, findDatabaseUser } from '../../server/cluster/database-user.ts';
import { findFreePort } from '../../server/cluster/free-port.ts';
import { lastWords, spawnPostgres, waitUntilReady } from '../../server/cluster/supervised-postgres.ts';
import { requirePostgres } from '../../server/commands/bootstrap/programs.mjs';
import { throwawayUrl } from './cloned-database.ts';

export interface ThrowawayPostgres {
  port: number;
  /** Every role may sign in from loopback without a password; the address carries one because code expects it. */
  url(user: string, database: string): string;
  stop(): Promise<void>;
}

/** A folder that PostgreSQL's user can enter: somebody's TMPDIR may be closed to it. */
function makeFolder(user: DatabaseUser | null): string {
  for (const parent of [tmpdir(), '/tmp', '/var/tmp']) {
    try {
      accessSync(parent, constants.W_OK);
    } catch {
      continue;
    }
    if (!canEnter(parent, user)) continue;
    const folder = mkdtempSync(path.join(parent, 'tarewright-postgres-'));
    if (user) chownSync(folder, user.uid, user.gid);
    chmodSync(folder, 0o700);
    return folder;
  }
  throw new Error('no temporary folder that the user of PostgreSQL can enter: set TMPDIR');
}

/** Quick and forgetful. Autovacuum is off: a test that judges query plans runs ANALYZE first. */
const forgetful = { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off', autovacuum: 'off' };

/**
 * A PostgreSQL of one's own on loopback that is gone afterwards, also when this process is killed.
 * @param durable fsync and the rest as in production, for measurements; tests leave it off
 */
export async function startThrowawayPostgres({ durable = false } = {}): Promise<ThrowawayPostgres> {
  const programs = requirePostgres().folder;
  const user = findDatabaseUser();
  const folder = makeFolder(user);
  const dataFolder = path.join(folder, 'data');
  const format = ['-A', 'trust', '-E', 'UTF8', '--locale=C.UTF-8', '--no-sync'];
  const made = spawnSync(`${programs}/initdb`, ['-D', dataFolder, '-U', 'postgres', ...format], {
    ...asDatabaseUser(user),
    encoding: 'utf8',
  });
  if (made.status !== 0) throw new Error(`initdb: ${made.stderr ?? made.error}`);

  const logFile = path.join(folder, 'log');
  for (let attempt = 1; ; attempt++) {
    const port = await findFreePort();
    const server = spawnPostgres({
      programs,
      dataFolder,
      user,
      logFile,
      configuration: {
        ...(durable ? {} : forgetful),
        listen_addresses: '127.0.0.1',
        unix_socket_directories: '',
        port,
        max_connections: 200,
        timezone: 'UTC',
      },
      removeFolder: folder,
    });
    if (await waitUntilReady(server, throwawayUrl(port, 'postgres', 'postgres'), () => undefined)) {
      return {
        port,
        url: (user, database) => throwawayUrl(port, user, database),
        async stop() {
          await server.stop();
          rmSync(folder, { recursive: true, force: true });
        },
      };
    }
    // The port was taken between looking and listening.
    if (attempt === 3) throw new Error(`PostgreSQL does not start: ${lastWords(logFile, 0)}`);
  }
}
