import type { EntityManager } from 'typeorm';
import type { DerivedRows } from '../../shared/journal/record.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { postRecords } from '../journal/post-records.ts';
import type { NewOrRefused } from '../journal/register-journal.ts';
import { namedIds } from './named-ids.ts';
import { authorOf, judgeBody, type PostingParts } from './post-group.ts';
import { findEarlierHashes } from './posting-answer.repository.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';
import type { PostingRecords } from './posting-records.ts';
import { steppedFacts } from './stepped-facts.ts';

/**
 * Posts groups in the order given, in a transaction that has locked the head: each is judged on what those before it
 * made, by the same judge as when it comes alone, and they reach the log together. What is refused is left out, and the
 * others go on. Only what comes late to a place sends those before it ahead, because its timeline is read.
 *
 * @returns of each group whether it is new, or what refused it
 * @throws Problem where the database refuses the call: it looks at the totals of all of them, so that one group may have
 *   been taken for another's reason. Who wants to know which, posts fewer at a time.
 */
export async function postGroupsWithin(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  bodies: readonly EntryGroupRequest[],
): Promise<NewOrRefused[]> {
  if (bodies.length === 0) return [];
  const author = authorOf(parts, actor);
  const stepped = steppedFacts(await loadPostingFacts(manager, namedIds(bodies)));
  const hashes = await findEarlierHashes(manager, [...stepped.facts.earlierGroupIds]);
  let waiting: PostingRecords[] = [];
  let isSending = false;
  /** Cylinders and units whose timelines the waiting ones make longer. */
  const touched = new Set<string>();
  const send = async (): Promise<void> => {
    const sent = waiting;
    waiting = [];
    touched.clear();
    if (sent.length === 0) return;
    isSending = true;
    const records = sent.flatMap((each) => each.records);
    await postRecords(manager, records, together(sent.map(({ derived }) => derived)));
    isSending = false;
  };
  const sendWhatTouches = async (placeIds: readonly string[] | null): Promise<void> => {
    if (placeIds === null || placeIds.some((id) => touched.has(id))) await send();
  };
  const outcomes: NewOrRefused[] = [];
  for (const body of bodies) {
    const hash = requestHash(body);
    const earlier = hashes.get(body.groupId);
    if (earlier !== undefined) {
      outcomes.push(earlier === hash ? false : new Problem('idReused'));
      continue;
    }
    try {
      const { judged, written } = await judgeBody(manager, parts, author, stepped.facts, body, hash, sendWhatTouches);
      stepped.step(judged, written);
      waiting.push(written);
      for (const { place } of judged.places) if ('id' in place) touched.add(place.id);
      hashes.set(body.groupId, hash);
      outcomes.push(true);
    } catch (error) {
      // What the database refused is not this group's alone, and its transaction is over.
      if (isSending || !(error instanceof Problem) || error.status >= 500) throw error;
      outcomes.push(error);
    }
  }
  await send();
  return outcomes;
}

/** What stands beside the chain of several postings; of each place the last state. */
function together(derived: readonly DerivedRows[]): DerivedRows {
  const states = derived.flatMap(({ placeStates = [] }) => placeStates);
  return {
    placeStates: [...new Map(states.map((state) => [`${state.place} ${state.id}`, state])).values()],
    flagsOpened: derived.flatMap(({ flagsOpened = [] }) => flagsOpened),
    flagsClosed: derived.flatMap(({ flagsClosed = [] }) => flagsClosed),
    texts: derived.flatMap(({ texts = [] }) => texts),
  };
}
