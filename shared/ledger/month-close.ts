import type { AddedEntry } from './added-entry.ts';
import { smaller } from './mass-by-refrigerant.ts';
import { type Place, placeKey } from './place.ts';

/** What month close made of a difference that the judge had posted for one group: lost, supplier, missing. */
export interface Settlement {
  /** The group whose difference it settles, and the cylinder or unit it was judged in. */
  readonly groupId: string;
  readonly judgedPlace: Place;
  readonly difference: Place;
  readonly settledTo: Place;
  readonly refrigerant: string;
  /** Above zero: from the difference to `settledTo`; below zero the other way. What was undone already is taken off. */
  readonly massMicrograms: bigint;
}

/** One entry that takes a settlement back, whole or in part. */
export interface UndoneSettlement {
  readonly settlement: Settlement;
  readonly from: Place;
  readonly to: Place;
  /** Above zero. */
  readonly massMicrograms: bigint;
}

/**
 * What month close made of a difference that is explained by now is reversed with it: of each settlement only as much
 * may stand as the judge still posts into that difference for that group. Settlements later in the list go first.
 *
 * @param desired what the judge says of the places that the settlements speak of, whole timelines.
 */
export function settlementsToUndo(
  settlements: readonly Settlement[],
  desired: readonly AddedEntry[],
): UndoneSettlement[] {
  const leftFor = new Map<string, bigint>();
  for (const entry of desired) {
    const key = keyOf(entry.groupId, entry.judgedPlace, entry.counterPlace, entry.refrigerant);
    leftFor.set(key, (leftFor.get(key) ?? 0n) - entry.massMicrograms);
  }
  return settlements.flatMap((settlement) => {
    const { groupId, judgedPlace, difference, settledTo, refrigerant, massMicrograms } = settlement;
    const key = keyOf(groupId, judgedPlace, difference, refrigerant);
    const left = leftFor.get(key) ?? 0n;
    const sign = massMicrograms < 0n ? -1n : 1n;
    const stands = left * sign > 0n ? smaller(left * sign, massMicrograms * sign) : 0n;
    leftFor.set(key, left - stands * sign);
    const undone = massMicrograms * sign - stands;
    if (undone === 0n) return [];
    const [from, to] = sign > 0n ? [settledTo, difference] : [difference, settledTo];
    return [{ settlement, from, to, massMicrograms: undone }];
  });
}

const keyOf = (groupId: string, judgedPlace: Place, difference: Place, refrigerant: string): string =>
  [groupId, placeKey(judgedPlace), placeKey(difference), refrigerant].join('|');
