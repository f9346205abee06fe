import type { Parts } from '../http/parts.ts';
import { poolOf } from './pool.ts';

/** Sessions past their idle limit, and failed sign-ins that no throttle counts any more. */
export async function removeExpiredSignIns(parts: Parts): Promise<void> {
  const now = parts.now();
  const pool = poolOf(parts.dataSource);
  await pool.query('DELETE FROM session WHERE expire < $1', [now.toISOString().replace('Z', '')]);
  await pool.query('DELETE FROM sign_in_failure WHERE failed_at < $1', [new Date(now.getTime() - 24 * 3600 * 1000)]);
}
