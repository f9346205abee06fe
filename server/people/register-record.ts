import canonicalize from 'canonicalize';
import type { EntityManager } from 'typeorm';
import type { RegisterRecord } from '../../shared/journal/record.schema.ts';

/** Chains what stood before and after a change of who belongs to a firm, in the transaction of the change itself. */
export async function chainRegisterRecords(manager: EntityManager, records: readonly RegisterRecord[]): Promise<void> {
  await manager.query('SELECT post_records($1)', [records.map((record) => String(canonicalize(record)))]);
}
