import pg from 'pg';
import type { DatabaseUrls } from '../commands/database-urls.ts';
import type { DemoSignIn } from '../commands/demo.ts';
import { createDataSource } from '../database/data-source.ts';
import { loadReferenceData } from '../reference/load-reference-data.ts';
import { brenhaven } from './brenhaven/firm.ts';
import { brenhavenHistory } from './brenhaven/history.ts';
import type { DemoFirm } from './demo-firm.ts';
import { harrowTansy } from './harrow-tansy/firm.ts';
import { harrowTansyHistory } from './harrow-tansy/history.ts';
import { joinedDataSource } from './joined-data-source.ts';
import { loadFirm } from './load-demo.ts';

const DEMO_FIRMS: readonly DemoFirm[] = [harrowTansy, brenhaven];

/** Servers that start at once on one database take turns, and the second finds what the first has loaded. */
const TAKE_TURNS = `select pg_advisory_xact_lock(hashtextextended('tarewright demo firms', 0))`;

/** At commit the checks would look for one firm's records in the scope of another, which shows nothing. */
const CHECK_NOW = 'set constraints all immediate; set constraints all deferred';

/** What `loadDemoIfEmpty` promises. Everything is committed in one transaction, or nothing. */
export async function loadDemoFirms(options: {
  databaseUrls: Pick<DatabaseUrls, 'app' | 'jobs'>;
  password: string;
  now: Date;
}): Promise<DemoSignIn[]> {
  const { databaseUrls, password, now } = options;
  const known = await firmIds(databaseUrls.jobs);
  if (known.length > 0) return signInsOf(known);
  const dataSource = await createDataSource({ url: databaseUrls.app, poolSize: 1 }).initialize();
  const runner = dataSource.createQueryRunner();
  try {
    await runner.connect();
    await runner.startTransaction();
    await runner.query(TAKE_TURNS);
    const meanwhile = await firmIds(databaseUrls.jobs);
    if (meanwhile.length > 0) return signInsOf(meanwhile);
    const reference = loadReferenceData();
    const world = { dataSource: joinedDataSource(dataSource, runner), reference, password };
    await loadFirm(world, harrowTansy, harrowTansyHistory(now, reference));
    await runner.query(CHECK_NOW);
    await loadFirm(world, brenhaven, brenhavenHistory(now, reference));
    await runner.commitTransaction();
    return signInsOf(DEMO_FIRMS.map(({ firm }) => firm.id));
  } finally {
    if (runner.isTransactionActive) await runner.rollbackTransaction().catch(() => undefined);
    await runner.release();
    await dataSource.destroy();
  }
}

/** Of all firms, which the application's own role cannot see before one is chosen. */
async function firmIds(jobsUrl: string): Promise<string[]> {
  const client = new pg.Client({ connectionString: jobsUrl });
  await client.connect();
  try {
    const { rows } = await client.query<{ id: string }>('select list_firm_ids() as id');
    return rows.map(({ id }) => id);
  } finally {
    await client.end();
  }
}

function signInsOf(firmIdsThere: readonly string[]): DemoSignIn[] {
  return DEMO_FIRMS.filter(({ firm }) => firmIdsThere.includes(firm.id)).flatMap(({ firm, people }) =>
    people.map(({ name, roleWords, email }) => ({ firm: firm.name, name, role: roleWords, email })),
  );
}
