import type { EntityManager, EntityTarget, ObjectLiteral } from 'typeorm';

/**
 * Inserts rows with one statement, however many they are: the values travel as one JSON text, so that neither their
 * number is bounded nor a statement has to be written and planned for each. All rows have the keys of the first.
 */
export async function insertRows<Row extends ObjectLiteral>(
  manager: EntityManager,
  entity: EntityTarget<Row>,
  rows: readonly Partial<Row>[],
): Promise<void> {
  const [first] = rows;
  if (!first) return;
  const { columns, tableName } = manager.connection.getMetadata(entity);
  const given = columns.filter(({ propertyName }) => propertyName in first);
  const names = given.map(({ databaseName }) => `"${databaseName}"`).join(', ');
  const written = rows.map((row) =>
    Object.fromEntries(given.map((column) => [column.databaseName, column.getEntityValue(row, true)])),
  );
  await manager.query(
    `insert into "${tableName}" (${names}) select ${names} from jsonb_populate_recordset(null::"${tableName}", $1::jsonb)`,
    [JSON.stringify(written)],
  );
}
