import { type Place, placeKey } from './place.ts';

/**
 * What the judge says the server has to have posted for one group's statements, netted: one per group, judged place,
 * pair of places, refrigerant and `atLeast`.
 */
export interface AddedEntry {
  /** The group whose statement it follows from. */
  readonly groupId: string;
  /** The cylinder or unit in whose timeline it was judged. */
  readonly judgedPlace: Place;
  readonly place: Place;
  readonly counterPlace: Place;
  readonly refrigerant: string;
  /** Above zero: from `counterPlace` to `place`. */
  readonly massMicrograms: bigint;
  /** The loss is at least this much, because the unit was left not full. */
  readonly atLeast: boolean;
  /** It takes back an inferred loss. A label for people: it changes nothing. */
  readonly takenBack: boolean;
}

/** One entry to post so that the log says what the judge says. */
export interface AddedChange {
  readonly judgedPlace: Place;
  /** The group whose statement it settles or corrects: the entry takes its `occurredAt`. */
  readonly groupId: string;
  /** Null in the group's own posting; else the group that is judged again. */
  readonly correctsGroupId: string | null;
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly from: Place;
  readonly to: Place;
  readonly atLeast: boolean;
  readonly takenBack: boolean;
}

function addedKey(entry: AddedEntry): string {
  return [
    placeKey(entry.judgedPlace),
    entry.groupId,
    placeKey(entry.place),
    placeKey(entry.counterPlace),
    entry.refrigerant,
    entry.atLeast,
  ].join('|');
}

/** An entry that the server posted earlier, read back as the judge writes it. */
export function postedAsAdded(posted: {
  judgedPlace: Place;
  groupId: string;
  correctsGroupId: string | null;
  refrigerant: string;
  massMicrograms: bigint;
  from: Place;
  to: Place;
  atLeast: boolean;
}): AddedEntry {
  const { judgedPlace, refrigerant, massMicrograms, from, to, atLeast } = posted;
  const groupId = posted.correctsGroupId ?? posted.groupId;
  const inward = isNear(to, from, judgedPlace);
  return {
    groupId,
    judgedPlace,
    place: inward ? to : from,
    counterPlace: inward ? from : to,
    refrigerant,
    massMicrograms: inward ? massMicrograms : -massMicrograms,
    atLeast,
    takenBack: false,
  };
}

/** Which end is `place`: the judged place itself; where neither end is (opening -> before our care), the opening. */
function isNear(candidate: Place, other: Place, judgedPlace: Place): boolean {
  const judged = placeKey(judgedPlace);
  if (placeKey(candidate) === judged) return true;
  return placeKey(other) !== judged && candidate.place === 'opening';
}

/** Sums what has one key; what comes to nothing is left out. */
export function netted(entries: readonly AddedEntry[]): AddedEntry[] {
  const byKey = new Map<string, AddedEntry>();
  for (const entry of entries) {
    const key = addedKey(entry);
    const earlier = byKey.get(key);
    byKey.set(key, {
      ...entry,
      massMicrograms: (earlier?.massMicrograms ?? 0n) + entry.massMicrograms,
      takenBack: entry.takenBack || (earlier?.takenBack ?? false),
    });
  }
  return [...byKey.values()].filter((entry) => entry.massMicrograms !== 0n);
}

/**
 * The change alone, so that what stands posted becomes what is desired. `posted` and `desired` cover the same places and
 * groups: whole timelines, or one group that is judged in order.
 *
 * @param postingGroupIds the groups being posted now: what is added for them corrects nothing.
 */
export function changesAgainst(
  posted: readonly AddedEntry[],
  desired: readonly AddedEntry[],
  postingGroupIds: ReadonlySet<string>,
): AddedChange[] {
  const before = new Map(netted(posted).map((entry) => [addedKey(entry), entry]));
  const after = new Map(netted(desired).map((entry) => [addedKey(entry), entry]));
  const changes: AddedChange[] = [];
  for (const key of new Set([...after.keys(), ...before.keys()])) {
    const entry = after.get(key) ?? before.get(key);
    const mass = (after.get(key)?.massMicrograms ?? 0n) - (before.get(key)?.massMicrograms ?? 0n);
    if (!entry || mass === 0n) continue;
    changes.push({
      judgedPlace: entry.judgedPlace,
      groupId: entry.groupId,
      correctsGroupId: postingGroupIds.has(entry.groupId) ? null : entry.groupId,
      refrigerant: entry.refrigerant,
      massMicrograms: mass > 0n ? mass : -mass,
      from: mass > 0n ? entry.counterPlace : entry.place,
      to: mass > 0n ? entry.place : entry.counterPlace,
      atLeast: entry.atLeast,
      takenBack: entry.takenBack && mass > 0n,
    });
  }
  return changes;
}
