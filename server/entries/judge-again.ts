import type { EntityManager } from 'typeorm';
import type { Actor } from '../http/actor.ts';
import { postRecords } from '../journal/post-records.ts';
import { newRowRecords, type RegisterRow } from '../journal/register-journal.ts';
import { type Posting, placesOf, placesToReplay } from './judge-posting.ts';
import { namedIds } from './named-ids.ts';
import { authorOf, judge, type PostingParts } from './post-group.ts';
import { findEarlierPosting, readOutcome } from './posting-answer.repository.ts';
import type { PostingOutcome } from './posting-answer.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';
import { type Envelope, recordsOfPosting } from './posting-records.ts';
import { loadTimelines } from './timeline.repository.ts';

export interface Revision {
  /** Of the new register row; the group that carries the corrections has the same id. */
  id: string;
  of: { place: 'cylinder' | 'unit'; id: string };
  requestHash: string;
  reason: string | null;
}

/**
 * Chains a new register row that the judge goes by (a tare, a full charge, a refrigerant), judges the whole timeline of
 * its cylinder or unit again, and posts the change alone. The row is inserted already, the head is locked.
 */
export async function journalAndJudgeAgain(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  revision: Revision,
  row: RegisterRow,
): Promise<PostingOutcome> {
  const author = authorOf(parts, actor);
  const { records, texts } = newRowRecords({ ...parts, personId: actor.personId }, [row]);
  const { place, id } = revision.of;
  const posting: Posting =
    place === 'cylinder'
      ? { recordId: revision.id, revisedCylinderId: id }
      : { recordId: revision.id, revisedUnitId: id };
  const { cylinderIds, unitIds } = placesOf(posting);
  const facts = await loadPostingFacts(
    manager,
    namedIds([], [], { cylinderIds: [...cylinderIds], unitIds: [...unitIds] }),
  );
  const { groups } = await loadTimelines(manager, placesToReplay(posting, facts));
  const last = groups.toSorted((a, b) => a.occurredAt - b.occurredAt).at(-1);
  if (!last) {
    await postRecords(manager, records, { texts });
    return outcomeOfRevision(manager, revision, row);
  }
  const { judged, stored } = await judge(manager, posting, facts);
  const changes = judged.changes.length + judged.flags.opened.length + judged.flags.closed.length;
  const corrected = stored.get(judged.changes.at(-1)?.groupId ?? last.id) ?? last;
  const envelope: Envelope = {
    kind: corrected.kind,
    occurredAt: author.now.getTime(),
    unitId: place === 'unit' ? id : null,
    deviceSentAt: null,
    requestHash: revision.requestHash,
    reason: revision.reason,
  };
  const written = recordsOfPosting(author, facts, posting, judged, null, envelope, stored);
  const corrections = changes > 0 ? written.records : [];
  await postRecords(manager, [...records, ...corrections], { ...written.derived, texts });
  return outcomeOfRevision(manager, revision, row);
}

/** What the revision made of the log, now or asked again later. */
export async function outcomeOfRevision(
  manager: EntityManager,
  revision: Pick<Revision, 'id' | 'of'>,
  row: Pick<RegisterRow, 'noun' | 'subjectId'>,
): Promise<PostingOutcome> {
  const corrections = await findEarlierPosting(manager, revision.id);
  const [record] = await manager.query<{ sequence: string }[]>(
    'select sequence from journal_record where noun = $1 and subject_id = $2 and version = 1',
    [row.noun, row.subjectId],
  );
  const lastSequence = Math.max(Number(record?.sequence ?? 0), corrections?.lastSequence ?? 0);
  return readOutcome(manager, corrections?.groupIds ?? [], [revision.of.id], lastSequence);
}
