import type { EntryGroupRequest, ReversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { inFirm } from '../database/firm-scope.ts';
import { type Actor, mayActor } from '../http/actor.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead, postRecords } from '../journal/post-records.ts';
import type { Made } from '../registers/register-rows.ts';
import { requireKind } from './entry-group.service.ts';
import type { Posting } from './judge-posting.ts';
import { namedIds } from './named-ids.ts';
import { authorOf, enter, findRepeated, judge, type PostingParts, refuse, refuseWithoutReason } from './post-group.ts';
import { presentOutcome } from './posting-answer.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';
import type { StoredGroup } from './posting-facts.ts';
import { recordsOfPosting } from './posting-records.ts';
import { deviceTimeRefusals, reasonRefusals } from './posting-refusals.ts';
import { findGroup } from './timeline.repository.ts';

/** How long technicians put right what they posted themselves. */
const OWN_FOR_MS = 24 * 60 * 60_000;
const AT = '/replacement';

/**
 * Withdraws a group: its masses go back at their own time, its statements count no longer, later ones are judged again.
 * With a replacement both are posted, or neither.
 * @throws Problem 403, 404, 409 for other content under the same id, 422
 */
export function reverseGroup(
  parts: PostingParts,
  actor: Actor,
  groupId: string,
  body: ReversalRequest,
): Promise<Made<EntryGroupResponse>> {
  const replacement = body.replacement ?? null;
  if (replacement) requireKind(actor, replacement);
  refuse(deviceTimeRefusals(body));
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const hash = requestHash({ ...body, ...(replacement ? { replacement: withoutDeviceTime(replacement) } : {}) });
    const repeated = await findRepeated(manager, body.groupId, hash, groupId);
    if (repeated) return { isNew: false, value: presentOutcome(repeated, actor.locale) };

    const reversed = await findGroup(manager, groupId);
    if (!reversed) throw new Problem('notFound');
    requireOwnForADay(parts, actor, reversed);
    refuse(reversalRefusals(reversed, body));
    const ids = namedIds(replacement ? [replacement] : [], [reversed], { groupIds: [body.groupId] });
    const facts = await loadPostingFacts(manager, ids);
    if (facts.earlierGroupIds.size > 0) throw new Problem('idReused');
    const opening = replacement?.closesGroupId ? await findGroup(manager, replacement.closesGroupId) : null;
    const posting: Posting = {
      recordId: body.groupId,
      reversed,
      addedAt: AT,
      ...(replacement
        ? { added: enter(parts, facts, replacement, { at: AT, opening: reopened(opening, reversed), place: 2 }) }
        : {}),
    };
    const { judged, stored } = await judge(manager, posting, facts);
    if (replacement) refuseWithoutReason(reasonRefusals(posting, judged, facts, replacement.reason));
    const written = recordsOfPosting(
      authorOf(parts, actor),
      facts,
      posting,
      judged,
      replacement ? { body: replacement, requestHash: requestHash(replacement), replacesGroupId: reversed.id } : null,
      {
        kind: reversed.kind,
        occurredAt: reversed.occurredAt,
        unitId: reversed.unitId,
        deviceSentAt: body.deviceSentAt ?? null,
        requestHash: hash,
        reason: body.reason,
        reversesGroupId: reversed.id,
      },
      stored,
    );
    await postRecords(manager, written.records, written.derived);
    const outcome = await findRepeated(manager, body.groupId, hash, groupId);
    if (!outcome) throw new Error('a reversal that was posted is there');
    return { isNew: true, value: presentOutcome(outcome, actor.locale) };
  });
}

const withoutDeviceTime = ({ deviceSentAt: _, ...content }: EntryGroupRequest) => content;

/** What closed the weigh-in is being reversed, so it can be closed again. */
const reopened = (opening: StoredGroup | null, reversed: StoredGroup): StoredGroup | null =>
  opening?.closedByGroupId === reversed.id ? { ...opening, closedByGroupId: null } : opening;

function requireOwnForADay(parts: PostingParts, actor: Actor, reversed: StoredGroup): void {
  if (mayActor(actor, 'registers:correct')) return;
  const isOwn = reversed.recordedBy === actor.personId;
  const allowed = new Date(reversed.recordedAt + OWN_FOR_MS).toISOString();
  if (isOwn && parts.now().toISOString() <= allowed) return;
  const code = isOwn ? 'ownForADay' : 'ownOnly';
  throw new Problem('notPermitted', { errors: [{ code, path: '', ...(isOwn ? { allowed } : {}) }] });
}

function reversalRefusals(reversed: StoredGroup, body: ReversalRequest): Refusal[] {
  if (body.replacement?.groupId === body.groupId) {
    throw problemOfRefusals([{ code: 'repeated', path: `${AT}/groupId`, given: body.groupId }]);
  }
  const given = reversed.id;
  if (reversed.reversesGroupId) return [{ code: 'reversalOfReversal', path: '', given }];
  if (reversed.reversed) return [{ code: 'alreadyReversed', path: '', given }];
  if (reversed.isCorrection) return [{ code: 'nothingToReverse', path: '', given }];
  if (reversed.openWeighIn && reversed.closedByGroupId) {
    return [{ code: 'weighInClosed', path: '', given, allowed: reversed.closedByGroupId }];
  }
  return [];
}
