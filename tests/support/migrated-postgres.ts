import { migrate } from '../../server/database/migrate.ts';
import { ensureRoles } from '../../server/database/roles.ts';
import { templateDatabase } from './cloned-database.ts';
import { startThrowawayPostgres, type ThrowawayPostgres } from './throwaway-postgres.ts';

/**
 * A throwaway cluster with the four roles and the migrated template. Nobody stays connected to the template, else it
 * could not be copied.
 * @param durable as in production, for measurements
 */
export async function startMigratedPostgres({ durable = false } = {}): Promise<ThrowawayPostgres> {
  const postgres = await startThrowawayPostgres({ durable });
  try {
    const passwords = { owner: 'test', app: 'test', jobs: 'test', backup: 'test' };
    const superuserUrl = postgres.url('postgres', 'postgres');
    await ensureRoles({ superuserUrl, database: templateDatabase, passwords });
    await migrate({ ownerUrl: postgres.url('tarewright_owner', templateDatabase) });
    return postgres;
  } catch (error) {
    await postgres.stop();
    throw error;
  }
}
