import type { DerivedRows } from '../../shared/journal/record.schema.ts';
import type { JudgedPosting } from './judge-posting.ts';
import type { Author } from './posting-records.ts';

/** What is kept beside the chain of a judged posting: states to step on, and flags. */
export function derivedRows(author: Author, recordId: string, judged: JudgedPosting): DerivedRows {
  const at = author.now.toISOString();
  return {
    placeStates: judged.places.map(({ place, known, snapshot, lastOccurredAt }) => ({
      place: place.place as 'cylinder' | 'unit',
      id: (place as { id: string }).id,
      known,
      state: { ...snapshot },
      lastOccurredAt: lastOccurredAt === null ? null : new Date(lastOccurredAt).toISOString(),
    })),
    flagsOpened: judged.flags.opened.map((flag) => ({
      id: author.newId(),
      code: flag.code,
      subjectKind: flag.place.place as 'unit' | 'cylinder' | 'reclaimer',
      subjectId: (flag.place as { id: string }).id,
      groupId: flag.groupId,
      openedByGroupId: recordId,
      refrigerant: flag.refrigerant,
      massMicrograms: flag.massMicrograms === null ? null : String(flag.massMicrograms),
      figures: Object.fromEntries(Object.entries(flag.figures).map(([name, mass]) => [name, String(mass)])),
      standing: flag.standing,
      at: flag.openedAt ? new Date(flag.openedAt).toISOString() : at,
    })),
    flagsClosed: judged.flags.closed.map(({ id }) => ({ id, closedByGroupId: recordId, at })),
  };
}
