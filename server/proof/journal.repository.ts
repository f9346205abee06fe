import type { EntityManager } from 'typeorm';
import type { JournalQuery, JournalRow } from '../../shared/proof/proof.schema.ts';
import { Conditions, cursorScope, readPage } from '../lists/list-query.ts';
import { authorOf } from '../seals/seal.repository.ts';

type JournalJson = Omit<JournalRow, 'sequence' | 'recordedAt' | 'recordedBy'> & {
  sequence: string;
  recordedAt: Date;
  recordedBy: string;
  name: string | null;
};

const SELECT = `j.sequence, j.type, j.record_id as id, j.recorded_at as "recordedAt", j.recorded_by as "recordedBy",
  p.name, j.noun, j.subject_id as "subjectId", j.version, j.content, encode(j.content_hash, 'hex') as "contentHash",
  encode(j.hash, 'hex') as hash`;

/** The records of the chain, newest first. */
export function listRecords(manager: EntityManager, query: JournalQuery) {
  return readPage<JournalJson, JournalRow>(
    manager,
    {
      select: SELECT,
      from: 'journal_record j left join person p on p.id = j.recorded_by',
      conditions: new Conditions().andIf('j.type = $', query.type),
      sort: { columns: [{ sql: 'j.sequence', type: 'bigint' }], direction: 'desc' },
      page: query,
      of: cursorScope('journal', query),
    },
    ({ name, ...row }) => ({
      sequence: Number(row.sequence),
      type: row.type,
      id: row.id,
      recordedAt: row.recordedAt.toISOString(),
      recordedBy: authorOf({ recordedBy: row.recordedBy, name }),
      noun: row.noun,
      subjectId: row.subjectId,
      version: row.version,
      content: row.content,
      contentHash: row.contentHash,
      hash: row.hash,
    }),
  );
}
