import { createHmac } from 'node:crypto';
import { ipKeyGenerator } from 'express-rate-limit';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { poolOf } from './pool.ts';

/**
 * Failures are counted in the database, so that several servers share them. An account can be shut for a quarter of an
 * hour by anybody who knows its address: the price for not letting anybody guess on.
 */
const WINDOW_MS = 15 * 60 * 1000;
export const FAILURES_PER_ACCOUNT = 10;
export const FAILURES_PER_ADDRESS = 50;

export interface Attempt {
  /** Right after all: it counts no longer, nor do the account's earlier failures. */
  succeeded(): Promise<void>;
}

/**
 * Notes an attempt before it is judged, so that many at once cannot slip through together. It stays noted as a failure
 * unless `succeeded` is called.
 * @throws Problem 429 when account or address has failed too often
 */
export async function beginAttempt(parts: Parts, email: string, address: string): Promise<Attempt> {
  const pool = poolOf(parts.dataSource);
  const now = parts.now();
  const account = throttleKey(parts, 'account', email);
  const sender = throttleKey(parts, 'address', ipKeyGenerator(address));
  const added = await pool.query<{ id: string }>(
    'INSERT INTO sign_in_failure (throttle_key, failed_at) VALUES ($1, $3), ($2, $3) RETURNING id',
    [account, sender, now],
  );
  const ids = added.rows.map(({ id }) => id);
  const counted = await pool.query<{ key: string; count: number; oldest: Date }>(
    `SELECT throttle_key AS key, count(*)::int AS count, min(failed_at) AS oldest
       FROM sign_in_failure WHERE throttle_key IN ($1, $2) AND failed_at > $3 GROUP BY throttle_key`,
    [account, sender, new Date(now.getTime() - WINDOW_MS)],
  );
  const over = counted.rows.filter(
    ({ key, count }) => count > (key === account ? FAILURES_PER_ACCOUNT : FAILURES_PER_ADDRESS),
  );
  if (over.length > 0) {
    await pool.query('DELETE FROM sign_in_failure WHERE id = ANY ($1)', [ids]); // a refused one does not shut it longer
    const freeAt = Math.max(...over.map(({ oldest }) => oldest.getTime() + WINDOW_MS));
    const seconds = Math.max(1, Math.ceil((freeAt - now.getTime()) / 1000));
    throw new Problem('tooManySignIns', {
      params: { minutes: Math.ceil(seconds / 60) },
      headers: { 'Retry-After': String(seconds) },
    });
  }
  return {
    async succeeded() {
      await pool.query('DELETE FROM sign_in_failure WHERE id = ANY ($1) OR throttle_key = $2', [ids, account]);
    },
  };
}

/** At most `limit` in a quarter of an hour, counted in the same table; true while there is room. */
export async function takeTurn(parts: Parts, what: string, value: string, limit: number): Promise<boolean> {
  const pool = poolOf(parts.dataSource);
  const key = throttleKey(parts, what, value);
  const now = parts.now();
  await pool.query('INSERT INTO sign_in_failure (throttle_key, failed_at) VALUES ($1, $2)', [key, now]);
  const counted = await pool.query<{ count: number }>(
    'SELECT count(*)::int AS count FROM sign_in_failure WHERE throttle_key = $1 AND failed_at > $2',
    [key, new Date(now.getTime() - WINDOW_MS)],
  );
  return (counted.rows[0]?.count ?? 0) <= limit;
}

/** Which address failed is nobody's business who reads the table: it holds a keyed hash. */
function throttleKey(parts: Parts, what: string, value: string): string {
  return createHmac('sha256', parts.settings.sessionSecret).update(`${what} ${value}`).digest('base64url');
}
