import type { EntityManager } from 'typeorm';
import type { DerivedRows } from '../../shared/journal/record.schema.ts';
import type { ExportRecord } from '../../shared/proof/seal-record.schema.ts';
import type { Parts } from '../http/parts.ts';
import { saltText } from './canonical-text.ts';
import { lockHead, postRecords } from './post-records.ts';

/** Filters that a person types, which may name somebody. */
const TYPED: readonly string[] = ['search'];

/**
 * Chains who took out what, and gives the number of that record; to be called before the first byte of it leaves. Of
 * what was typed to find something the record holds a salted hash, and the words stand beside it.
 */
export async function journalExport(
  { now, newId }: Pick<Parts, 'now' | 'newId'>,
  manager: EntityManager,
  { personId }: { personId: string },
  { document, format, about }: Pick<ExportRecord, 'document' | 'format' | 'about'>,
): Promise<number> {
  await lockHead(manager);
  const id = newId();
  const texts: NonNullable<DerivedRows['texts']> = [];
  const filters = Object.entries((about.filters ?? {}) as Record<string, unknown>).map(([name, value]) => {
    if (!TYPED.includes(name) || typeof value !== 'string') return [name, value];
    const { saltHex, hash } = saltText(value);
    texts.push({ id: newId(), recordId: id, field: name, salt: saltHex, content: value });
    return [`${name}Hash`, hash];
  });
  const said = about.filters === undefined ? about : { ...about, filters: Object.fromEntries(filters) };
  const [posted] = await postRecords(
    manager,
    [{ type: 'export', id, recordedAt: now().toISOString(), recordedBy: personId, document, format, about: said }],
    texts.length > 0 ? { texts } : {},
  );
  return Number(posted?.sequence);
}
