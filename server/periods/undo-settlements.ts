import type { EntityManager } from 'typeorm';
import { type AddedChange, type AddedEntry, postedAsAdded } from '../../shared/ledger/added-entry.ts';
import { type Settlement, settlementsToUndo } from '../../shared/ledger/month-close.ts';
import type { Place } from '../../shared/ledger/place.ts';
import { settlementRepository } from './settlement.repository.ts';

/**
 * What month close made of a difference that a posting explains is reversed with it, in the same group: the changes to
 * post, and how much of each settlement is undone is kept. Where the posting reverses a settlement itself, its mass goes
 * back whole, so that what was undone of it before has to be posted the other way.
 *
 * @param recordId the group that carries the posting
 * @param replayedIds cylinders and units whose whole timeline was judged; else nothing earlier has changed
 * @param posted what the judge had posted into them, `changes` what it posts now
 * @param reversedGroupId a certificate that is reversed: what its difference was settled to goes back; or a settlement
 */
export async function undoSettlements(
  manager: EntityManager,
  { recordId, replayedIds, posted, changes, reversedGroupId }: Judged,
): Promise<AddedChange[]> {
  if (replayedIds.length === 0 && reversedGroupId === null) return [];
  const settlements = settlementRepository(manager);
  const standing = await settlements.standingIn(replayedIds, reversedGroupId);
  const desired = [...posted, ...changes.map((change) => postedAsAdded(change))];
  const undone = settlementsToUndo(standing, desired);
  for (const { settlement, massMicrograms } of undone) {
    const sign = settlement.massMicrograms < 0n ? -1n : 1n;
    await settlements.undo((settlement as (typeof standing)[number]).id, recordId, massMicrograms * sign);
  }
  const undoneBefore = reversedGroupId === null ? [] : await settlements.undoneOf(reversedGroupId);
  return [
    ...undone.map(({ settlement, from, to, massMicrograms }) => changeOf(settlement, from, to, massMicrograms)),
    ...undoneBefore.map((settlement) => {
      const { difference, settledTo, massMicrograms: mass } = settlement;
      return mass > 0n
        ? changeOf(settlement, difference, settledTo, mass)
        : changeOf(settlement, settledTo, difference, -mass);
    }),
  ];
}

const changeOf = (
  { judgedPlace, groupId, refrigerant }: Settlement,
  from: Place,
  to: Place,
  massMicrograms: bigint,
): AddedChange => ({
  judgedPlace,
  groupId,
  correctsGroupId: groupId,
  refrigerant,
  massMicrograms,
  from,
  to,
  atLeast: false,
  takenBack: false,
});

interface Judged {
  recordId: string;
  replayedIds: readonly string[];
  posted: readonly AddedEntry[];
  changes: readonly AddedChange[];
  reversedGroupId: string | null;
}
