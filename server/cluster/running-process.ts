import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';

const isLinux = process.platform === 'linux';

/** Whether it runs. One that ended and was not yet collected by its parent (a zombie) does not. */
export function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return stateOf(pid) !== 'Z';
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

/** The fields of /proc/<pid>/stat after the name, which may hold spaces and brackets: state first, start time 20th. */
function statFields(pid: number): string[] {
  return read(`/proc/${pid}/stat`)
    .replace(/^.*\) /s, '')
    .split(' ');
}

function stateOf(pid: number): string {
  return (isLinux ? (statFields(pid)[0] ?? '') : ask(pid, 'stat')).charAt(0);
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
  const startedAtTicks = statFields(pid)[19] ?? '';
  return `${pid} ${startedAtTicks} ${read('/proc/sys/kernel/random/boot_id').trim()}`;
}
