import type { EntityManager } from 'typeorm';
import type { DerivedRows, RegisterNoun, RegisterRecord } from '../../shared/journal/record.schema.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { canonicalText, isSaltedText, saltText } from './canonical-text.ts';
import { type PostedRecord, postRecords } from './post-records.ts';

/** What a register row says, by name. Numbers may be numbers: they are written as decimal strings. */
export type Facts = Readonly<Record<string, unknown>>;

export interface RegisterRow {
  noun: RegisterNoun;
  /** The row's id. */
  subjectId: string;
  facts: Facts;
  /** Facts that may name a person: only the hash of salt and text is chained, the words stand beside. */
  personal?: readonly string[];
  /** What the server worked out: recorded, but no part of what a resend is compared by. */
  decided?: Facts;
}

type Texts = NonNullable<DerivedRows['texts']>;
type Author = Pick<Parts, 'now' | 'newId'> & { personId: string };

/** Records and words of rows that are new, for `postRecords`: on their own, or together with a group of entries. */
export function newRowRecords(author: Author, rows: readonly RegisterRow[]) {
  const texts: Texts = [];
  const records = rows.map((row): RegisterRecord => {
    const id = author.newId();
    const after = chained(author, row, id, null, texts);
    return { ...authorship(author), id, ...subjectOf(row), version: 1, before: null, after };
  });
  return { records, texts };
}

/** Chains that rows are new. The head is locked already. */
export async function journalNewRows(
  author: Author,
  manager: EntityManager,
  rows: readonly RegisterRow[],
): Promise<PostedRecord[]> {
  const { records, texts } = newRowRecords(author, rows);
  return postRecords(manager, records, { texts });
}

/**
 * Chains what stood before and after a change. The head is locked already.
 * @param version of the row after the change
 * @param before the row's facts before it
 */
export async function journalChange(
  author: Author,
  manager: EntityManager,
  row: RegisterRow,
  version: number,
  before: Facts,
): Promise<void> {
  const texts: Texts = [];
  const id = author.newId();
  const last = await findAfter(manager, row, version - 1);
  const after = chained(author, row, id, { facts: before, chained: last ?? {} }, texts);
  await postRecords(manager, [{ ...authorship(author), id, ...subjectOf(row), version, before: last, after }], {
    texts,
  });
}

const authorship = ({ now, personId }: Author) => ({
  type: 'register' as const,
  recordedAt: now().toISOString(),
  recordedBy: personId,
});
const subjectOf = ({ noun, subjectId }: RegisterRow) => ({ noun, subjectId });

/** Words that did not change keep their earlier hash, so that erasing them once erases them everywhere. */
function chained(
  author: Author,
  { facts, personal = [], decided = {} }: RegisterRow,
  recordId: string,
  earlier: { facts: Facts; chained: Facts } | null,
  texts: Texts,
): Record<string, unknown> {
  const written: Record<string, unknown> = {};
  for (const [field, fact] of Object.entries({ ...facts, ...decided })) {
    if (!personal.includes(field)) {
      written[field] = withoutNumbers(fact);
      continue;
    }
    const words = wordsOf(fact);
    const earlierHash = earlier?.chained[`${field}Hash`];
    if (words === null) {
      written[`${field}Hash`] = null;
    } else if (typeof earlierHash === 'string' && wordsOf(earlier?.facts[field]) === words) {
      written[`${field}Hash`] = earlierHash;
    } else {
      const { saltHex, hash } = saltText(words);
      written[`${field}Hash`] = hash;
      texts.push({ id: author.newId(), recordId, field, salt: saltHex, content: words });
    }
  }
  return written;
}

const wordsOf = (fact: unknown): string | null => {
  if (fact === null || fact === undefined) return null;
  return typeof fact === 'string' ? fact : canonicalText(fact);
};

/** Numbers as decimal text: an RFC 8785 number is a double, and a reader of the chain should not have to know that. */
function withoutNumbers(fact: unknown): unknown {
  if (typeof fact === 'number') return decimalOf(fact);
  if (typeof fact === 'bigint') return String(fact);
  if (fact instanceof Date) return fact.toISOString();
  if (Array.isArray(fact)) return fact.map(withoutNumbers);
  if (fact === null || typeof fact !== 'object') return fact ?? null;
  return Object.fromEntries(
    Object.entries(fact)
      .filter(([, inner]) => inner !== undefined)
      .map(([name, inner]) => [name, withoutNumbers(inner)]),
  );
}

