import type { AddedChange } from './added-entry.ts';
import type { HowKnown } from './entry-group.schema.ts';
import type { JudgedGroup, JudgedMass } from './judged-group.ts';
import { type MassByRefrigerant, plus } from './mass-by-refrigerant.ts';
import { type Place, placeKey } from './place.ts';

/** One posted entry of the log in memory. */
export interface BookEntry {
  /** The record it was posted in. */
  readonly groupId: string;
  readonly correctsGroupId: string | null;
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly from: Place;
  readonly to: Place;
  readonly occurredAt: number;
  readonly bookingMonth: string;
  readonly late: boolean;
  readonly howKnown: HowKnown | null;
  readonly addedByServer: boolean;
  /** The timeline that it was judged in; null for what was entered. */
  readonly judgedPlace: Place | null;
  readonly atLeast: boolean;
  readonly takenBack: boolean;
}

/** By place key. */
export type Balances = ReadonlyMap<string, { readonly place: Place; readonly book: MassByRefrigerant }>;

const monthOf = (at: number): string => new Date(at).toISOString().slice(0, 7);
export const monthAfter = (month: string): string => {
  const [year = 0, number = 0] = month.split('-').map(Number);
  return new Date(Date.UTC(year, number, 1)).toISOString().slice(0, 7);
};

type Moved = Pick<JudgedMass, 'refrigerant' | 'massMicrograms' | 'from' | 'to'>;

function plainEntry(
  groupId: string,
  correctsGroupId: string | null,
  occurredAt: number,
  { refrigerant, massMicrograms, from, to }: Moved,
  firstOpenMonth: string,
): BookEntry {
  const month = monthOf(occurredAt);
  const late = month < firstOpenMonth;
  const bookingMonth = late ? firstOpenMonth : month;
  const marks = { addedByServer: false, judgedPlace: null, atLeast: false, takenBack: false };
  return {
    groupId,
    correctsGroupId,
    refrigerant,
    massMicrograms,
    from,
    to,
    occurredAt,
    bookingMonth,
    late,
    howKnown: null,
    ...marks,
  };
}

export function enteredEntry(group: JudgedGroup, mass: JudgedMass, firstOpenMonth: string): BookEntry {
  return { ...plainEntry(group.id, null, group.occurredAt, mass, firstOpenMonth), howKnown: mass.howKnown };
}

/** A reversal has the `occurredAt` of what it reverses. */
export function reversalEntry(
  recordId: string,
  group: JudgedGroup,
  mass: JudgedMass,
  firstOpenMonth: string,
): BookEntry {
  const mirrored = { ...mass, from: mass.to, to: mass.from };
  return { ...plainEntry(recordId, group.id, group.occurredAt, mirrored, firstOpenMonth), howKnown: mass.howKnown };
}

/** A correction stands in the record that brought it about and has the `occurredAt` of the statement it corrects. */
export function serverEntry(
  recordId: string,
  change: AddedChange,
  groups: ReadonlyMap<string, JudgedGroup>,
  firstOpenMonth: string,
): BookEntry {
  const group = groups.get(change.groupId);
  if (!group) throw new RangeError(`Group ${change.groupId} was not posted`);
  const groupId = change.correctsGroupId === null ? change.groupId : recordId;
  const { judgedPlace, atLeast, takenBack, correctsGroupId } = change;
  const entry = plainEntry(groupId, correctsGroupId, group.occurredAt, change, firstOpenMonth);
  return { ...entry, addedByServer: true, judgedPlace, atLeast, takenBack };
}

export function withEntries(balances: Balances, entries: readonly BookEntry[]): Balances {
  const after = new Map(balances);
  const add = (place: Place, refrigerant: string, mass: bigint): void => {
    const key = placeKey(place);
    after.set(key, { place, book: plus(after.get(key)?.book ?? {}, refrigerant, mass) });
  };
  for (const { from, to, refrigerant, massMicrograms } of entries) {
    add(from, refrigerant, -massMicrograms);
    add(to, refrigerant, massMicrograms);
  }
  return after;
}
