import type { TestProject } from 'vitest/node';
import { startMigratedPostgres } from './migrated-postgres.ts';
import type { ThrowawayPostgres } from './throwaway-postgres.ts';

declare module 'vitest' {
  interface ProvidedContext {
    /** The run's throwaway PostgreSQL; `createTestDatabase` is how a test gets its own database in it. */
    postgres: { port: number };
  }
}

interface Shared {
  users: number;
  started: Promise<ThrowawayPostgres>;
}
const shared = globalThis as typeof globalThis & { tarewrightPostgres?: Shared };

/** Vitest sets up each project by itself; those of one run share the cluster, and the last one stops it. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  shared.tarewrightPostgres ??= { users: 0, started: startMigratedPostgres() };
  const mine = shared.tarewrightPostgres;
  mine.users++;
  const postgres = await mine.started;
  project.provide('postgres', { port: postgres.port });
  return async () => {
    mine.users--;
    if (mine.users > 0) return;
    delete shared.tarewrightPostgres;
    await postgres.stop();
  };
}