/** The shortest decimal that reads back as this number, without an exponent. */
export function decimalOf(value: number): string {
  const text = String(value);
  return text.includes('e') ? value.toFixed(20).replace(/0+$/, '') : text;
}

async function findAfter(
  manager: EntityManager,
  { noun, subjectId }: Pick<RegisterRow, 'noun' | 'subjectId'>,
  version: number,
): Promise<Facts | null> {
  const [row] = await manager.query<{ content: string }[]>(
    'select content from journal_record where noun = $1 and subject_id = $2 and version = $3',
    [noun, subjectId, version],
  );
  return row ? (JSON.parse(row.content) as RegisterRecord).after : null;
}

/** True: it is new. False: an earlier try of the same request made it. A problem: it is refused, and the others are not. */
export type NewOrRefused = boolean | Problem;

/**
 * Was this row made already, by an earlier try of the same request? The head is locked already.
 * @throws Problem 409 `idReused` when the id was used with other content
 */
export async function wasMade(manager: EntityManager, row: RegisterRow): Promise<boolean> {
  return orThrow((await whichWereMade(manager, [row])).get(row));
}

/** As `wasMade` for many rows, with two questions for all of them. A problem stands where the id has other content. */
export async function whichWereMade(
  manager: EntityManager,
  rows: readonly RegisterRow[],
): Promise<Map<RegisterRow, boolean | Problem>> {
  const firsts = await manager.query<{ noun: string; subject: string; recordId: string; content: string }[]>(
    // One look-up by key for each: `offset 0` keeps the planner from reading the whole log of a noun for all of them.
    `select w.noun, w.subject_id as subject, j.record_id as "recordId", j.content
      from unnest($1::text[], $2::uuid[]) w(noun, subject_id)
      cross join lateral (select x.record_id, x.content from journal_record x
        where x.noun = w.noun and x.subject_id = w.subject_id and x.version = 1 offset 0) j`,
    [rows.map(({ noun }) => noun), rows.map(({ subjectId }) => subjectId)],
  );
  const firstOf = new Map(firsts.map((first) => [`${first.noun} ${first.subject}`, first]));
  const salts = new Map<string, Buffer>();
  if (rows.some(({ personal = [] }) => personal.length > 0) && firsts.length > 0) {
    const texts = await manager.query<{ recordId: string; field: string; salt: Buffer }[]>(
      'select record_id as "recordId", field, salt from personal_text where record_id = any ($1::uuid[])',
      [firsts.map(({ recordId }) => recordId)],
    );
    for (const { recordId, field, salt } of texts) salts.set(`${recordId} ${field}`, salt);
  }
  return new Map(
    rows.map((row): [RegisterRow, boolean | Problem] => {
      const first = firstOf.get(`${row.noun} ${row.subjectId}`);
      if (!first) return [row, false];
      const { after } = JSON.parse(first.content) as RegisterRecord;
      const saltOf = (field: string) => salts.get(`${first.recordId} ${field}`);
      return [row, saysTheSame(row, after, saltOf) || new Problem('idReused')];
    }),
  );
}

function saysTheSame(
  { facts, personal = [] }: RegisterRow,
  after: Facts,
  saltOf: (field: string) => Buffer | undefined,
): boolean {
  const plain = Object.fromEntries(Object.entries(facts).filter(([field]) => !personal.includes(field)));
  const chainedPlain = Object.fromEntries(Object.entries(after).filter(([field]) => field in plain));
  const sameWords = personal.every((field) => {
    const words = wordsOf(facts[field]);
    const hash = after[`${field}Hash`];
    const salt = saltOf(field);
    if (words === null || hash === null || hash === undefined || !salt)
      return words === null && (hash ?? null) === null;
    return isSaltedText(words, { salt, hash: String(hash) });
  });
  return sameWords && canonicalText(withoutNumbers(plain)) === canonicalText(chainedPlain);
}

/** What one of many came to, for who asked for it alone. @throws Problem that refused it */
export function orThrow(outcome: boolean | Problem | undefined): boolean {
  if (outcome instanceof Problem) throw outcome;
  return outcome === true;
}
