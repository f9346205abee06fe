import type { DataSource } from 'typeorm';

/**
 * Whether the database has every table and column that this version reads and the function it posts through. Asked of
 * PostgreSQL's own catalogue, because the application's role may not read the list of migrations.
 */
export async function databaseFits(dataSource: DataSource): Promise<boolean> {
  const needed = dataSource.entityMetadatas.flatMap(({ tableName, columns }) =>
    columns.map((column) => ({ table: tableName, column: column.databaseName })),
  );
  const [answer] = await dataSource.query(
    `SELECT to_regproc('post_records') IS NOT NULL AND NOT EXISTS (
       SELECT FROM unnest($1::text[], $2::text[]) AS needed (table_name, column_name)
        WHERE NOT EXISTS (SELECT FROM pg_attribute a
          WHERE a.attrelid = to_regclass(needed.table_name) AND a.attname = needed.column_name AND NOT a.attisdropped)
     ) AS fits`,
    [needed.map(({ table }) => table), needed.map(({ column }) => column)],
  );
  return answer.fits === true;
}
