import { inject } from 'vitest';
import { type ClonedDatabase, cloneTemplate } from './cloned-database.ts';

export type TestDatabase = ClonedDatabase;

/** A migrated database of this test's own, for files of the projects that name `global-postgres.ts`. */
export function createTestDatabase(): Promise<TestDatabase> {
  return cloneTemplate(inject('postgres'));
}
