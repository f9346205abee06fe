import { readdirSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { ensureBuilt } from '../../server/commands/bootstrap/build.mjs';
import { StartRefusal } from '../../server/commands/bootstrap/start-refusal.mjs';
import { startMigratedPostgres } from '../support/migrated-postgres.ts';
import type { ThrowawayPostgres } from '../support/throwaway-postgres.ts';
import { type Bench, type BenchContext, toLine, toSentence } from './bench.ts';

const folder = path.dirname(fileURLToPath(import.meta.url));
const root = path.resolve(folder, '../..');
const ending = '.bench.ts';

function findBenches(names: string[]): string[] {
  const all = readdirSync(folder)
    .filter((file) => file.endsWith(ending))
    .map((file) => file.slice(0, -ending.length))
    .sort();
  const unknown = names.find((name) => !all.includes(name));
  if (unknown) throw new StartRefusal(`There is no bench ${unknown}; there are: ${all.join(', ')}.`);
  return names.length > 0 ? names : all;
}

async function runOne(name: string): Promise<boolean> {
  const started: ThrowawayPostgres[] = [];
  const context: BenchContext = {
    async startPostgres() {
      const postgres = await startMigratedPostgres({ durable: true });
      started.push(postgres);
      return postgres;
    },
    clientFolder: () => ensureBuilt({ root, side: 'client' }),
    say: (line) => console.error(line),
  };
  try {
    const { bench } = (await import(pathToFileURL(path.join(folder, `${name}${ending}`)).href)) as { bench: Bench };
    let allHold = true;
    for (const figure of [await bench.run(context)].flat()) {
      const line = toLine(figure);
      console.log(JSON.stringify(line));
      console.error(toSentence(figure));
      allHold &&= line.holds;
    }
    return allHold;
  } catch (error) {
    console.error(`${name} broke off:`, error);
    return false;
  } finally {
    for (const postgres of started) await postgres.stop();
  }
}

/**
 * `npm run bench -- [name…]`: one JSON line a figure on the output, sentences on the error output, one bench after the
 * other. The exit status is 1 when a bar does not hold or a bench broke off.
 */
export async function main(names: string[]): Promise<void> {
  const chosen = findBenches(names);
  let allHold = chosen.length > 0;
  for (const name of chosen) allHold = (await runOne(name)) && allHold;
  process.exitCode = allHold ? 0 : 1;
}
