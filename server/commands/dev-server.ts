import { existsSync, readFileSync } from 'node:fs';
import { migrate } from '../database/migrate.ts';
import { startServer } from '../main.ts';
import type { DevServerOrder } from './dev.ts';
import { shutdownOnSignals } from './shutdown.ts';

const file = String(process.env.TAREWRIGHT_DEV_ORDER);

/** The order is written once the database is ready; a restarted server finds it at once. */
async function waitForOrder(): Promise<DevServerOrder> {
  while (!existsSync(file)) await new Promise((resolve) => setTimeout(resolve, 25));
  return JSON.parse(readFileSync(file, 'utf8')) as DevServerOrder;
}

// Started again by `npm run dev` at each change: a new migration runs too. The client comes from Vite beside it.
const shutdown = shutdownOnSignals();
process.stdin.resume().once('end', () => {
  process.kill(process.ppid, 'SIGTERM'); // `npm run dev` was killed: the watcher above this process would stay for ever
  process.exit(1);
});
const order = await waitForOrder();
await migrate({ ownerUrl: order.databaseUrls.owner });
const server = await startServer({ ...order, clientFolder: null });
shutdown.add(() => server.close());
