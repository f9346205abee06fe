import type { EntryRecord, GroupRecord } from '../../shared/journal/record.schema.ts';
import { flagKey, type LedgerFlag } from '../../shared/ledger/flag.ts';
import { massOf, refrigerantsOf } from '../../shared/ledger/mass-by-refrigerant.ts';
import { samePlace } from '../../shared/ledger/place.ts';
import type { PostedRecord } from '../journal/post-records.ts';
import { bookAfter, bookBefore, movedMasses } from './books-after.ts';
import type { JudgedPosting } from './judge-posting.ts';
import type { OutcomeFlag, PostingOutcome } from './posting-answer.ts';
import type { PostingFacts } from './posting-facts.ts';
import type { PostingRecords } from './posting-records.ts';

/**
 * What a group that was just posted made of the log, from what it was judged by: the same as `readOutcome` reads back,
 * without asking the database once more while the head is locked. Tests hold the two against each other.
 */
export function outcomeOfAdded(
  written: PostingRecords,
  posted: readonly PostedRecord[],
  judged: JudgedPosting,
  facts: PostingFacts,
): PostingOutcome {
  const group = written.records.find((record): record is GroupRecord => record.type === 'group');
  if (!group) throw new Error('a posting holds its group');
  const sequences = new Map(posted.map(({ recordId, sequence }) => [recordId, sequence]));
  const sequenceOf = (id: string): number => sequences.get(id) ?? 0;
  const entries = written.records.filter((record): record is EntryRecord => record.type === 'entry');
  return {
    entries: entries.map((entry) => ({
      id: entry.id,
      groupId: entry.groupId,
      sequence: sequenceOf(entry.id),
      refrigerant: entry.refrigerant,
      mass: entry.massMicrograms,
      from: entry.from,
      to: entry.to,
      howKnown: entry.howKnown,
      occurredAt: entry.occurredAt,
      recordedAt: entry.recordedAt,
      bookingMonth: entry.bookingMonth,
      late: entry.late,
      addedByServer: entry.addedByServer,
      atLeast: entry.atLeast,
      correctsGroupId: entry.correctsGroupId,
    })),
    balances: balancesAfter(judged, facts),
    flags: flagsAfter(judged, facts, group.id, sequenceOf(group.id)),
    groups: [{ id: group.id, deviceSkewSeconds: skewOf(group) }],
    labels: labelsOf(facts),
  };
}

function balancesAfter(judged: JudgedPosting, facts: PostingFacts): PostingOutcome['balances'] {
  const moved = movedMasses(judged.changes, judged.added?.group ?? null, undefined);
  return judged.places
    .flatMap(({ place }) => {
      if (place.place !== 'cylinder' && place.place !== 'unit') return [];
      const { place: kind, id } = place;
      const after = bookAfter(place, bookBefore(place, facts), moved);
      const touched = moved.filter(({ from, to }) => samePlace(from, place) || samePlace(to, place));
      const shown = new Set([...refrigerantsOf(after), ...touched.map(({ refrigerant }) => refrigerant)]);
      return [...shown].map((refrigerant) => ({
        place: kind,
        id,
        refrigerant,
        mass: String(massOf(after, refrigerant)),
      }));
    })
    .sort((a, b) => compared(a.place, b.place) || compared(a.id, b.id) || compared(a.refrigerant, b.refrigerant));
}

function flagsAfter(judged: JudgedPosting, facts: PostingFacts, groupId: string, sequence: number): OutcomeFlag[] {
  const { opened, closed } = judged.flags;
  const reopened = new Set(opened.map(flagKey));
  const closedIds = new Set(closed.map(({ id }) => id));
  const rows = [
    ...facts.standingFlags
      .filter(({ id }) => !closedIds.has(id))
      .map((flag) => ({ flag, openedBy: flag.openedBy, closedBy: null, opened: flag.openedSequence })),
    ...closed
      .filter((flag) => !reopened.has(flagKey(flag)))
      .map((flag) => ({ flag, openedBy: flag.openedBy, closedBy: groupId, opened: flag.openedSequence })),
    ...opened.map((flag) => ({ flag, openedBy: groupId, closedBy: null, opened: sequence })),
  ];
  return rows
    .sort(
      (a, b) =>
        a.opened - b.opened ||
        compared(a.flag.code, b.flag.code) ||
        compared(subjectOf(a.flag), subjectOf(b.flag)) ||
        compared(a.flag.groupId, b.flag.groupId) ||
        compared(a.flag.refrigerant ?? '~', b.flag.refrigerant ?? '~'),
    )
    .map(({ flag, openedBy, closedBy }) => ({
      code: flag.code,
      place: flag.place.place as OutcomeFlag['place'],
      subjectId: subjectOf(flag),
      groupId: flag.groupId,
      refrigerant: flag.refrigerant,
      mass: flag.massMicrograms === null ? null : String(flag.massMicrograms),
      figures: Object.fromEntries(Object.entries(flag.figures).map(([name, mass]) => [name, String(mass)])),
      openedBy,
      closedBy,
    }));
}

const subjectOf = ({ place }: LedgerFlag): string => ('id' in place ? place.id : '');
const compared = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);

/** As the database rounds it: whole seconds, halves away from zero. */
function skewOf({ recordedAt, deviceSentAt }: GroupRecord): number | null {
  if (deviceSentAt === null) return null;
  const seconds = (Date.parse(recordedAt) - Date.parse(deviceSentAt)) / 1000;
  return Math.sign(seconds) * Math.round(Math.abs(seconds));
}

function labelsOf({ cylinders, units, parties }: PostingFacts): Record<string, string> {
  const tags = [...cylinders, ...units].map(([id, { tag }]) => [id, tag] as const);
  const names = [...parties.values()].map(({ id, name }) => [id, name] as const);
  return Object.fromEntries([...tags, ...names]);
}
