import type { AnswerRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { touchesUnit } from '../../shared/ledger/judged-group.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead, postRecords } from '../journal/post-records.ts';
import type { Made } from '../registers/register-rows.ts';
import type { Posting } from './judge-posting.ts';
import { namedIds } from './named-ids.ts';
import { authorOf, findRepeated, judge, type PostingParts, refuse } from './post-group.ts';
import { presentOutcome } from './posting-answer.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';
import type { StoredGroup } from './posting-facts.ts';
import { recordsOfPosting } from './posting-records.ts';
import { deviceTimeRefusals } from './posting-refusals.ts';
import { answered, findGroup } from './timeline.repository.ts';

/**
 * Gives an answer later: a new record, and the unit is judged again as if it had been given at once.
 * @throws Problem 404, 409 for other content under the same id, 422
 */
export function answerGroup(
  parts: PostingParts,
  actor: Actor,
  groupId: string,
  body: AnswerRequest,
): Promise<Made<EntryGroupResponse>> {
  const { statement } = body;
  refuse(deviceTimeRefusals(body));
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const hash = requestHash(body);
    const repeated = await findRepeated(manager, body.groupId, hash, groupId);
    if (repeated) return { isNew: false, value: presentOutcome(repeated, actor.locale) };

    const group = await findGroup(manager, groupId);
    if (!group) throw new Problem('notFound');
    refuse(answerRefusals(group, statement.id));
    const ids = namedIds([], [group], { unitIds: [statement.id], groupIds: [body.groupId] });
    const facts = await loadPostingFacts(manager, ids);
    const given = { ...statement, by: statement.by ?? null };
    const posting: Posting = {
      recordId: body.groupId,
      answered: { group: { ...group, statements: answered(group.statements, [given]) }, unitId: statement.id },
    };
    const { judged, stored } = await judge(manager, posting, facts);
    const written = recordsOfPosting(
      authorOf(parts, actor),
      facts,
      posting,
      judged,
      null,
      {
        kind: group.kind,
        occurredAt: group.occurredAt,
        unitId: statement.id,
        deviceSentAt: body.deviceSentAt ?? null,
        requestHash: hash,
        reason: null,
        answersGroupId: group.id,
        statements: [statement],
      },
      stored,
    );
    await postRecords(manager, written.records, written.derived);
    const outcome = await findRepeated(manager, body.groupId, hash, groupId);
    if (!outcome) throw new Error('an answer that was posted is there');
    return { isNew: true, value: presentOutcome(outcome, actor.locale) };
  });
}

function answerRefusals(group: StoredGroup, unitId: string): Refusal[] {
  if (group.reversed) return [{ code: 'alreadyReversed', path: '', given: group.id }];
  if (group.answersGroupId)
    return [{ code: 'answerOfAnswer', path: '', given: group.id, allowed: group.answersGroupId }];
  if (!touchesUnit(group, unitId)) return [{ code: 'unitNotInGroup', path: '/statement/id', given: unitId }];
  return [];
}
