import { type ChildProcess, spawn } from 'node:child_process';
import { closeSync, openSync, readFileSync } from 'node:fs';
import pg from 'pg';
import { asDatabaseUser, type DatabaseUser } from './database-user.ts';

export interface SupervisedPostgres {
  /** Lives exactly as long as PostgreSQL does. */
  exited: Promise<void>;
  hasExited(): boolean;
  /** Fast shutdown: clients are disconnected, everything committed is on the disk. Resolves when PostgreSQL is gone. */
  stop(): Promise<void>;
}

/**
 * Runs PostgreSQL and, beside it, a `cat` that waits for the end of its input. That input is a pipe from this process: it
 * ends when `stop` closes it and also when this process is killed, so PostgreSQL never outlives the program it belongs to.
 * SIGINT is PostgreSQL's fast shutdown. $1 is a folder to remove after it ended in order, or nothing.
 */
const supervisor = `
exec 3<&0
folder=$1; shift
"$@" </dev/null 3<&- &
server=$!
{ cat <&3 >/dev/null; kill -s INT "$server" 2>/dev/null; } &
watch=$!
exec 3<&-
wait "$server" && [ -n "$folder" ] && rm -rf "$folder"
kill "$watch" 2>/dev/null
`;

/**
 * @param removeFolder folder that goes away with PostgreSQL; null keeps everything
 */
export function spawnPostgres(options: {
  programs: string;
  dataFolder: string;
  user: DatabaseUser | null;
  logFile: string;
  configuration: Record<string, string | number>;
  removeFolder: string | null;
}): SupervisedPostgres {
  const flags = Object.entries(options.configuration).flatMap(([name, value]) => ['-c', `${name}=${value}`]);
  const postgres = [`${options.programs}/postgres`, '-D', options.dataFolder, ...flags];
  const log = openSync(options.logFile, 'a', 0o600);
  const child = spawn(
    '/bin/sh',
    ['-c', supervisor, 'sh', options.removeFolder ?? '', ...postgres],
    // Detached: a session of its own, so that Ctrl-C in the terminal reaches this program only, and PostgreSQL stops last.
    { ...asDatabaseUser(options.user), detached: true, stdio: ['pipe', log, log] },
  );
  closeSync(log);
  child.stdin?.on('error', () => undefined); // the reader may be gone already
  const exited = new Promise<void>((resolve, reject) => {
    child.once('exit', () => resolve());
    child.once('error', reject);
  });
  exited.catch(() => undefined);
  return { exited, hasExited: () => hasEnded(child), stop: () => stop(child, exited) };
}

function hasEnded(child: ChildProcess): boolean {
  return child.exitCode !== null || child.signalCode !== null || child.pid === undefined;
}

async function stop(child: ChildProcess, exited: Promise<void>): Promise<void> {
  child.stdin?.end();
  await exited;
}

/** What a log written from `offset` on says last, preferring PostgreSQL's own FATAL lines. */
export function lastWords(logFile: string, offset: number): string {
  const lines = readFileSync(logFile, 'utf8').slice(offset).trim().split('\n');
  const fatal = lines.filter((line) => /\b(FATAL|PANIC|ERROR):/.test(line));
  return (fatal.at(-1) ?? lines.at(-1) ?? '').replace(/^.*?(FATAL|PANIC|ERROR):\s*/, '');
}

/**
 * Waits until the superuser can sign in. Recovery after a power cut may take its time, so only a process that ended, or a
 * refusal other than "not yet", stops the waiting.
 * @returns whether it is ready; false when it has ended
 */
export async function waitUntilReady(server: SupervisedPostgres, url: string, onSlow: () => void): Promise<boolean> {
  for (let attempt = 0; !server.hasExited(); attempt++) {
    const client = new pg.Client({ connectionString: url });
    client.on('error', () => undefined);
    try {
      await client.connect();
      await client.end();
      return true;
    } catch (error) {
      const { code } = error as { code?: string };
      const notYet = code === 'ECONNREFUSED' || code === 'ECONNRESET' || code === '57P03' || code === undefined;
      if (!notYet) throw error;
    }
    if (attempt === 200) onSlow();
    await new Promise((resolve) => setTimeout(resolve, 25));
  }
  return false;
}
