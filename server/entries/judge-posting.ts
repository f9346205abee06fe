import { type AddedChange, type AddedEntry, changesAgainst } from '../../shared/ledger/added-entry.ts';
import { emptyCylinderState } from '../../shared/ledger/cylinder-state.ts';
import { flagChanges, flagKey, flagsAfterStep, type LedgerFlag } from '../../shared/ledger/flag.ts';
import { groupFlags } from '../../shared/ledger/group-flags.ts';
import { cylinderBookBeforeMasses, judgeCylinderStep, replayCylinder } from '../../shared/ledger/judge-cylinder.ts';
import { judgeUnitStep, replayUnit } from '../../shared/ledger/judge-unit.ts';
import {
  compareInTimeline,
  type EnteredGroup,
  type JudgedGroup,
  type JudgedMass,
  placesJudged,
  splitMass,
  touchesCylinder,
  touchesUnit,
} from '../../shared/ledger/judged-group.ts';
import type { MassByRefrigerant } from '../../shared/ledger/mass-by-refrigerant.ts';
import { cylinderPlace, type Place, placeKey, unitPlace } from '../../shared/ledger/place.ts';
import { isInOrder, type Snapshot, toSnapshot } from '../../shared/ledger/snapshot.ts';
import { done, type Outcome, refused } from '../../shared/problems/outcome.ts';
import { floorRefusals } from './books-after.ts';
import type { PostingFacts, StoredFlag, StoredGroup } from './posting-facts.ts';
import type { Timelines } from './timeline.repository.ts';

/** What one posting changes. A reversal with its replacement is one posting. */
export interface Posting {
  /** The group that corrections of earlier groups are booked with. */
  readonly recordId: string;
  readonly added?: EnteredGroup;
  /** Where in the request the added group stands: `` or `/replacement`. */
  readonly addedAt?: string;
  readonly reversed?: StoredGroup;
  /** The group as it reads with the answer, which is about this unit. */
  readonly answered?: { readonly group: StoredGroup; readonly unitId: string };
  /** Its register was revised: the whole timeline is judged again. */
  readonly revisedCylinderId?: string;
  readonly revisedUnitId?: string;
}

/** A group that was added, and from which entered mass each of its masses comes. */
export interface AddedGroup {
  readonly group: JudgedGroup;
  /** Index of the request's entry for each of `group.masses`: a mixed cylinder's mass is split. */
  readonly entryIndexes: readonly number[];
}

export interface PlaceAfter {
  readonly place: Place;
  readonly known: boolean;
  readonly snapshot: Snapshot;
  readonly lastOccurredAt: number | null;
}

export interface JudgedPosting {
  readonly added: AddedGroup | null;
  readonly changes: readonly AddedChange[];
  readonly places: readonly PlaceAfter[];
  readonly flags: { readonly opened: readonly OpenedFlag[]; readonly closed: readonly StoredFlag[] };
}

/** With the id of the flag whose figure it changes: what stood longer is not new. */
export interface OpenedFlag extends LedgerFlag {
  readonly openedAt: string | null;
}

export interface PlaceIds {
  readonly cylinderIds: readonly string[];
  readonly unitIds: readonly string[];
}

/** The cylinders and units that a posting concerns. */
export function placesOf(posting: Posting): PlaceIds {
  const groups = [posting.added, posting.reversed].filter((group) => group !== undefined);
  const judged = groups.map((group) => placesJudged(group as JudgedGroup));
  const cylinderIds = new Set(judged.flatMap((places) => places.cylinderIds));
  const unitIds = new Set(judged.flatMap((places) => places.unitIds));
  if (posting.revisedCylinderId) cylinderIds.add(posting.revisedCylinderId);
  if (posting.answered) unitIds.add(posting.answered.unitId);
  if (posting.revisedUnitId) unitIds.add(posting.revisedUnitId);
  return { cylinderIds: [...cylinderIds].sort(), unitIds: [...unitIds].sort() };
}

