import type { GroupRecord } from '../../shared/journal/record.schema.ts';
import { cylinderFromSnapshot, unitFromSnapshot } from '../../shared/ledger/snapshot.ts';
import { bookAfter, movedMasses } from './books-after.ts';
import type { JudgedPosting, PlaceAfter } from './judge-posting.ts';
import type { CylinderFacts, PostingFacts, StoredFlag, UnitFacts } from './posting-facts.ts';
import type { PostingRecords } from './posting-records.ts';

/** Facts of many postings that go on with each of them, as reading them again would say. */
export interface SteppedFacts {
  readonly facts: PostingFacts;
  /** A posting of a group was judged on these facts, and will stand. */
  step(judged: JudgedPosting, written: PostingRecords): void;
}

export function steppedFacts(read: PostingFacts): SteppedFacts {
  const cylinders = new Map(read.cylinders);
  const units = new Map(read.units);
  const firm = { ...read.firm };
  const facts = { ...read, firm, cylinders, units, standingFlags: read.standingFlags };
  return {
    facts,
    step(judged, written) {
      stepBooks(cylinders, units, judged);
      for (const place of judged.places) stepState(cylinders, units, place);
      facts.standingFlags = flagsAfter(facts, judged, written);
      firm.sequence += written.records.length;
    },
  };
}

function stepBooks(cylinders: Map<string, CylinderFacts>, units: Map<string, UnitFacts>, judged: JudgedPosting): void {
  const moved = movedMasses(judged.changes, judged.added?.group ?? null, undefined);
  const ends = moved.flatMap(({ from, to }) => [from, to]);
  const stepped = new Set<string>();
  for (const place of ends) {
    if ((place.place !== 'cylinder' && place.place !== 'unit') || stepped.has(place.id)) continue;
    stepped.add(place.id);
    const cylinder = cylinders.get(place.id);
    if (cylinder) cylinders.set(place.id, { ...cylinder, book: bookAfter(place, cylinder.book, moved) });
    const unit = units.get(place.id);
    if (unit) units.set(place.id, { ...unit, book: bookAfter(place, unit.book, moved) });
  }
}

/** Through the snapshot, as it will be read by the next posting. */
function stepState(
  cylinders: Map<string, CylinderFacts>,
  units: Map<string, UnitFacts>,
  { place, snapshot }: PlaceAfter,
): void {
  if (place.place === 'cylinder') {
    const cylinder = cylinders.get(place.id);
    if (cylinder) cylinders.set(place.id, { ...cylinder, state: cylinderFromSnapshot(snapshot) });
  } else if (place.place === 'unit') {
    const unit = units.get(place.id);
    if (unit) units.set(place.id, { ...unit, state: unitFromSnapshot(snapshot) });
  }
}

function flagsAfter(facts: PostingFacts, judged: JudgedPosting, written: PostingRecords): readonly StoredFlag[] {
  const { opened, closed } = judged.flags;
  if (opened.length === 0 && closed.length === 0) return facts.standingFlags;
  const closedIds = new Set(closed.map(({ id }) => id));
  const at = written.records.findIndex(({ type }) => type === 'group');
  const group = written.records[at] as GroupRecord;
  const openedSequence = facts.firm.sequence + at + 1;
  const rows = written.derived.flagsOpened ?? [];
  const standing = opened.flatMap((flag, index): StoredFlag[] => {
    const row = rows[index];
    if (!row) throw new Error('each opened flag has its row');
    if (!flag.standing) return [];
    return [{ ...flag, id: row.id, openedAt: row.at, openedBy: group.id, openedSequence }];
  });
  return [...facts.standingFlags.filter(({ id }) => !closedIds.has(id)), ...standing];
}
