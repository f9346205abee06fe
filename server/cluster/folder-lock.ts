import { linkSync, readFileSync, renameSync, unlinkSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { StartRefusal } from '../commands/bootstrap/start-refusal.mjs';
import { identityOf, isAlive } from './running-process.ts';

function readIfThere(file: string): string | null {
  try {
    return readFileSync(file, 'utf8');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
}

function holderIsRunning(content: string): boolean {
  const pid = Number.parseInt(content, 10);
  return Number.isInteger(pid) && pid > 0 && isAlive(pid) && identityOf(pid) === content.trim();
}

function busy(folder: string, content: string): StartRefusal {
  const pid = Number.parseInt(content, 10);
  return new StartRefusal(
    `Tarewright already runs on ${folder} (process ${pid}): stop that one, or give this one another TAREWRIGHT_HOME.`,
  );
}

/**
 * Takes the folder for this process, so that two starts never run one database. A lock whose process is gone (kill -9,
 * power cut) is taken over.
 * @returns gives the folder free again
 * @throws StartRefusal when a running process has it
 */
export function lockFolder(folder: string): () => void {
  const file = path.join(folder, 'lock');
  const mine = `${identityOf(process.pid)}\n`;
  for (;;) {
    try {
      writeFileSync(file, mine, { flag: 'wx' });
      return () => {
        if (readIfThere(file) === mine) unlinkSync(file);
      };
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
    }
    const content = readIfThere(file);
    if (content === null) continue;
    if (holderIsRunning(content)) throw busy(folder, content);
    takeAway(file, content, folder);
  }
}

/** Removes just the stale lock that was read: a rename first, because another start may have replaced it meanwhile. */
function takeAway(file: string, stale: string, folder: string): void {
  const aside = `${file}.${process.pid}`;
  try {
    renameSync(file, aside);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return; // somebody else was quicker
    throw error;
  }
  const taken = readFileSync(aside, 'utf8');
  if (taken !== stale) {
    linkSync(aside, file); // not the one that was judged: put it back
    unlinkSync(aside);
    throw busy(folder, taken);
  }
  unlinkSync(aside);
}
