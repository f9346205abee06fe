import { type ChildProcess, spawn } from 'node:child_process';
import {
  chmodSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { createInterface } from 'node:readline';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { type Cluster, connectionUrl, startCluster } from '../../server/cluster/cluster.ts';
import { findExistingCluster, readClusterNote } from '../../server/cluster/data-folder.ts';
import { lockFolder } from '../../server/cluster/folder-lock.ts';
import { prepareHome, readSecrets, type Secrets } from '../../server/cluster/home.ts';
import { isAlive } from '../../server/cluster/running-process.ts';
import { runOnce } from '../support/cloned-database.ts';

let home: string;
let running: Cluster[];
let programs: ChildProcess[];
const isRoot = process.getuid?.() === 0;

beforeEach(() => {
  home = mkdtempSync('/tmp/tarewright-home-');
  chmodSync(home, 0o711);
  running = [];
  programs = [];
});

afterEach(async () => {
  for (const program of programs) await killed(program);
  for (const cluster of running) await cluster.stop();
  const elsewhere = existsSync(path.join(home, 'cluster.json')) ? (readClusterNote(home)?.folder ?? '') : '';
  if (elsewhere.startsWith('/var/lib/tarewright-')) rmSync(elsewhere, { recursive: true, force: true });
  rmSync(home, { recursive: true, force: true });
});

async function start(said: string[] = []): Promise<{ cluster: Cluster; secrets: Secrets; url: string }> {
  prepareHome(home);
  const secrets = readSecrets(home, { recordsExist: findExistingCluster(home) !== null });
  const cluster = await startCluster({ home, secrets, say: (line) => said.push(line) });
  running.push(cluster);
  return { cluster, secrets, url: cluster.superuserUrl('postgres') };
}

/** The same in a program of its own. */
async function startProgram(): Promise<{ program: ChildProcess; url: string }> {
  const words = ['--import', 'tsx', 'tests/commands/run-cluster.ts', home];
  const program = spawn(process.execPath, words, { stdio: ['ignore', 'pipe', 'inherit'] });
  programs.push(program);
  if (!program.stdout) throw new Error('no output');
  for await (const url of createInterface({ input: program.stdout })) return { program, url };
  throw new Error('the program ended without an address');
}

async function killed(program: ChildProcess): Promise<void> {
  if (program.exitCode !== null || program.signalCode !== null) return;
  const ended = new Promise((resolve) => program.once('exit', resolve));
  program.kill('SIGKILL');
  await ended;
}

const postmasterPid = () => Number.parseInt(readFileSync(path.join(home, 'postgres/data/postmaster.pid'), 'utf8'), 10);

/** PostgreSQL's guard: its parent, the shell beside it, and that one's `cat`; found in /proc, as not every system has ps. */
function supervisorsOf(pid: number): number[] {
  const relation = (id: string) => {
    const text = existsSync(`/proc/${id}/stat`) ? readFileSync(`/proc/${id}/stat`, 'utf8') : '';
    const [, parent, group] = text
      .replace(/^.*\) /s, '')
      .split(' ')
      .map(Number);
    return { id: Number(id), parent, group };
  };
  const all = readdirSync('/proc')
    .filter((id) => /^\d+$/.test(id))
    .map(relation);
  const group = all.find(({ id }) => id === pid)?.group;
  return all
    .filter(({ id, parent, group: its }) => its === group && id !== pid && parent !== pid)
    .map(({ id }) => id)
    .sort((a, b) => a - b);
}

async function waitUntilGone(pid: number): Promise<void> {
  while (isAlive(pid)) await new Promise((resolve) => setTimeout(resolve, 20));
}

async function keepRow(url: string): Promise<void> {
  await runOnce(url, 'CREATE TABLE IF NOT EXISTS kept (grams bigint)');
  await runOnce(url, 'INSERT INTO kept VALUES (1290)');
}
const keptRows = (url: string) => runOnce<{ grams: string }>(url, 'SELECT grams FROM kept');

