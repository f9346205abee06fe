import path from 'node:path';
import process from 'node:process';
import { pathToFileURL } from 'node:url';
import { ensureBuilt, isBuilt } from './build.mjs';
import { ensurePackages } from './packages.mjs';
import { requireChromium, requirePostgres } from './programs.mjs';
import { StartRefusal } from './start-refusal.mjs';

/** Hands the folder of PostgreSQL's programs on, so that they are looked for once. */
function providePostgres() {
  process.env.PG_BIN = requirePostgres().folder;
}

function provideChromium() {
  process.env.CHROMIUM = requireChromium();
}

async function runTypeScript(root, file, rest) {
  const tsx = path.join(root, 'node_modules/tsx/dist/esm/api/index.mjs');
  const { register } = await import(pathToFileURL(tsx).href);
  register();
  const { main } = await import(pathToFileURL(path.join(root, file)).href);
  await main(rest);
}

async function start({ root, rest }) {
  const built = ['client', 'server'].every((side) => isBuilt({ root, side }));
  ensurePackages({ root, withDevelopment: !built }); // a machine that only runs a finished build needs no compilers
  if (!process.env.DATABASE_URL) providePostgres();
  ensureBuilt({ root, side: 'client' });
  const folder = ensureBuilt({ root, side: 'server' });
  process.env.NODE_ENV ??= 'production';
  process.setSourceMapsEnabled(true);
  const { main } = await import(pathToFileURL(path.join(folder, 'start.js')).href);
  await main(rest);
}

async function dev({ root, rest }) {
  ensurePackages({ root, withDevelopment: true });
  if (!process.env.DATABASE_URL) providePostgres();
  process.env.NODE_ENV ??= 'development';
  await runTypeScript(root, 'server/commands/dev.ts', rest);
}

/** A file named on the line needs only what its folder needs; `shared/units/mass.test.ts` needs neither program. */
function needs(rest) {
  const files = rest.filter((word) => !word.startsWith('-'));
  const pureFolder = /^(\.\/)?(shared|src)\//;
  return {
    postgres: files.length === 0 || files.some((file) => !pureFolder.test(file)),
    chromium: files.length === 0 || files.some((file) => file.includes('e2e')),
  };
}

async function test({ root, rest }) {
  ensurePackages({ root, withDevelopment: true });
  const { postgres, chromium } = needs(rest);
  if (postgres) providePostgres();
  if (chromium) provideChromium();
  await runTypeScript(root, 'server/commands/test.ts', rest);
}

async function bench({ root, rest }) {
  ensurePackages({ root, withDevelopment: true });
  providePostgres();
  provideChromium();
  await runTypeScript(root, 'tests/bench/run-bench.ts', rest);
}

const commands = { start, dev, test, bench };

export async function runCommand({ root, name, rest }) {
  const command = commands[name];
  if (!command) throw new StartRefusal(`Say what to do: ${Object.keys(commands).join(', ')}.`);
  // A relative folder means one beside where the person typed it; from here on the checkout is the working folder.
  if (process.env.TAREWRIGHT_HOME) process.env.TAREWRIGHT_HOME = path.resolve(process.env.TAREWRIGHT_HOME);
  process.chdir(root);
  await command({ root, rest });
}
