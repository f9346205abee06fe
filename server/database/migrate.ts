import 'reflect-metadata';
import { DataSource } from 'typeorm';
import { prepareExportQueue } from '../exports/export-queue.ts';
import { MIGRATIONS } from './migrations.ts';

/**
 * Brings the database up to date, as its owner. Several servers that start at once wait for each other: a session lock on
 * one connection is held while another migrates. That lock needs a direct connection, not a transaction pooler.
 *
 * @returns the names of the migrations that ran; none when the database was up to date.
 */
export async function migrate({ ownerUrl }: { ownerUrl: string }): Promise<string[]> {
  const dataSource = new DataSource({
    type: 'postgres',
    url: ownerUrl,
    migrations: [...MIGRATIONS],
    synchronize: false,
    installExtensions: false,
    poolSize: 2,
  });
  await dataSource.initialize();
  try {
    const lock = dataSource.createQueryRunner();
    await lock.query(`select pg_advisory_lock(hashtextextended('tarewright migrate', 0))`);
    try {
      const ran = await dataSource.runMigrations({ transaction: 'each' });
      await prepareExportQueue({ ownerUrl });
      return ran.map((migration) => migration.name);
    } finally {
      await lock.query(`select pg_advisory_unlock(hashtextextended('tarewright migrate', 0))`);
      await lock.release();
    }
  } finally {
    await dataSource.destroy();
  }
}
