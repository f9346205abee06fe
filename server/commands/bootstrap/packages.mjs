import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { StartRefusal } from './start-refusal.mjs';

const hashOf = (text) => createHash('sha256').update(text).digest('hex');

/** Does what npm wrote down about node_modules hold every package of the lock file, in its version? */
function installedAsLocked(lockText, installedText, withDevelopment) {
  const locked = JSON.parse(lockText).packages;
  const installed = JSON.parse(installedText).packages;
  return Object.entries(locked).every(([place, wanted]) => {
    if (place === '' || wanted.optional || (wanted.dev && !withDevelopment)) return true;
    return installed[place]?.version === wanted.version && installed[place]?.integrity === wanted.integrity;
  });
}

/**
 * Installs from the lock file when node_modules is missing, half written or older than it. The hash of the lock file is
 * kept in node_modules; where it differs (somebody ran npm by hand) the contents decide, so that nothing is installed twice.
 */
export function ensurePackages({ root, withDevelopment }) {
  const modules = path.join(root, 'node_modules');
  const stampFile = path.join(modules, '.tarewright-lock-hash');
  const lockText = readFileSync(path.join(root, 'package-lock.json'), 'utf8');
  const stamp = `${hashOf(lockText)} ${withDevelopment ? 'all' : 'run'}\n`;
  const covers = (kept) => kept === stamp || kept === stamp.replace(' run', ' all');
  if (existsSync(stampFile) && covers(readFileSync(stampFile, 'utf8'))) return;

  const npmsList = path.join(modules, '.package-lock.json'); // npm writes it last, so a broken install has none
  const upToDate = existsSync(npmsList) && installedAsLocked(lockText, readFileSync(npmsList, 'utf8'), withDevelopment);
  if (!upToDate) install(root, withDevelopment);
  try {
    writeFileSync(stampFile, stamp);
  } catch {
    // Read-only node_modules: then the contents are compared each time, which takes a few milliseconds.
  }
}

function install(root, withDevelopment) {
  console.error('Installing packages from the lock file (npm ci) ...');
  const which = withDevelopment ? '--include=dev' : '--omit=dev';
  const npm = spawnSync('npm', ['ci', which, '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    stdio: 'inherit',
  });
  if (npm.error) throw new StartRefusal(`npm is missing (${npm.error.message}): install Node.js together with npm.`);
  if (npm.status !== 0) throw new StartRefusal('npm ci could not install the packages; its message stands above.');
}
