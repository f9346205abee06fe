import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { ReversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import { namedIds } from '../entries/named-ids.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { loadPostingFacts } from '../entries/posting-facts.repository.ts';
import { reverseGroup } from '../entries/reverse-group.service.ts';
import { findGroup } from '../entries/timeline.repository.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { presentPreview, presentReasons } from './present-preview.ts';
import { inTransactionTakenBack } from './taken-back.ts';

/** Stands where a person's reason will: a reversal that lacks one is refused before it has been carried out. */
const REASON_TO_COME = '-';

/**
 * What withdrawing a group, with or without a replacement, would do: it is carried out by the service that reverses,
 * and taken back. The head is locked as long as a reversal takes.
 * @throws Problem 403, 404, 409, 422 as the reversal would; reasons that the replacement needs are listed instead
 */
export async function previewReversal(
  parts: PostingParts,
  actor: Actor,
  groupId: string,
  body: ReversalRequest,
): Promise<EntryPreviewResponse> {
  const attempt = (request: ReversalRequest) =>
    inTransactionTakenBack(parts.dataSource, actor, async (manager) => {
      const reversed = await findGroup(manager, groupId);
      const bodies = request.replacement ? [request.replacement] : [];
      const facts = await loadPostingFacts(manager, namedIds(bodies, reversed ? [reversed] : []));
      const { value } = await reverseGroup(parts, actor, groupId, request);
      const own = [request.groupId, ...bodies.map((each) => each.groupId)];
      return presentPreview(value, facts, own, actor.locale);
    });
  const { replacement } = body;
  try {
    const withoutReason = replacement ? { ...body, replacement: { ...replacement, reason: null } } : body;
    return { ...(await attempt(withoutReason)), questions: [], reasons: [] };
  } catch (error) {
    if (!(error instanceof Problem) || error.code !== 'reasonRequired' || !replacement) throw error;
    const withReason = { ...body, replacement: { ...replacement, reason: REASON_TO_COME } };
    return {
      ...(await attempt(withReason)),
      questions: [],
      reasons: presentReasons(error.errors, actor.locale),
    };
  }
}
