import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { runNode } from './run-node.ts';
import { countVitestResults, type Tally } from './test-tally.ts';

/** Runs one of the checks that pass or fail as a whole; its output is shown as it comes. */
async function check(name: string, program: string, words: string[]): Promise<Tally> {
  console.log(`\n${name}`);
  const passed = (await runNode([program, ...words])) === 0;
  console.log(`${name}: ${passed ? 'passed' : 'failed'}`);
  return { passed: passed ? 1 : 0, failed: passed ? 0 : 1, skipped: [] };
}

async function runVitest(words: string[]): Promise<Tally> {
  console.log('\nTests');
  const folder = mkdtempSync(path.join(tmpdir(), 'tarewright-test-'));
  const report = path.join(folder, 'vitest.json');
  try {
    const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`];
    const run = ['node_modules/vitest/vitest.mjs', 'run', ...reporters, ...words];
    const status = await runNode(run);
    return countVitestResults(readIfThere(report), status);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function readIfThere(file: string): string | null {
  try {
    return readFileSync(file, 'utf8');
  } catch {
    return null;
  }
}

/**
 * `npm test`: types, lint and every test. With words (a file, `-t name`) only Vitest runs, on those.
 * The last line is `N passed, N failed`; the exit status is 0 only when nothing failed and something ran.
 */
export async function main(words: string[]): Promise<void> {
  const tallies: Tally[] = [];
  if (words.length === 0) {
    tallies.push(await check('Types', 'node_modules/typescript/bin/tsc', ['--noEmit']));
    tallies.push(await check('Lint', 'node_modules/@biomejs/biome/bin/biome', ['check', '--error-on-warnings', '.']));
  }
  tallies.push(await runVitest(words));
  const skipped = tallies.flatMap((tally) => tally.skipped);
  const passed = tallies.reduce((sum, tally) => sum + tally.passed, 0);
  const failed = tallies.reduce((sum, tally) => sum + tally.failed, 0);
  if (skipped.length > 0)
    console.log(`\nSkipped, ${skipped.length}:\n${skipped.map((name) => `  ${name}`).join('\n')}`);
  console.log(`\n${passed} passed, ${failed} failed`);
  process.exitCode = failed === 0 && passed > 0 ? 0 : 1;
}
