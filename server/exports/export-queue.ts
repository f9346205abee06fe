import pg from 'pg';
import PgBoss from 'pg-boss';
import type { EntityManager } from 'typeorm';

export const EXPORT_QUEUE = 'export';

export interface ExportTask {
  firmId: string;
  exportId: string;
}

/** Only ticks wake it up; whether a job is still wanted, and how often it is tried, stands in the table `export`. */
const QUEUE = { name: EXPORT_QUEUE, policy: 'standard' as const, retryLimit: 0, expireInSeconds: 4 * 3600 };
const SERVER = 'tarewright_app, tarewright_jobs';

/**
 * Makes pg-boss's schema and the queue, as the owner: both are DDL, which no role of the server may do. Safe to repeat.
 * Tasks hold ids alone, so that the roles may see each other's.
 */
export async function prepareExportQueue({ ownerUrl }: { ownerUrl: string }): Promise<void> {
  const boss = new PgBoss({ connectionString: ownerUrl, max: 1, supervise: false, schedule: false });
  let fault: Error | undefined;
  boss.on('error', (error) => {
    fault = error;
  });
  await boss.start();
  try {
    await boss.createQueue(EXPORT_QUEUE, QUEUE);
  } finally {
    await boss.stop({ graceful: false });
  }
  if (fault) throw fault;
  const client = new pg.Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    await client.query(`
      grant usage on schema pgboss to ${SERVER}, tarewright_backup;
      grant select, insert, update, delete on all tables in schema pgboss to tarewright_jobs;
      grant select, insert on all tables in schema pgboss to tarewright_app;
      grant select on all tables in schema pgboss to tarewright_backup;
      grant execute on all functions in schema pgboss to tarewright_jobs`);
  } finally {
    await client.end();
  }
}

/** Never started: it only knows the statement that puts a task into the queue. */
const writer = new PgBoss({ db: { executeSql: () => Promise.reject(new Error('a task goes in with its row')) } });

/** Puts a task into the queue in the transaction that is open: a rollback takes it along. */
export async function enqueueExport(manager: EntityManager, task: ExportTask): Promise<void> {
  const executeSql = async (text: string, values: unknown[]) => ({
    rows: await manager.query<object[]>(text, values),
  });
  await writer.send(EXPORT_QUEUE, task, { db: { executeSql } });
}
