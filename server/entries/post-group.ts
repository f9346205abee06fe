import type { EntityManager } from 'typeorm';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { enteredGroup } from '../../shared/ledger/judged-group.ts';
import { ASSUMED_SCALE } from '../../shared/ledger/scale.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals, valueOrProblem } from '../http/problem.ts';
import { undoSettlements } from '../periods/undo-settlements.ts';
import { type JudgedPosting, judgePosting, type Posting, placesToReplay } from './judge-posting.ts';
import { findEarlierPosting, readOutcome } from './posting-answer.repository.ts';
import type { PostingOutcome } from './posting-answer.ts';
import type { PostingFacts, StoredGroup } from './posting-facts.ts';
import { type Author, type PostingRecords, recordsOfPosting } from './posting-records.ts';
import { reasonRefusals, requestRefusals } from './posting-refusals.ts';
import { findGroup, loadTimelines } from './timeline.repository.ts';

export type PostingParts = Pick<Parts, 'dataSource' | 'now' | 'newId' | 'reference'>;

/** Which release of the zone data says what day it is somewhere. */
const ZONE_DATA_VERSION = process.versions.tz ?? 'unknown';

export function authorOf(parts: PostingParts, actor: Pick<Actor, 'personId'>): Author {
  const { newId } = parts;
  return { personId: actor.personId, now: parts.now(), newId, zoneDataVersion: ZONE_DATA_VERSION };
}

/** The body as the judge reads it. @throws Problem 422 for what can be refused before judging */
export function enter(
  parts: PostingParts,
  facts: PostingFacts,
  body: EntryGroupRequest,
  { at, opening, place }: { at: string; opening: StoredGroup | null; place: number },
) {
  const { reference } = parts;
  refuse(requestRefusals({ body, at, opening, now: parts.now(), facts, reference }));
  return enteredGroup(body, {
    sequence: facts.firm.sequence + place,
    scaleOf: (toolId) => (toolId ? facts.scales.get(toolId) : undefined) ?? ASSUMED_SCALE,
  });
}

/** A body that was judged, and what is written down of it. */
export interface JudgedBody {
  judged: JudgedPosting;
  written: PostingRecords;
}

/**
 * Judges the body of a group that stands for itself and writes it down for posting.
 * @param beforeReading what has to reach the log before the timelines of these places are read from it; null: anything
 * @throws Problem 422
 */
export async function judgeBody(
  manager: EntityManager,
  parts: PostingParts,
  author: Author,
  facts: PostingFacts,
  body: EntryGroupRequest,
  requestHash: string,
  beforeReading?: (placeIds: readonly string[] | null) => Promise<void>,
): Promise<JudgedBody> {
  if (body.closesGroupId) await beforeReading?.(null);
  const opening = body.closesGroupId ? await findGroup(manager, body.closesGroupId) : null;
  const added = enter(parts, facts, body, { at: '', opening, place: 1 });
  const posting: Posting = { recordId: body.groupId, added };
  const replayed = placesToReplay(posting, facts);
  if (replayed.length > 0) await beforeReading?.(replayed);
  const { judged, stored } = await judge(manager, posting, facts);
  refuseWithoutReason(reasonRefusals(posting, judged, facts, body.reason));
  const request = { body, requestHash, replacesGroupId: null };
  return { judged, written: recordsOfPosting(author, facts, posting, judged, request, null, stored) };
}

export interface Judgement {
  judged: JudgedPosting;
  /** Groups of which a correction may speak. */
  stored: Map<string, StoredGroup>;
}

/**
 * Judges with what the database holds of the places concerned, and reverses what month close made of a difference that
 * is explained now. For a posting of the same transaction.
 * @throws Problem 422
 */
export async function judge(manager: EntityManager, posting: Posting, facts: PostingFacts): Promise<Judgement> {
  const replayed = placesToReplay(posting, facts);
  const timelines =
    replayed.length === 0 && !posting.reversed
      ? { groups: [], posted: [], flags: [] }
      : await loadTimelines(manager, replayed, posting.reversed?.id ?? null);
  const judged = valueOrProblem(judgePosting(posting, facts, timelines));
  const undone = await undoSettlements(manager, {
    recordId: posting.recordId,
    replayedIds: replayed,
    posted: timelines.posted,
    changes: judged.changes,
    reversedGroupId: posting.reversed?.id ?? null,
  });
  const stored = new Map(timelines.groups.map((group) => [group.id, group]));
  if (posting.reversed) stored.set(posting.reversed.id, posting.reversed);
  // A settlement touches no place that is judged: the group whose difference it settled was not read with one.
  for (const { groupId } of undone) {
    const corrected = stored.has(groupId) ? null : await findGroup(manager, groupId);
    if (corrected) stored.set(groupId, corrected);
  }
  return { judged: { ...judged, changes: [...judged.changes, ...undone] }, stored };
}

export function refuse(refusals: readonly Refusal[]): void {
  if (refusals.length > 0) throw problemOfRefusals(refusals);
}

/** A reason is asked for: one code for the whole, one for each cause. */
export function refuseWithoutReason(refusals: readonly Refusal[]): void {
  if (refusals.length > 0) throw new Problem('reasonRequired', { errors: refusals });
}

/**
 * The outcome of an earlier posting of this id, for a resend; null when there is none.
 * @throws Problem 409 when it was posted with other content, or about another group
 */
export async function findRepeated(
  manager: EntityManager,
  groupId: string,
  requestHash: string,
  aboutGroupId: string | null = null,
): Promise<PostingOutcome | null> {
  const earlier = await findEarlierPosting(manager, groupId);
  if (!earlier) return null;
  if (earlier.requestHash !== requestHash || earlier.aboutGroupId !== aboutGroupId) throw new Problem('idReused');
  return readOutcome(manager, earlier.groupIds, earlier.subjectIds, earlier.lastSequence);
}
