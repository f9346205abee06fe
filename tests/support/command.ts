import { type ChildProcess, spawn } from 'node:child_process';
import { findFreePort } from '../../server/cluster/free-port.ts';

export interface RunningCommand {
  child: ChildProcess;
  /** Everything written so far, output and errors together. */
  output(): string;
  /** Resolves when that text was written; fails when the command ends without it. */
  until(text: string): Promise<void>;
  /** Exit status; null when a signal ended it. */
  ended: Promise<number | null>;
}

/** Runs one of the product's commands as a person would, with these variables and nothing else of its settings. */
export function runCommand(words: string[], variables: Record<string, string>): RunningCommand {
  const { PATH, HOME, TMPDIR, PG_BIN, CHROMIUM } = process.env;
  const child = spawn(process.execPath, ['server/commands/bootstrap.mjs', ...words], {
    env: { PATH, HOME, TMPDIR, PG_BIN, CHROMIUM, NO_COLOR: '1', ...variables },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  const listeners = new Set<() => void>();
  for (const stream of [child.stdout, child.stderr])
    stream.on('data', (chunk: Buffer) => {
      output += chunk.toString();
      for (const listener of listeners) listener();
    });
  const ended = new Promise<number | null>((resolve) => child.once('close', (status) => resolve(status)));
  const until = (text: string) =>
    new Promise<void>((resolve, reject) => {
      const look = () => output.includes(text) && resolve();
      listeners.add(look);
      look();
      void ended.then(() => reject(new Error(`it ended without saying "${text}":\n${output}`)));
    });
  return { child, output: () => output, until, ended };
}

/** Variables for a server of the test's own: its folder, a free port, no demo firms, no log in between. */
export async function ownServer(home: string): Promise<{ PORT: string } & Record<string, string>> {
  const PORT = String(await findFreePort());
  return { TAREWRIGHT_HOME: home, PORT, TAREWRIGHT_DEMO: '0', LOG_LEVEL: 'silent' };
}
