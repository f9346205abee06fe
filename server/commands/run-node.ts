import { spawn } from 'node:child_process';

/**
 * Runs a JavaScript program to its end with this terminal, passing on a request to stop. Ctrl-C reaches it by itself;
 * this process only has to outlive it, to say how far it came.
 * @returns its exit status; null when a signal ended it or it could not be started
 */
export function runNode(words: string[]): Promise<number | null> {
  const child = spawn(process.execPath, words, { stdio: 'inherit' });
  const passOn = () => child.kill('SIGTERM');
  const outlive = () => undefined;
  process.on('SIGTERM', passOn).on('SIGINT', outlive);
  return new Promise((resolve) => {
    const end = (status: number | null) => {
      process.off('SIGTERM', passOn).off('SIGINT', outlive);
      resolve(status);
    };
    child.once('error', () => end(null));
    child.once('exit', end);
  });
}
