import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';

/** Whom PostgreSQL's programs run as. */
export interface DatabaseUser {
  name: string;
  uid: number;
  gid: number;
}

/** PostgreSQL refuses root: then the package's own user, else nobody. Null: this process' own user will do. */
export function findDatabaseUser(): DatabaseUser | null {
  if (process.getuid?.() !== 0) return null;
  const rows = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .map((line) => line.split(':'));
  const row = rows.find(([name]) => name === 'postgres') ?? rows.find(([name]) => name === 'nobody');
  if (!row) throw new Error('neither a user postgres nor a user nobody in /etc/passwd');
  return { name: String(row[0]), uid: Number(row[2]), gid: Number(row[3]) };
}

/** Options for spawn: its user, nothing of this process' environment, and a working folder that everybody may enter. */
export function asDatabaseUser(user: DatabaseUser | null) {
  const env = { PATH: process.env.PATH ?? '/usr/bin:/bin', LC_ALL: 'C.UTF-8', TZ: 'UTC' };
  return { ...(user ? { uid: user.uid, gid: user.gid } : {}), cwd: '/', env };
}

/** Whether that user gets into a folder: every folder above it counts, and root's home is usually closed to others. */
export function canEnter(folder: string, user: DatabaseUser | null): boolean {
  return spawnSync('/bin/sh', ['-c', 'cd "$1"', 'sh', folder], asDatabaseUser(user)).status === 0;
}
