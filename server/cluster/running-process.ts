import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';

const isLinux = process.platform === 'linux';

export function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'EPERM'; // it lives, and belongs to another user
  }
}

function read(file: string): string {
  try {
    return readFileSync(file, 'utf8');
  } catch {
    return '';
  }
}

function ask(pid: number, column: string): string {
  return spawnSync('ps', ['-o', `${column}=`, '-p', String(pid)], { encoding: 'utf8' }).stdout?.trim() ?? '';
}

/** Command line of a process with its words separated by spaces; empty when there is no such process. */
export function commandLineOf(pid: number): string {
  return isLinux ? read(`/proc/${pid}/cmdline`).replaceAll('\0', ' ').trim() : ask(pid, 'command');
}

/**
 * Which process bears this number: its number, when it began and, on Linux, in which boot. After a crash or a power cut
 * another program may bear a number that was noted down; it never began at the same tick.
 */
export function identityOf(pid: number): string {
  if (!isLinux) return `${pid} ${ask(pid, 'lstart')}`;
  const afterName = read(`/proc/${pid}/stat`).replace(/^.*\) /s, ''); // the name may hold spaces and brackets
  const startedAtTicks = afterName.split(' ')[19] ?? '';
  return `${pid} ${startedAtTicks} ${read('/proc/sys/kernel/random/boot_id').trim()}`;
}
