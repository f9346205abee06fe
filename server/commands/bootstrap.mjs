/**
 * The one entry of `npm start`, `npm run dev`, `npm test` and `npm run bench`. Plain Node.js without packages, because on
 * a fresh clone there are none: it sees to the Node.js version, the packages, PostgreSQL's programs, Chromium where a
 * browser is driven, and the build, then hands over to the TypeScript command in the same process, so that Ctrl-C and
 * the exit status are the command's own.
 */
import { readFileSync } from 'node:fs';
import process from 'node:process';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('../..', import.meta.url));

/** The range in package.json, so that it is stated once. Old Node.js reads this file too: keep its syntax plain. */
function nodeIsSuitable() {
  const range = JSON.parse(readFileSync(`${root}/package.json`, 'utf8')).engines.node;
  const bounds = /^>=(\d+)\.(\d+) <(\d+)$/.exec(range);
  const [major, minor] = process.versions.node.split('.').map(Number);
  const fits = major >= Number(bounds[1]) && major < Number(bounds[3]);
  const old = major === Number(bounds[1]) && minor < Number(bounds[2]);
  if (fits && !old) return true;
  console.error(
    `Tarewright needs Node.js ${range}, this is ${process.versions.node}: install that version and start again.`,
  );
  return false;
}

if (!nodeIsSuitable()) process.exit(1);
import('./bootstrap/run-command.mjs')
  .then(({ runCommand }) => runCommand({ root, name: process.argv[2], rest: process.argv.slice(3) }))
  .catch((error) => {
    // A refusal is one sentence for the person; anything else is a fault of ours and keeps its stack.
    console.error(error && error.name === 'StartRefusal' ? error.message : error);
    process.exit(1);
  });
