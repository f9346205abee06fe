import type pg from 'pg';
import type { DataSource } from 'typeorm';

/** TypeORM's own pool: sessions and look-ups share its connections instead of keeping more of their own. */
export function poolOf(dataSource: DataSource): pg.Pool {
  return (dataSource.driver as unknown as { master: pg.Pool }).master;
}
