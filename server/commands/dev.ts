import { type ChildProcess, spawn } from 'node:child_process';
import { rmSync } from 'node:fs';
import { connect } from 'node:net';
import path from 'node:path';
import type { ViteDevServer } from 'vite';
import { findFreePort } from '../cluster/free-port.ts';
import { writeDurably } from '../cluster/home.ts';
import { StartRefusal } from './bootstrap/start-refusal.mjs';
import { claimHome, describeInstallation, type Installation, openInstallation } from './installation.ts';
import { projectRoot } from './project-root.ts';
import { shutdownOnSignals } from './shutdown.ts';

/** What the restarted part is told, in a file: the whole installation but the database, which goes on running. */
export interface DevServerOrder {
  settings: Installation['settings'];
  databaseUrls: Installation['databaseUrls'];
}

/** The API in a process of its own, which tsx starts again whenever one of its files changes. */
function spawnApi(orderFile: string): ChildProcess {
  const words = ['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'server/commands/dev-server.ts'];
  return spawn(process.execPath, words, {
    cwd: projectRoot,
    env: { ...process.env, TAREWRIGHT_DEV_ORDER: orderFile },
    stdio: ['pipe', 'inherit', 'inherit'], // the pipe says nothing; its end tells that this process is gone
  });
}

function hasEnded(child: ChildProcess): boolean {
  return child.exitCode !== null || child.signalCode !== null;
}

async function end(child: ChildProcess): Promise<void> {
  if (hasEnded(child)) return;
  const ended = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  await ended;
}

function listens(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('error', () => resolve(false));
    socket.once('connect', () => {
      socket.destroy();
      resolve(true);
    });
  });
}

async function waitForApi(api: ChildProcess, port: number): Promise<void> {
  while (!(await listens(port))) {
    if (hasEnded(api)) throw new StartRefusal('The server ended; its message stands above.');
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

/** The client from its sources, with hot reload; what is not the client's goes to the API. */
async function makeClient(settings: Installation['settings'], apiPort: number): Promise<ViteDevServer> {
  const { createServer } = await import('vite');
  const toApi = { target: `http://127.0.0.1:${apiPort}`, changeOrigin: false };
  const proxy = { '/api': toApi, '/dev/mail': toApi };
  const server = { host: settings.host, port: settings.port, strictPort: true, proxy };
  return createServer({ root: projectRoot, logLevel: 'warn', clearScreen: false, server });
}

/**
 * `npm run dev`: the database and demo firms of `npm start`, with both sides reloaded as their files change. The API loads
 * its modules while the database is made ready, and is told by a file which one that is.
 */
export async function main(): Promise<void> {
  const shutdown = shutdownOnSignals();
  const claim = await claimHome();
  shutdown.add(claim.release);
  try {
    const orderFile = path.join(claim.settings.home, 'dev-server.json');
    rmSync(orderFile, { force: true });
    const api = spawnApi(orderFile);
    shutdown.add(() => end(api));
    const installation = await openInstallation(claim, (line) => console.log(line));
    shutdown.add(installation.close);
    shutdown.add(() => end(api)); // once more: it ends before its database, and also when that could not be opened

    const { settings, databaseUrls } = installation;
    const apiPort = await findFreePort();
    const order: DevServerOrder = { settings: { ...settings, host: '127.0.0.1', port: apiPort }, databaseUrls };
    writeDurably(orderFile, JSON.stringify(order), 0o600);
    shutdown.add(() => rmSync(orderFile, { force: true }));
    const client = await makeClient(settings, apiPort);
    shutdown.add(() => client.close());
    await waitForApi(api, apiPort);
    await client.listen();
    for (const line of describeInstallation(installation)) console.log(line);
  } catch (error) {
    await shutdown.run();
    throw error;
  }
}