/** The places whose state cannot be stepped on: their whole timeline has to be read. */
export function placesToReplay(posting: Posting, facts: PostingFacts): string[] {
  const { cylinderIds, unitIds } = placesOf(posting);
  const isPlain = posting.added !== undefined && posting.reversed === undefined;
  const inOrder = (
    state: { lastPosition: JudgedGroup | { occurredAt: number; sequence: number | bigint } | null } | null,
  ) => isPlain && state !== null && posting.added !== undefined && isInOrder(state, posting.added);
  return [
    ...cylinderIds.filter((id) => !inOrder(facts.cylinders.get(id)?.state ?? null)),
    ...unitIds.filter((id) => !inOrder(facts.units.get(id)?.state ?? null)),
  ];
}

interface JudgedPlace {
  readonly place: Place;
  readonly known: boolean;
  readonly snapshot: Snapshot;
  readonly lastOccurredAt: number | null;
  readonly changes: readonly AddedChange[];
  readonly flagsBefore: readonly StoredFlag[];
  readonly flagsAfter: readonly LedgerFlag[];
}

/**
 * Judges a posting on the states as they stand, or on the whole timeline where something lies before what was judged
 * already, and says what to post. Refuses what would take a cylinder or a known unit below zero in the end.
 */
export function judgePosting(posting: Posting, facts: PostingFacts, timelines: Timelines): Outcome<JudgedPosting> {
  const standing = timelines.groups
    .map((group) => (group.id === posting.answered?.group.id ? posting.answered.group : group))
    .filter(({ id }) => id !== posting.reversed?.id);
  const split = posting.added ? splitMasses(posting, posting.added, facts, standing) : done(null);
  if (!split.ok) return split;
  const added = split.value;
  const groups: JudgedGroup[] = added ? [...standing, added.group] : standing;
  const replayed = new Set(placesToReplay(posting, facts));
  const context = { posting, facts, timelines, groups, added: added?.group ?? null, replayed };
  const { cylinderIds, unitIds } = placesOf(posting);
  const judged = [
    ...cylinderIds.map((id) => judgeCylinder(id, context)),
    ...unitIds.map((id) => judgeUnit(id, context)),
  ];
  const changes = judged.flatMap((place) => place.changes);
  const refusals = floorRefusals(judged, changes, posting, added?.group ?? null, facts);
  if (refusals.length > 0) return refused(...refusals);
  return done({
    added,
    changes,
    places: judged.map(({ place, known, snapshot, lastOccurredAt }) => ({ place, known, snapshot, lastOccurredAt })),
    flags: changedFlags(judged, posting, added?.group ?? null, timelines),
  });
}

interface Context {
  readonly posting: Posting;
  readonly facts: PostingFacts;
  readonly timelines: Timelines;
  readonly groups: readonly JudgedGroup[];
  readonly added: JudgedGroup | null;
  readonly replayed: ReadonlySet<string>;
}

/** Masses out of a mixed cylinder, divided by its book of that moment. */
function splitMasses(
  posting: Posting,
  entered: EnteredGroup,
  facts: PostingFacts,
  standing: readonly JudgedGroup[],
): Outcome<AddedGroup> {
  const masses: JudgedMass[] = [];
  const entryIndexes: number[] = [];
  const replayed = new Set(placesToReplay(posting, facts));
  for (const [index, mass] of entered.masses.entries()) {
    const isOpen = mass.refrigerant === null && mass.from.place === 'cylinder';
    const book = isOpen ? bookBeforeMasses((mass.from as { id: string }).id, entered, facts, standing, replayed) : {};
    const parts = splitMass(mass, book);
    if (!parts) {
      const path = `${posting.addedAt ?? ''}/entries/${index}/refrigerant`;
      return refused({ code: 'refrigerantRequired', path });
    }
    masses.push(...parts);
    entryIndexes.push(...parts.map(() => index));
  }
  return done({ group: { ...entered, masses }, entryIndexes });
}

function bookBeforeMasses(
  cylinderId: string,
  entered: EnteredGroup,
  facts: PostingFacts,
  standing: readonly JudgedGroup[],
  replayed: ReadonlySet<string>,
): MassByRefrigerant {
  const { register, state } = requireFact(facts.cylinders, cylinderId);
  if (!replayed.has(cylinderId)) return cylinderBookBeforeMasses(register, state ?? emptyCylinderState, entered);
  const earlier = standing.filter((group) => compareInTimeline(group, entered) < 0);
  return cylinderBookBeforeMasses(register, replayCylinder(register, earlier).state, entered);
}

