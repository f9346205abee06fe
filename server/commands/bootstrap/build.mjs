import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { StartRefusal } from './start-refusal.mjs';

const settled = ['package-lock.json', 'tsconfig.json', 'vite.config.ts', 'server/commands/bootstrap/build.mjs'];
const inputs = {
  client: ['index.html', 'src', 'shared', 'data', 'fonts', ...settled],
  server: ['server', 'shared', 'data', ...settled],
};

function addToHash(hash, root, relative) {
  const file = path.join(root, relative);
  if (!existsSync(file)) return;
  if (statSync(file).isDirectory()) {
    for (const name of readdirSync(file).sort()) addToHash(hash, root, `${relative}/${name}`);
  } else if (!/\.test\.tsx?$/.test(relative)) {
    hash.update(relative).update('\0').update(readFileSync(file)).update('\0');
  }
}

function hashOfInputs(root, side) {
  const hash = createHash('sha256');
  for (const relative of inputs[side]) addToHash(hash, root, relative);
  return hash.digest('hex');
}

const stampName = '.inputs';

/** Whether dist/<side> was built from just these sources. */
export function isBuilt({ root, side }) {
  const stamp = path.join(root, 'dist', side, stampName);
  return existsSync(stamp) && readFileSync(stamp, 'utf8') === hashOfInputs(root, side);
}

/**
 * Builds dist/<side> if its sources changed. It is built beside and put in place by a rename, so that a failed build
 * leaves the last good one, and a server that is running never meets a half-written folder.
 */
export function ensureBuilt({ root, side }) {
  const target = path.join(root, 'dist', side);
  if (isBuilt({ root, side })) return target;
  const inputHash = hashOfInputs(root, side);
  const beside = path.join(root, 'dist', `.${side}-${process.pid}`);
  const outgoing = `${beside}-old`;
  console.error(`Building the ${side} ...`);
  const mode = side === 'server' ? ['--mode', 'server'] : [];
  const vite = path.join(root, 'node_modules/vite/bin/vite.js');
  try {
    const args = [vite, 'build', ...mode, '--outDir', beside, '--emptyOutDir', '--logLevel', 'warn'];
    // Under a test runner NODE_ENV is `test`, with which React's development code would be built in.
    const env = { ...process.env, NODE_ENV: 'production' };
    const built = spawnSync(process.execPath, args, { cwd: root, env, stdio: ['ignore', 2, 2] });
    if (built.status !== 0)
      throw new StartRefusal(`The ${side} could not be built; the message of the build stands above.`);
    writeFileSync(path.join(beside, stampName), inputHash);
    mkdirSync(path.dirname(target), { recursive: true });
    if (existsSync(target)) renameSync(target, outgoing);
    renameSync(beside, target);
  } finally {
    rmSync(beside, { recursive: true, force: true });
    rmSync(outgoing, { recursive: true, force: true });
  }
  return target;
}
