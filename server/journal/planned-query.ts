import type pg from 'pg';
import type { EntityManager } from 'typeorm';

/**
 * Runs a statement that is planned once a connection, in the transaction of this manager. For the few large statements
 * that a posting waits for with the head locked: planning them under row-level security takes longer than running them.
 * @param name one for each text
 */
export async function plannedQuery<Row extends pg.QueryResultRow>(
  manager: EntityManager,
  name: string,
  text: string,
  values: unknown[],
): Promise<Row[]> {
  const client = (await manager.queryRunner?.connect()) as pg.PoolClient;
  const { rows } = await client.query<Row>({ name, text, values });
  return rows;
}
