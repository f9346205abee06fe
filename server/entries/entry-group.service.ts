import type { EntityManager } from 'typeorm';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import { type Actor, mayActor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead, postRecords } from '../journal/post-records.ts';
import type { Made } from '../registers/register-rows.ts';
import { namedIds } from './named-ids.ts';
import { outcomeOfAdded } from './outcome-of-added.ts';
import { authorOf, findRepeated, judgeBody, type PostingParts } from './post-group.ts';
import { type PostingOutcome, presentOutcome } from './posting-answer.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';

/**
 * Posts a group: whole or not at all, once however often it is sent.
 * @throws Problem 403, 409 for other content under the same id, 422
 */
export function postEntryGroup(
  parts: PostingParts,
  actor: Actor,
  body: EntryGroupRequest,
): Promise<Made<EntryGroupResponse>> {
  requireKind(actor, body);
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const { isNew, value } = await postWithin(manager, parts, actor, body);
    return { isNew, value: presentOutcome(value, actor.locale) };
  });
}

/** As `postEntryGroup`, in a transaction that has locked the head already. */
export async function postWithin(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  body: EntryGroupRequest,
): Promise<Made<PostingOutcome>> {
  const hash = requestHash(body);
  const facts = await loadPostingFacts(manager, namedIds([body]));
  if (facts.earlierGroupIds.has(body.groupId)) {
    const repeated = await findRepeated(manager, body.groupId, hash);
    if (repeated) return { isNew: false, value: repeated };
  }
  const { judged, written } = await judgeBody(manager, parts, authorOf(parts, actor), facts, body, hash);
  const posted = await postRecords(manager, written.records, written.derived);
  return { isNew: true, value: outcomeOfAdded(written, posted, judged, facts) };
}

/** Closing the books and writing down what a reclaimer certified is the office's. */
export function requireKind(actor: Actor, { kind }: Pick<EntryGroupRequest, 'kind'>): void {
  if ((kind === 'monthClose' || kind === 'certificate') && !mayActor(actor, 'registers:correct')) {
    throw new Problem('notPermitted', { errors: [{ code: 'kindOfTheOffice', path: '/kind', given: kind }] });
  }
}
