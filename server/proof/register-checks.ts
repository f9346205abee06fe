import { type EntityManager, type EntityMetadata, MoreThan } from 'typeorm';
import { REGISTER_NOUNS } from '../../shared/journal/record.schema.ts';
import { canonicalText, isSaltedText } from '../journal/canonical-text.ts';
import { decimalOf } from '../journal/register-journal.ts';

/** Rows of one register read at a time. */
const AT_ONCE = 500;

/** Column that a register record calls its subject, where it is not `id`. */
const SUBJECT: Record<string, string> = { membership: 'personId' };

export interface RegisterDifference {
  /** The record of the row's version; null: no record speaks of the row. */
  sequence: number | null;
  table: string;
  /** Empty: there is a record, and no row. */
  column: string;
  id: string;
}

interface LatestRecord {
  subjectId: string;
  sequence: string;
  version: number;
  content: string;
}
interface Words {
  subjectId: string;
  salt: Buffer;
  content: string | null;
  hash: Buffer;
}
type Row = Record<string, unknown>;

/**
 * The first register row that is not what its last record says, or that no record speaks of. A record names facts as the
 * entity names its properties, numbers as decimal text, words by the hash of salt and text.
 */
export async function findOtherRegisterRow(manager: EntityManager): Promise<RegisterDifference | null> {
  const tables = new Map(manager.connection.entityMetadatas.map((metadata) => [metadata.tableName, metadata]));
  for (const noun of REGISTER_NOUNS) {
    const metadata = tables.get(noun.replaceAll(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`));
    const found = metadata ? await findInRegister(manager, noun, metadata) : null;
    if (found) return found;
  }
  return null;
}

async function findInRegister(manager: EntityManager, noun: string, metadata: EntityMetadata) {
  const subject = SUBJECT[noun] ?? 'id';
  const table = metadata.tableName;
  const repository = manager.getRepository<Row>(metadata.target);
  for (let last: unknown = null; ; ) {
    const rows = await repository.find({
      where: last === null ? {} : { [subject]: MoreThan(last) },
      order: { [subject]: 'asc' },
      take: AT_ONCE,
    });
    if (rows.length === 0) break;
    last = rows.at(-1)?.[subject];
    const ids = rows.map((row) => String(row[subject]));
    const records = await readLatest(manager, noun, ids);
    const words = await readWords(manager, noun, ids);
    for (const row of rows) {
      const id = String(row[subject]);
      const record = records.get(id);
      if (!record) return { sequence: null, table, column: '', id };
      const column = firstDifferent(noun, row, record, words.get(id) ?? [], metadata);
      if (column !== null) return { sequence: Number(record.sequence), table, column, id };
    }
  }
  const [gone] = await manager.query<{ sequence: string; id: string }[]>(
    `select j.sequence, j.subject_id as id from journal_record j
       where j.noun = $1 and j.version = 1 and not exists (select from ${table} x
         where ${noun === 'firm' ? 'x.id = j.firm_id' : 'x.firm_id = j.firm_id'}
           and x.${subject === 'personId' ? 'person_id' : 'id'} = j.subject_id)
       order by j.sequence limit 1`,
    [noun],
  );
  return gone ? { sequence: Number(gone.sequence), table, column: '', id: gone.id } : null;
}

function firstDifferent(
  noun: string,
  row: Row,
  record: LatestRecord,
  words: readonly Words[],
  metadata: EntityMetadata,
) {
  if ('version' in row && row.version !== record.version) return 'version';
  const { after } = JSON.parse(record.content) as { after: Row };
  const names = new Set(metadata.columns.map(({ propertyName }) => propertyName));
  for (const [name, said] of factsOf(noun, after, names)) {
    const ofWords = name.endsWith('Hash') ? name.slice(0, -4) : null;
    if (ofWords !== null && names.has(ofWords)) {
      if (!isSameWords(row[ofWords], said, words)) return columnOf(metadata, ofWords);
    } else if (names.has(name) && !isSame(row[name], said)) return columnOf(metadata, name);
  }
  return null;
}

/** What a record holds under one name and the table in several columns counts by its parts: a tool's `scale`. */
const factsOf = (noun: string, after: Row, names: ReadonlySet<string>): [string, unknown][] =>
  Object.entries(after).flatMap(([name, said]) =>
    !names.has(name) && said !== null && typeof said === 'object' && !Array.isArray(said)
      ? Object.entries(said).map(([part, fact]) => [columnsOf(noun, name)[part] ?? part, fact] as [string, unknown])
      : [[name, said] as [string, unknown]],
  );

/** Where a part has another name than its column: what a difference was settled to is a place, and no id of the row. */
const columnsOf = (noun: string, name: string): Readonly<Record<string, string>> =>
  noun === 'settlement' && name === 'to' ? { place: 'settledTo', id: 'settledToId' } : {};

const columnOf = (metadata: EntityMetadata, name: string): string =>
  metadata.findColumnWithPropertyName(name)?.databaseName ?? name;

function isSameWords(held: unknown, hash: unknown, words: readonly Words[]): boolean {
  if (held === null || held === undefined) {
    // Erased: the hash stays. A row that never had words has none.
    return hash === null || words.some((text) => text.content === null && text.hash.toString('hex') === hash);
  }
  const text = typeof held === 'string' ? held : canonicalText(held);
  return words.some(
    ({ salt, hash: kept }) => kept.toString('hex') === hash && isSaltedText(text, { salt, hash: String(hash) }),
  );
}

function isSame(held: unknown, said: unknown): boolean {
  if (held instanceof Date && typeof said === 'string') return held.getTime() === Date.parse(said);
  return canonicalText(asChained(held)) === canonicalText(asChained(said));
}

/** As `register-journal.ts` writes it. */
function asChained(fact: unknown): unknown {
  if (typeof fact === 'number') return decimalOf(fact);
  if (typeof fact === 'bigint') return String(fact);
  if (fact instanceof Date) return fact.toISOString();
  if (Array.isArray(fact)) return fact.map(asChained);
  if (fact === null || typeof fact !== 'object') return fact ?? null;
  const set = Object.entries(fact).filter(([, inner]) => inner !== undefined);
  return Object.fromEntries(set.map(([name, inner]) => [name, asChained(inner)]));
}

async function readLatest(manager: EntityManager, noun: string, ids: readonly string[]) {
  const rows = await manager.query<LatestRecord[]>(
    `select distinct on (subject_id) subject_id as "subjectId", sequence, version, content from journal_record
       where noun = $1 and subject_id = any ($2::uuid[]) order by subject_id, version desc`,
    [noun, ids],
  );
  return new Map(rows.map((row) => [row.subjectId, row]));
}

async function readWords(manager: EntityManager, noun: string, ids: readonly string[]) {
  const rows = await manager.query<Words[]>(
    `select j.subject_id as "subjectId", t.salt, t.content, t.hash from journal_record j
       join personal_text t on t.firm_id = j.firm_id and t.record_id = j.record_id
       where j.noun = $1 and j.subject_id = any ($2::uuid[])`,
    [noun, ids],
  );
  const bySubject = new Map<string, Words[]>();
  for (const row of rows) bySubject.set(row.subjectId, [...(bySubject.get(row.subjectId) ?? []), row]);
  return bySubject;
}
