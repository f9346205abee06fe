import { migrate } from '../database/migrate.ts';
import { startServer } from '../main.ts';
import type { DevServerOrder } from './dev.ts';
import { stopOnSignals } from './stop-signals.ts';

/** Started again by `npm run dev` at each change: a new migration runs too. The client comes from Vite beside it. */
const order = JSON.parse(process.env.TAREWRIGHT_DEV_SERVER ?? 'null') as DevServerOrder;
await migrate({ ownerUrl: order.databaseUrls.owner });
const server = await startServer({ ...order, clientFolder: null });
stopOnSignals(() => server.close());