describe('The own PostgreSQL of a data folder', () => {
  it('is durable, listens on loopback only and asks every role for its generated password', async () => {
    const { secrets, url } = await start();
    const names = ['fsync', 'synchronous_commit', 'full_page_writes', 'listen_addresses', 'data_checksums'];
    const settings = await runOnce<{ name: string; setting: string }>(
      url,
      'SELECT name, setting FROM pg_settings WHERE name = ANY($1)',
      [names],
    );
    expect(Object.fromEntries(settings.map(({ name, setting }) => [name, setting]))).toEqual({
      fsync: 'on',
      synchronous_commit: 'on',
      full_page_writes: 'on',
      data_checksums: 'on',
      listen_addresses: '127.0.0.1',
    });
    const port = Number(new URL(url).port);
    await expect(runOnce(connectionUrl('postgres', 'wrong', port, 'postgres'), 'SELECT 1')).rejects.toMatchObject({
      code: '28P01', // invalid_password
    });
    const hash = await runOnce<{ rolpassword: string }>(url, 'SELECT rolpassword FROM pg_authid WHERE rolname = $1', [
      'postgres',
    ]);
    expect(hash[0]?.rolpassword).toMatch(/^SCRAM-SHA-256\$/);
    expect(statSync(path.join(home, 'secrets.json')).mode & 0o777).toBe(0o600);
    expect(readFileSync(path.join(home, 'postgres.log'), 'utf8')).not.toContain(secrets.superuser);
  });

  it('comes back on its port with its rows after it was stopped', async () => {
    const first = await start();
    await keepRow(first.url);
    await first.cluster.stop();
    const second = await start();
    expect(second.url).toBe(first.url);
    expect(await keptRows(second.url)).toEqual([{ grams: '1290' }]);
  });

  it('moves to another port when its own was taken meanwhile', async () => {
    const first = await start();
    await first.cluster.stop();
    const port = Number(new URL(first.url).port);
    const squatter = createServer();
    await new Promise<void>((resolve) => squatter.listen(port, '127.0.0.1', resolve));
    try {
      const second = await start();
      expect(Number(new URL(second.url).port)).not.toBe(port);
      await runOnce(second.url, 'SELECT 1');
    } finally {
      squatter.close();
    }
  });

  it('ends by itself when its program is killed, and gives the rows back at the next start', async () => {
    const { program, url } = await startProgram();
    await keepRow(url);
    const pid = postmasterPid();
    await killed(program);
    await waitUntilGone(pid);
    const next = await startProgram(); // which also takes over the killed program's lock
    expect(await keptRows(next.url)).toEqual([{ grams: '1290' }]);
  });

  it('recovers committed rows when PostgreSQL was killed together with its program, as by a power cut', async () => {
    const { program, url } = await startProgram();
    await keepRow(url);
    const pid = postmasterPid();
    process.kill(pid, 'SIGKILL');
    await killed(program);
    const next = await startProgram();
    expect(await keptRows(next.url)).toEqual([{ grams: '1290' }]);
    expect(readFileSync(path.join(home, 'postgres.log'), 'utf8')).toContain('was not properly shut down');
  });

  it('replaces a PostgreSQL that was left running because its supervisor was killed too', async () => {
    const { program, url } = await startProgram();
    await keepRow(url);
    const pid = postmasterPid();
    const supervisors = supervisorsOf(pid);
    program.kill('SIGSTOP'); // awake, it would close the pipe when its child ends, and PostgreSQL would stop
    expect(supervisors).toHaveLength(3);
    for (const supervisor of supervisors) process.kill(supervisor, 'SIGKILL');
    await killed(program);
    expect(isAlive(pid)).toBe(true);
    const next = await startProgram();
    expect(isAlive(pid)).toBe(false);
    expect(await keptRows(next.url)).toEqual([{ grams: '1290' }]);
  });

  it('is not misled by a note whose process number another program bears now', async () => {
    const first = await start();
    await keepRow(first.url);
    await first.cluster.stop();
    const data = path.join(home, 'postgres/data');
    writeFileSync(path.join(data, 'postmaster.pid'), `${process.pid}\n${data}\n0\n1\n\n\n\n`);
    const second = await start();
    expect(await keptRows(second.url)).toEqual([{ grams: '1290' }]);
    expect(postmasterPid()).not.toBe(process.pid);
  });

  it('throws away a cluster that was only half made', async () => {
    mkdirSync(path.join(home, 'postgres/data.new'), { recursive: true });
    writeFileSync(path.join(home, 'postgres/data.new/PG_VERSION'), '15\n');
    const { url } = await start();
    await runOnce(url, 'SELECT 1');
    expect(existsSync(path.join(home, 'postgres/data.new'))).toBe(false);
  });

  if (isRoot) {
    it('is kept in /var/lib when its user cannot enter the data folder, and is found there again', async () => {
      chmodSync(home, 0o700);
      const said: string[] = [];
      const first = await start(said);
      expect(said).toEqual([
        expect.stringMatching(/cannot enter .* are kept in \/var\/lib\/tarewright-[0-9a-f]{8}\.$/),
      ]);
      await keepRow(first.url);
      await first.cluster.stop();
      const second = await start(said);
      expect(said).toHaveLength(1);
      expect(await keptRows(second.url)).toEqual([{ grams: '1290' }]);
    });
  }
});

describe('A data folder', () => {
  it("is one start's at a time", async () => {
    const { program } = await startProgram();
    expect(() => lockFolder(home)).toThrow(
      `Tarewright already runs on ${home} (process ${program.pid}): stop that one, or give this one another TAREWRIGHT_HOME.`,
    );
    await killed(program);
    lockFolder(home)();
  });

  it('is refused in one line when it cannot be one', () => {
    const file = path.join(home, 'file');
    writeFileSync(file, '');
    expect(() => prepareHome(path.join(file, 'home'))).toThrow(
      `The data folder ${file}/home cannot be read and written (ENOTDIR): give it to this user, or set TAREWRIGHT_HOME to another folder.`,
    );
    expect(() => prepareHome('/proc/tarewright')).toThrow(
      /^The data folder \/proc\/tarewright cannot be read and written/,
    );
  });

  it('never gets new passwords while a database needs the old ones', async () => {
    const { cluster } = await start();
    await cluster.stop();
    writeFileSync(path.join(home, 'secrets.json'), '{"superuser":');
    await expect(start()).rejects.toThrow(`${home}/secrets.json is damaged: put it back from a backup.`);
    rmSync(path.join(home, 'secrets.json'));
    await expect(start()).rejects.toThrow(`${home}/secrets.json is missing, and the database beside it needs it`);
  });

  it('whose database files went missing is refused, and nothing is made in their place', async () => {
    const { cluster } = await start();
    await cluster.stop();
    rmSync(path.join(home, 'postgres'), { recursive: true });
    await expect(start()).rejects.toThrow(`The database files in ${home}/postgres/data are missing`);
    expect(existsSync(path.join(home, 'postgres'))).toBe(false);
  });
});
