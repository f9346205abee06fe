import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { isAlive } from '../../server/cluster/running-process.ts';
import { runOnce } from '../support/cloned-database.ts';
import { ownServer, type RunningCommand, runCommand } from '../support/command.ts';
import { startThrowawayPostgres } from '../support/throwaway-postgres.ts';

let home: string;
let started: RunningCommand[];

beforeEach(() => {
  home = mkdtempSync('/tmp/tarewright-home-');
  chmodSync(home, 0o711);
  started = [];
});

afterEach(async () => {
  for (const { child, ended } of started) {
    if (child.exitCode === null) child.kill('SIGTERM');
    await ended;
  }
  rmSync(home, { recursive: true, force: true });
});

function start(variables: Record<string, string>): RunningCommand {
  const command = runCommand(['start'], variables);
  started.push(command);
  return command;
}

const readyStatus = async (port: string) => (await fetch(`http://127.0.0.1:${port}/api/v1/ready`)).status;
const postmasterPid = () => Number.parseInt(readFileSync(path.join(home, 'postgres/data/postmaster.pid'), 'utf8'), 10);

async function expectGone(pid: number): Promise<void> {
  while (isAlive(pid)) await new Promise((resolve) => setTimeout(resolve, 20));
}

describe('npm start', () => {
  it('says where it serves, is ready then, and on Ctrl-C leaves nothing running', async () => {
    const variables = await ownServer(home);
    const command = start(variables);
    await command.until('Ctrl-C stops it.');
    expect(command.output()).toContain(`Tarewright is ready: http://127.0.0.1:${variables.PORT}\n`);
    expect(await readyStatus(variables.PORT)).toBe(200);
    const page = await fetch(`http://127.0.0.1:${variables.PORT}/`);
    expect(await page.text()).toContain('<div id="root">');

    const pid = postmasterPid();
    command.child.kill('SIGINT');
    command.child.kill('SIGINT'); // npm passes on what the terminal has sent already
    expect(await command.ended).toBe(0);
    expect(isAlive(pid)).toBe(false);
    expect(existsSync(path.join(home, 'lock'))).toBe(false);
    await expect(readyStatus(variables.PORT)).rejects.toThrow();
  });

  it('recovers by itself after it was killed', async () => {
    const variables = await ownServer(home);
    const first = start(variables);
    await first.until('Ctrl-C stops it.');
    const pid = postmasterPid();
    first.child.kill('SIGKILL');
    await first.ended;
    const second = start(variables);
    await second.until('Ctrl-C stops it.');
    expect(await readyStatus(variables.PORT)).toBe(200);
    await expectGone(pid);
  });

  it('ends, saying so, when its database ends', async () => {
    const variables = await ownServer(home);
    const command = start(variables);
    await command.until('Ctrl-C stops it.');
    process.kill(postmasterPid(), 'SIGQUIT');
    expect(await command.ended).toBe(1);
    expect(command.output()).toContain(`PostgreSQL ended by itself; ${home}/postgres.log says why.\n`);
  });

  it('refuses a busy port in one line and leaves nothing behind', async () => {
    const variables = await ownServer(home);
    const squatter = createServer();
    await new Promise<void>((resolve) => squatter.listen(Number(variables.PORT), '127.0.0.1', resolve));
    try {
      const command = start(variables);
      expect(await command.ended).toBe(1);
      expect(lastLine(command)).toBe(
        `127.0.0.1:${variables.PORT} is already in use: stop what listens there, or set PORT to another one.`,
      );
      expect(existsSync(path.join(home, 'lock'))).toBe(false);
    } finally {
      squatter.close();
    }
  });

  it('refuses a second start on one folder, a folder that is none, a missing program and a bad variable in one line each', async () => {
    const variables = await ownServer(home);
    const running = start(variables);
    await running.until('Ctrl-C stops it.');
    const file = path.join(home, 'file');
    writeFileSync(file, '');
    const refused: [Record<string, string>, RegExp][] = [
      [
        variables,
        /^Tarewright already runs on .* \(process \d+\): stop that one, or give this one another TAREWRIGHT_HOME\.$/,
      ],
      [{ TAREWRIGHT_HOME: `${file}/home` }, /^The data folder .* cannot be read and written \(ENOTDIR\): .*\.$/],
      [
        { PG_BIN: '/nowhere' },
        /^PostgreSQL 15 or later is missing: PG_BIN=\/nowhere does not lead to it; install it with: .*\.$/,
      ],
      [{ PORT: 'http' }, /^PORT is "http": expected a whole number from 1 to 65535\.$/],
    ];
    for (const [more, line] of refused) {
      const command = start({ ...variables, ...more });
      expect(await command.ended).toBe(1);
      expect(lastLine(command)).toMatch(line);
    }
    expect(await readyStatus(variables.PORT)).toBe(200);
  });

  it("works on a server of one's own that DATABASE_URL leads to, and makes its database there", async () => {
    const postgres = await startThrowawayPostgres();
    try {
      const variables = await ownServer(home);
      const command = start({ ...variables, DATABASE_URL: postgres.url('postgres', 'records') });
      await command.until('Ctrl-C stops it.');
      expect(await readyStatus(variables.PORT)).toBe(200);
      expect(existsSync(path.join(home, 'postgres'))).toBe(false);
      const connected = await runOnce<{ usename: string; rolsuper: boolean; rolbypassrls: boolean }>(
        postgres.url('postgres', 'records'),
        `SELECT DISTINCT usename, rolsuper, rolbypassrls FROM pg_stat_activity JOIN pg_roles ON rolname = usename
          WHERE datname = 'records' AND pid <> pg_backend_pid() ORDER BY 1`,
      );
      const bound = { rolsuper: false, rolbypassrls: false };
      expect(connected).toEqual([
        { usename: 'tarewright_app', ...bound },
        { usename: 'tarewright_jobs', ...bound },
      ]);
      command.child.kill('SIGTERM');
      expect(await command.ended).toBe(0);
    } finally {
      await postgres.stop();
    }
  });
});

function lastLine(command: RunningCommand): string {
  return command.output().trimEnd().split('\n').at(-1) ?? '';
}