function judgeCylinder(id: string, context: Context): JudgedPlace {
  const { register, state } = requireFact(context.facts.cylinders, id);
  const place = cylinderPlace(id);
  if (!context.replayed.has(id) && state && context.added) {
    const step = judgeCylinderStep(register, state, context.added);
    return stepped(place, true, step, context, context.added);
  }
  const groups = context.groups.filter((group) => touchesCylinder(group, id));
  return replayedPlace(place, true, replayCylinder(register, groups), context);
}

function judgeUnit(id: string, context: Context): JudgedPlace {
  const { register, state } = requireFact(context.facts.units, id);
  const place = unitPlace(id);
  if (!context.replayed.has(id) && state && context.added) {
    const step = judgeUnitStep(register, state, context.added);
    return stepped(place, step.state.known, step, context, context.added);
  }
  const groups = context.groups.filter((group) => touchesUnit(group, id));
  const replay = replayUnit(register, groups);
  return replayedPlace(place, replay.state.known, replay, context);
}

type Step = Pick<ReturnType<typeof judgeCylinderStep> | ReturnType<typeof judgeUnitStep>, 'state' | 'added' | 'flags'>;

function stepped(place: Place, known: boolean, step: Step, { facts }: Context, added: JudgedGroup): JudgedPlace {
  const flagsBefore = facts.standingFlags.filter((flag) => placeKey(flag.place) === placeKey(place));
  return {
    place,
    known,
    snapshot: toSnapshot(step.state),
    lastOccurredAt: step.state.lastPosition?.occurredAt ?? null,
    changes: changesAgainst([], step.added, new Set([added.id])),
    flagsBefore,
    flagsAfter: flagsAfterStep(flagsBefore, step),
  };
}

function replayedPlace(place: Place, known: boolean, replay: Step, { timelines, added }: Context): JudgedPlace {
  const mine = (other: Place) => placeKey(other) === placeKey(place);
  const posted: AddedEntry[] = timelines.posted.filter(({ judgedPlace }) => mine(judgedPlace));
  return {
    place,
    known,
    snapshot: toSnapshot(replay.state),
    lastOccurredAt: replay.state.lastPosition?.occurredAt ?? null,
    changes: changesAgainst(posted, replay.added, new Set(added ? [added.id] : [])),
    flagsBefore: timelines.flags.filter((flag) => mine(flag.place)),
    flagsAfter: flagsAfterStep([], replay),
  };
}

/**
 * A flag whose figure changes is closed and opened anew with the time it has stood since, so that what was open at any
 * moment can be told later.
 */
function changedFlags(
  judged: readonly JudgedPlace[],
  posting: Posting,
  added: JudgedGroup | null,
  timelines: Timelines,
): JudgedPosting['flags'] {
  const before = judged.flatMap(({ flagsBefore }) => flagsBefore);
  const after = judged.flatMap(({ flagsAfter }) => flagsAfter);
  const changes = flagChanges(before, after);
  const stored = new Map(before.map((flag) => [flagKey(flag), flag]));
  const storedOf = (flag: LedgerFlag): StoredFlag => {
    const found = stored.get(flagKey(flag));
    if (!found) throw new Error(`flag ${flag.code} was not open`);
    return found;
  };
  const ofReversed = timelines.flags.filter(
    (flag) => flag.groupId === posting.reversed?.id && flag.place.place === 'reclaimer',
  );
  return {
    opened: [
      ...changes.opened.map((flag) => ({ ...flag, openedAt: null })),
      ...changes.changed.map((flag) => ({ ...flag, openedAt: storedOf(flag).openedAt })),
      ...(added ? groupFlags(added) : []).map((flag) => ({ ...flag, openedAt: null })),
    ],
    closed: [...changes.closed.map(storedOf), ...changes.changed.map(storedOf), ...ofReversed],
  };
}

function requireFact<T>(facts: ReadonlyMap<string, T>, id: string): T {
  const found = facts.get(id);
  if (!found) throw new Error(`${id} was not read`); // references are refused before anything is judged
  return found;
}
