import canonicalize from 'canonicalize';
import type { EntityManager } from 'typeorm';
import type { RegisterRecord } from '../../shared/journal/record.schema.ts';

/**
 * Locks the firm's head first, as every change of the log does, so that two changes wait for each other in one order and
 * never crosswise.
 */
export async function lockFirmHead(manager: EntityManager): Promise<void> {
  await manager.query('SELECT lock_head()');
}

/** Chains what stood before and after a change of who belongs to a firm, in the transaction of the change itself. */
export async function chainRegisterRecords(manager: EntityManager, records: readonly RegisterRecord[]): Promise<void> {
  await manager.query('SELECT post_records($1)', [records.map((record) => String(canonicalize(record)))]);
}
