import { type ChildProcess, spawn } from 'node:child_process';
import { connect } from 'node:net';
import { createServer, type ViteDevServer } from 'vite';
import { findFreePort } from '../cluster/free-port.ts';
import { StartRefusal } from './bootstrap/start-refusal.mjs';
import { describeInstallation, type Installation, openInstallation } from './installation.ts';
import { projectRoot } from './project-root.ts';
import { stopOnSignals } from './stop-signals.ts';

/** What the restarted part is told, by its environment: the whole installation but the database, which goes on running. */
export interface DevServerOrder {
  settings: Installation['settings'];
  databaseUrls: Installation['databaseUrls'];
}

/** The API in a process of its own, which tsx starts again whenever one of its files changes. */
function spawnApi({ settings, databaseUrls }: Installation, port: number): ChildProcess {
  const order: DevServerOrder = { settings: { ...settings, host: '127.0.0.1', port }, databaseUrls };
  const words = ['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'server/commands/dev-server.ts'];
  return spawn(process.execPath, words, {
    cwd: projectRoot,
    env: { ...process.env, TAREWRIGHT_DEV_SERVER: JSON.stringify(order) },
    stdio: ['ignore', 'inherit', 'inherit'],
  });
}

function listens(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('connect', () => resolve(true)).once('error', () => resolve(false));
    socket.once('connect', () => socket.destroy());
  });
}

async function waitForApi(api: ChildProcess, port: number): Promise<void> {
  while (!(await listens(port))) {
    if (api.exitCode !== null) throw new StartRefusal('The server ended; its message stands above.');
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

/** The client from its sources, with hot reload; what is not the client's goes to the API. */
function startClient({ settings }: Installation, apiPort: number): Promise<ViteDevServer> {
  const { host, port } = settings;
  const proxy = { '/api': { target: `http://127.0.0.1:${apiPort}`, changeOrigin: false } };
  const server = { host, port, strictPort: true, proxy };
  return createServer({ root: projectRoot, logLevel: 'warn', clearScreen: false, server });
}

async function end(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const ended = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  await ended;
}

/** `npm run dev`: the database and demo firms of `npm start`, with both sides reloaded as their files change. */
export async function main(): Promise<void> {
  let close = async (): Promise<void> => process.exit(130);
  stopOnSignals(() => close());

  const installation = await openInstallation((line) => console.log(line));
  const apiPort = await findFreePort();
  const api = spawnApi(installation, apiPort);
  close = async () => {
    await end(api);
    await installation.close();
  };
  try {
    const client = await startClient(installation, apiPort);
    close = async () => {
      await client.close();
      await end(api);
      await installation.close();
    };
    await waitForApi(api, apiPort);
    await client.listen();
  } catch (error) {
    await close();
    throw error;
  }
  for (const line of describeInstallation(installation)) console.log(line);
}
