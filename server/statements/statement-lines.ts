import type { Locale } from '../../shared/session/session.schema.ts';
import type { StatementLine } from '../../shared/statements/cylinder-statement.schema.ts';
import type { ReadingCheck } from '../../shared/statements/walk-cylinder.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { type Labels, placeView } from '../entries/place-labels.ts';
import type { StatementEntryRow, StatementFacts, StatementReadingRow } from './cylinder-statement.repository.ts';

type Ordered =
  | { at: number; anchor: number; rank: number; entry: StatementEntryRow }
  | { at: number; anchor: number; rank: number; reading: StatementReadingRow };

/** In a group: what was read before, what that added, the masses, what was read after; then what corrects or cancels. */
const RANK = { readBefore: 0, added: 1, entered: 2, readAfter: 3, later: 4 } as const;

/** Entries and readings as they happened, each entry with the balance after it. */
export function statementLines(
  facts: StatementFacts,
  openingMicrograms: bigint,
  checks: readonly ReadingCheck[],
  labels: Labels,
  locale: Locale,
): StatementLine[] {
  const byReading = new Map(checks.map((check) => [check.readingId, check]));
  let balance = openingMicrograms;
  return inOrder(facts).map((ordered): StatementLine => {
    if ('reading' in ordered) return readingLine(ordered.reading, byReading.get(ordered.reading.id));
    balance += BigInt(ordered.entry.mass);
    return entryLine(ordered.entry, balance, labels, locale);
  });
}

function inOrder({ entries, readings }: StatementFacts): Ordered[] {
  const rows: Ordered[] = [
    ...entries.map((entry) => {
      const isLater = entry.correctsGroupId !== null;
      const rank = isLater ? RANK.later : entry.addedByServer ? RANK.added : RANK.entered;
      return { at: Date.parse(entry.at), anchor: entry.anchorSequence, rank, entry };
    }),
    ...readings.map((reading) => {
      const rank = reading.moment === 'after' ? RANK.readAfter : RANK.readBefore;
      return { at: Date.parse(reading.occurredAt), anchor: reading.sequence, rank, reading };
    }),
  ];
  const sequenceOf = (row: Ordered) => ('entry' in row ? row.entry.sequence : row.reading.sequence);
  return rows.sort((a, b) => a.at - b.at || a.anchor - b.anchor || a.rank - b.rank || sequenceOf(a) - sequenceOf(b));
}

function entryLine(row: StatementEntryRow, balance: bigint, labels: Labels, locale: Locale): StatementLine {
  return {
    line: 'entry',
    id: row.id,
    groupId: row.groupId,
    sequence: row.sequence,
    at: utc(row.at),
    kind: row.kind,
    refrigerant: row.refrigerant,
    massG: gramsOfMicrograms(BigInt(row.mass)),
    balanceG: gramsOfMicrograms(balance),
    counter: placeView({ place: row.counterPlace, id: row.counterId, as: row.counterAs }, labels, locale),
    howKnown: row.howKnown,
    addedByServer: row.addedByServer,
    correctsGroupId: row.correctsGroupId,
    cancelled: row.cancelled,
    late: row.late,
    bookingMonth: row.bookingMonth,
    recordedByName: row.recordedByName,
  };
}

function readingLine(row: StatementReadingRow, check: ReadingCheck | undefined): StatementLine {
  const judged = check !== undefined && check.verdict !== null;
  return {
    line: 'reading',
    id: row.id,
    groupId: row.groupId,
    at: utc(row.at),
    moment: row.moment,
    mode: row.mode,
    value: row.value,
    unit: row.unit,
    grossG: gramsOfMicrograms(BigInt(row.gross)),
    toolName: row.toolName,
    resolutionG: row.scale?.resolutionG ?? null,
    contentG: check ? gramsOfMicrograms(check.contentMicrograms) : null,
    differenceG: judged ? gramsOfMicrograms(check.differenceMicrograms) : null,
    twoUG: judged ? twoU(check.uncertainty.standardG) : null,
    verdict: check?.verdict ?? null,
    cancelled: row.cancelled,
    recordedByName: row.recordedByName,
  };
}

const utc = (instant: string): string => new Date(instant).toISOString();

/** Uncertainties to the milligram, as the calculation of the same name returns them. */
export const twoU = (standardG: number): number => rounded(2 * standardG);
export const rounded = (massG: number): number => Math.round(massG * 1000) / 1000;
