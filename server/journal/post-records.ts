import type { EntityManager } from 'typeorm';
import type { DerivedRows, JournalRecord } from '../../shared/journal/record.schema.ts';
import { gramsText } from '../../shared/ledger/grams-text.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { canonicalText } from './canonical-text.ts';
import { plannedQuery } from './planned-query.ts';

export interface Head {
  sequence: number;
  /** Entries of earlier months are booked in this one, marked late; null: no month was closed yet. */
  firstOpenMonth: string | null;
}

/** Statements of a posting are planned once a connection, maybe while a new firm's tables were empty: by their indexes. */
const LOCK_HEAD = `select sequence, first_open_month, set_config('enable_seqscan', 'off', true) from lock_head()`;

/**
 * Locks the firm's head until the transaction ends, so that records follow each other without a gap. Everything that
 * writes a record locks it before it reads what it decides by, and before it locks any other row.
 */
export async function lockHead(manager: EntityManager): Promise<Head> {
  const [head] = await plannedQuery<{ sequence: string; first_open_month: string | null }>(
    manager,
    'lock_head',
    LOCK_HEAD,
    [],
  );
  return { sequence: Number(head?.sequence), firstOpenMonth: head?.first_open_month ?? null };
}

export interface PostedRecord {
  recordId: string;
  sequence: number;
}

/**
 * Writes records into the chain, with what was derived from them, in one call of the posting function.
 * @throws Problem where a rule that the database keeps is broken
 */
export async function postRecords(
  manager: EntityManager,
  records: readonly JournalRecord[],
  derived: DerivedRows = {},
): Promise<PostedRecord[]> {
  try {
    const rows = await plannedQuery<{ record_id: string; sequence: string }>(
      manager,
      'post_records',
      'select record_id, sequence from post_records($1::text[], $2::jsonb)',
      [records.map(canonicalText), JSON.stringify(derived)],
    );
    return rows.map((row) => ({ recordId: row.record_id, sequence: Number(row.sequence) }));
  } catch (error) {
    throw problemOfRule(error) ?? error;
  }
}

interface DatabaseRefusal {
  code?: string;
  detail?: string;
  constraint?: string;
}

/** Ids that clients make: of entries, readings, groups. */
const OF_IDS: ReadonlySet<string> = new Set([
  'entry_pkey',
  'reading_pkey',
  'entry_group_pkey',
  'journal_record_record_id_key',
]);

/**
 * The judge refuses first, with the place of each error; what reaches the database and is refused there slipped through
 * or came in between. Rules that only a fault of the server can break stay errors.
 */
function problemOfRule(error: unknown) {
  const { code, detail, constraint } = error as DatabaseRefusal;
  if (code === '23505' && OF_IDS.has(String(constraint))) return new Problem('idReused', { cause: error });
  if (!code?.startsWith('TW')) return null;
  const figures = JSON.parse(detail ?? '{}') as Record<string, string>;
  switch (code) {
    case 'TW006':
    case 'TW007': {
      const bookG = gramsText(BigInt(figures.bookMicrograms ?? 0));
      const params = { place: String(figures.place), refrigerant: String(figures.refrigerant), bookG };
      return problemOfRefusals([{ code: 'exceedsBook', path: '', allowed: bookG, params }]);
    }
    case 'TW008':
      return problemOfRefusals([{ code: 'bookStaysKnown', path: '' }]);
    case 'TW010':
    case 'TW011':
      return problemOfRefusals([{ code: 'reasonRequired', path: '/reason' }]);
    case 'TW013':
      return problemOfRefusals([{ code: 'weighInNotOpen', path: '/closesGroupId' }]);
    default:
      return null;
  }
}
