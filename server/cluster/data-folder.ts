import { spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import {
  chmodSync,
  chownSync,
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { findPostgres, type PostgresPrograms, requirePostgres } from '../commands/bootstrap/programs.mjs';
import { StartRefusal } from '../commands/bootstrap/start-refusal.mjs';
import { asDatabaseUser, canEnter, type DatabaseUser } from './database-user.ts';
import { parseJson, writeDurably } from './home.ts';

const clusterFile = z.object({
  /** Where the files are: `postgres` in the home folder, or an absolute path outside it. */
  folder: z.string(),
  port: z.number().int(),
});
export type ClusterNote = z.output<typeof clusterFile>;

const noteFile = (home: string) => path.join(home, 'cluster.json');

export function readClusterNote(home: string): ClusterNote | null {
  if (!existsSync(noteFile(home))) return null;
  const read = clusterFile.safeParse(parseJson(readFileSync(noteFile(home), 'utf8')));
  if (!read.success) throw new StartRefusal(`${noteFile(home)} is damaged: put it back from a backup.`);
  return read.data;
}

export function writeClusterNote(home: string, note: ClusterNote): void {
  writeDurably(noteFile(home), `${JSON.stringify(note, null, 2)}\n`, 0o644);
}

/** The files of the database, named in cluster.json; null before the first start. */
export function findExistingCluster(home: string): { folder: string; data: string } | null {
  const folder = path.resolve(home, readClusterNote(home)?.folder ?? 'postgres');
  const data = path.join(folder, 'data');
  if (existsSync(path.join(data, 'PG_VERSION'))) return { folder, data };
  if (readClusterNote(home))
    throw new StartRefusal(
      `The database files in ${data} are missing: mount or restore them, or start with an empty TAREWRIGHT_HOME.`,
    );
  return null;
}

function giveTo(user: DatabaseUser | null, file: string): void {
  if (user) chownSync(file, user.uid, user.gid);
}

/**
 * A folder that PostgreSQL's user can enter: in the home folder, or in /var/lib when a folder above the home folder is
 * closed to that user, as /root is.
 */
export function chooseFolder(home: string, user: DatabaseUser | null, say: (line: string) => void): string {
  if (canEnter(home, user)) return path.join(home, 'postgres');
  const elsewhere = `/var/lib/tarewright-${randomBytes(4).toString('hex')}`;
  try {
    mkdirSync(elsewhere, { mode: 0o711 });
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    throw new StartRefusal(
      `PostgreSQL does not run as root, its user ${user?.name} cannot enter ${home}, and ${elsewhere} cannot be made (${code}): set TAREWRIGHT_HOME to a folder that every user may enter, such as /srv/tarewright.`,
    );
  }
  say(`The user ${user?.name} cannot enter ${home}: the database files are kept in ${elsewhere}.`);
  return elsewhere;
}

/** Only from this computer, only over TCP, only with a password. */
const onlyLoopbackWithPassword = `# Written by Tarewright.
host all all 127.0.0.1/32 scram-sha-256
`;

/**
 * Makes an empty database cluster. It gets its name last, so one that was broken off by a power cut is never taken for
 * a whole one.
 */
export function makeCluster(options: { folder: string; user: DatabaseUser | null; password: string }): string {
  const { folder, user, password } = options;
  const programs = requirePostgres();
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  chmodSync(folder, 0o700);
  giveTo(user, folder);
  const data = path.join(folder, 'data');
  const unfinished = path.join(folder, 'data.new');
  const passwordFile = path.join(folder, 'password.new');
  rmSync(unfinished, { recursive: true, force: true });
  writeFileSync(passwordFile, `${password}\n`, { mode: 0o600 });
  giveTo(user, passwordFile);
  const words = ['-D', unfinished, '-U', 'postgres', '-A', 'scram-sha-256', '--pwfile', passwordFile];
  const format = ['-E', 'UTF8', '--locale=C.UTF-8', '--data-checksums'];
  const made = spawnSync(`${programs.folder}/initdb`, [...words, ...format], {
    ...asDatabaseUser(user),
    encoding: 'utf8',
  });
  rmSync(passwordFile, { force: true });
  if (made.status !== 0) {
    const line = (made.stderr ?? String(made.error)).trim().split('\n').at(-1);
    throw new StartRefusal(`PostgreSQL could not make a database in ${folder}: ${line}`);
  }
  writeFileSync(path.join(unfinished, 'pg_hba.conf'), onlyLoopbackWithPassword, { flush: true });
  renameSync(unfinished, data);
  const handle = openSync(folder, 'r');
  fsyncSync(handle);
  closeSync(handle);
  return data;
}

/** The programs of the version that made these files; a newer major version cannot read them. */
export function programsFor(data: string): PostgresPrograms {
  const major = Number(readFileSync(path.join(data, 'PG_VERSION'), 'utf8').trim());
  const programs = findPostgres({ major });
  if (programs) return programs;
  throw new StartRefusal(
    `The records in ${data} were made by PostgreSQL ${major}, whose programs are not here: install that version, or set PG_BIN to it.`,
  );
}

/** @throws StartRefusal when another user's start made the files: PostgreSQL accepts its own user's only */
export function checkOwner(data: string, user: DatabaseUser | null): void {
  let owner: number;
  try {
    owner = statSync(data).uid;
  } catch (error) {
    throw new StartRefusal(`The database files in ${data} cannot be read (${(error as NodeJS.ErrnoException).code}).`);
  }
  const mine = user?.uid ?? process.getuid?.();
  if (owner !== mine)
    throw new StartRefusal(
      `The database files in ${data} belong to user number ${owner}, not ${mine}: start as the user who made them.`,
    );
}
