import type { DataSource } from 'typeorm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createDataSource } from '../../server/database/data-source.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';

describe('Entities', () => {
  let database: TestDatabase;
  let dataSource: DataSource;
  beforeAll(async () => {
    database = await createTestDatabase();
    dataSource = await createDataSource({ url: database.urls.owner }).initialize();
  });
  afterAll(async () => {
    await dataSource.destroy();
    await database.drop();
  });

  it('say the same columns, keys, references and indexes as the migrations', async () => {
    expect(await drift()).toEqual([]);
  });

  it('are really held against them: a dropped index and a new column are noticed', async () => {
    await database.query('owner', 'drop index entry_from_idx; alter table party add column phone text');

    expect(await drift()).toEqual([
      expect.stringContaining('DROP COLUMN "phone"'),
      expect.stringContaining('CREATE INDEX "entry_from_idx"'),
    ]);
  });

  const drift = async (): Promise<string[]> => {
    const { upQueries } = await dataSource.driver.createSchemaBuilder().log();
    // Checks and domains stand in the migrations alone; each is attacked in the tests beside this one.
    return upQueries.map(({ query }) => query).filter((query) => !/DROP CONSTRAINT "\w+_check"/.test(query));
  };

  it('leave no table out', async () => {
    const tables = await database.query<{ name: string }>(
      'owner',
      `select relname as name from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p')
         and relname <> 'migrations' order by 1`,
    );

    expect(dataSource.entityMetadatas.map((entity) => entity.tableName).sort()).toEqual(tables.map(({ name }) => name));
  });
});
