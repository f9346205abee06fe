import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { requireKind } from '../entries/entry-group.service.ts';
import { type Posting, placesToReplay } from '../entries/judge-posting.ts';
import { namedIds } from '../entries/named-ids.ts';
import { outcomeOfAdded } from '../entries/outcome-of-added.ts';
import { authorOf, enter, judge, type PostingParts } from '../entries/post-group.ts';
import { presentOutcome } from '../entries/posting-answer.ts';
import { loadPostingFacts } from '../entries/posting-facts.repository.ts';
import { recordsOfPosting } from '../entries/posting-records.ts';
import { reasonRefusals } from '../entries/posting-refusals.ts';
import { findGroup } from '../entries/timeline.repository.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { presentPreview, presentReasons } from './present-preview.ts';
import { questionsAsked } from './questions-asked.ts';
import { inTransactionTakenBack } from './taken-back.ts';

/**
 * What posting this group would do, by the judge that posts it, on one snapshot of the books. The firm's head is not
 * locked: nobody who posts waits for somebody who looks.
 * @throws Problem 403, 409 for a group that is posted already, 422 for what a posting would refuse (a reason is listed)
 */
export function previewEntryGroup(
  parts: PostingParts,
  actor: Actor,
  body: EntryGroupRequest,
): Promise<EntryPreviewResponse> {
  requireKind(actor, body);
  return inTransactionTakenBack(
    parts.dataSource,
    actor,
    async (manager) => {
      const facts = await loadPostingFacts(manager, namedIds([body]));
      if (facts.earlierGroupIds.has(body.groupId)) throw new Problem('idReused');
      const opening = body.closesGroupId ? await findGroup(manager, body.closesGroupId) : null;
      const added = enter(parts, facts, body, { at: '', opening, place: 1 });
      const posting: Posting = { recordId: body.groupId, added };
      const { judged, stored } = await judge(manager, posting, facts);
      const request = { body, requestHash: requestHash(body), replacesGroupId: null };
      const written = recordsOfPosting(authorOf(parts, actor), facts, posting, judged, request, null, stored);
      const outcome = presentOutcome(outcomeOfAdded(written, [], judged, facts), actor.locale);
      const group = judged.added?.group;
      return {
        ...presentPreview(outcome, facts, [body.groupId], actor.locale),
        questions: group ? questionsAsked(group, facts, stored.values(), placesToReplay(posting, facts)) : [],
        reasons: presentReasons(reasonRefusals(posting, judged, facts, null), actor.locale),
      };
    },
    'REPEATABLE READ',
  );
}
