import { spawnSync } from 'node:child_process';
import { accessSync, constants, existsSync, readdirSync } from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { StartRefusal } from './start-refusal.mjs';

/** CREATE DATABASE ... STRATEGY and what the migrations use came with PostgreSQL 15. */
export const oldestPostgresMajor = 15;

function isProgram(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

function foldersOnPath() {
  return (process.env.PATH ?? '').split(path.delimiter).filter(Boolean);
}

/** `<parent>/<version><tail>` for every version there, e.g. Debian's /usr/lib/postgresql/15/bin. */
function versionedFolders(parent, pattern, tail) {
  if (!existsSync(parent)) return [];
  return readdirSync(parent)
    .filter((name) => pattern.test(name))
    .map((name) => path.join(parent, name, tail));
}

function postgresMajor(folder) {
  if (!isProgram(path.join(folder, 'initdb')) || !isProgram(path.join(folder, 'postgres'))) return null;
  const said = spawnSync(path.join(folder, 'postgres'), ['--version'], { encoding: 'utf8' });
  const major = /PostgreSQL\)? (\d+)/.exec(said.stdout ?? '')?.[1];
  return major ? Number(major) : null;
}

/**
 * Where PostgreSQL's server programs are: PG_BIN, then PATH, then the places where packages put them, the highest
 * version first. With `major`, only that one: a data folder is read by the version that made it and no other.
 */
export function findPostgres({ major } = {}) {
  const named = process.env.PG_BIN ? [process.env.PG_BIN] : null;
  const onPath = foldersOnPath();
  const packaged = [
    ...versionedFolders('/usr/lib/postgresql', /^\d+$/, 'bin'),
    ...versionedFolders('/usr', /^pgsql-\d+$/, 'bin'),
    ...versionedFolders('/opt/homebrew/opt', /^postgresql@\d+$/, 'bin'),
    ...versionedFolders('/usr/local/opt', /^postgresql@\d+$/, 'bin'),
    '/usr/local/pgsql/bin',
  ];
  const found = (folders) => folders.map((folder) => ({ folder, major: postgresMajor(folder) })).filter((p) => p.major);
  const fits = (p) => (major === undefined ? p.major >= oldestPostgresMajor : p.major === major);
  const newestFirst = (list) => [...list].sort((a, b) => b.major - a.major);
  const asNamed = named ? found(named).find(fits) : undefined;
  if (asNamed) return asNamed;
  // A person who names a folder gets that one or none; files of an older version still find theirs beside the newest.
  if (named && major === undefined) return null;
  return found(onPath).find(fits) ?? newestFirst(found(packaged)).find(fits) ?? null;
}

/** A Chromium to drive: CHROMIUM, then PATH, then Debian's place. */
export function findChromium() {
  if (process.env.CHROMIUM) return isProgram(process.env.CHROMIUM) ? process.env.CHROMIUM : null;
  const places = [...foldersOnPath(), '/usr/bin', '/usr/local/bin'];
  for (const name of ['chromium', 'chromium-browser'])
    for (const folder of places) if (isProgram(path.join(folder, name))) return path.join(folder, name);
  return null;
}

const mayInstall = () => existsSync('/etc/debian_version') && process.getuid?.() === 0;

function aptLine(debianPackage) {
  return `apt-get install -y --no-install-recommends ${debianPackage}`;
}

function installFromDebian(debianPackage) {
  console.error(`Installing Debian's ${debianPackage} once: ${aptLine(debianPackage)}`);
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const run = (...words) => spawnSync('apt-get', words, { env, stdio: ['ignore', 'ignore', 'pipe'], encoding: 'utf8' });
  run('update', '-q');
  const installed = run('install', '-y', '-q', '--no-install-recommends', debianPackage);
  if (installed.status !== 0) console.error(installed.stderr?.trim()); // it warns a lot where all is well
}

/** The program, installed from Debian where this process may do so; otherwise the one line that a person has to run. */
function requireProgram({ what, find, debianPackage, variable }) {
  const found = find();
  if (found) return found;
  if (mayInstall() && !process.env[variable]) {
    installFromDebian(debianPackage);
    const installed = find();
    if (installed) return installed;
  }
  const wrongPlace = process.env[variable] ? `${variable}=${process.env[variable]} does not lead to it; ` : '';
  const line = existsSync('/etc/debian_version')
    ? `sudo ${aptLine(debianPackage)}`
    : `your system's package ${debianPackage}`;
  throw new StartRefusal(`${what} is missing: ${wrongPlace}install it with: ${line} (or set ${variable}).`);
}

export function requirePostgres() {
  return requireProgram({
    what: `PostgreSQL ${oldestPostgresMajor} or later`,
    find: () => findPostgres(),
    debianPackage: 'postgresql',
    variable: 'PG_BIN',
  });
}

export function requireChromium() {
  return requireProgram({ what: 'Chromium', find: findChromium, debianPackage: 'chromium', variable: 'CHROMIUM' });
}
