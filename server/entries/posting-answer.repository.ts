import type { EntityManager } from 'typeorm';
import { plannedQuery } from '../journal/planned-query.ts';
import type { PostingOutcome } from './posting-answer.ts';

const ENTRIES = `select coalesce(json_agg(json_build_object('id', e.id, 'groupId', e.group_id, 'sequence', e.sequence,
    'refrigerant', e.refrigerant, 'mass', e.mass_micrograms::text,
    'from', json_build_object('place', e.from_place, 'id', e.from_id, 'as', e.from_as),
    'to', json_build_object('place', e.to_place, 'id', e.to_id, 'as', e.to_as),
    'howKnown', e.how_known, 'occurredAt', e.occurred_at, 'recordedAt', e.recorded_at, 'bookingMonth', e.booking_month,
    'late', e.late, 'addedByServer', e.added_by_server, 'atLeast', e.at_least, 'correctsGroupId', e.corrects_group_id)
    order by e.sequence), '[]')
  from entry e where e.group_id = any ($1::uuid[])`;

/** As they stood after the posting: what came later is taken off again. What it emptied shows with zero. */
const BALANCES = `select coalesce(json_agg(json_build_object('place', b.place, 'id', b.place_id,
    'refrigerant', b.refrigerant, 'mass', (b.mass_micrograms - later.mass)::text)
    order by b.place::text collate "C", b.place_id, b.refrigerant::text collate "C"), '[]')
  from balance b
  cross join lateral (select coalesce(sum(case when e.to_id = b.place_id then e.mass_micrograms
        else -e.mass_micrograms end), 0) as mass
      from entry e where e.sequence > $3 and e.refrigerant = b.refrigerant
        and (e.from_id = b.place_id or e.to_id = b.place_id)) later
  where b.place in ('cylinder', 'unit') and b.place_id = any ($2::uuid[])
    and (b.mass_micrograms <> later.mass or exists (select from entry e where e.group_id = any ($1::uuid[])
      and e.refrigerant = b.refrigerant and b.place_id in (e.from_id, e.to_id)))`;

/** Open right after the posting, and what it closed. A flag whose figure it changed shows once, with the new one. */
const FLAGS = `select coalesce(json_agg(json_build_object('code', f.code, 'place', f.subject_kind,
    'subjectId', f.subject_id, 'groupId', f.group_id, 'refrigerant', f.refrigerant, 'mass', f.mass_micrograms::text,
    'figures', f.figures, 'openedBy', f.opened_by_group_id, 'closedBy', f.closed_by)
    order by f.opened_sequence, f.code collate "C", f.subject_id, f.group_id, f.refrigerant::text collate "C"), '[]')
  from (select f.*, o.sequence as opened_sequence,
      case when c.sequence <= $3 then f.closed_by_group_id end as closed_by
    from flag f
    join entry_group o on o.firm_id = f.firm_id and o.id = f.opened_by_group_id
    left join entry_group c on c.firm_id = f.firm_id and c.id = f.closed_by_group_id
    where f.subject_id = any ($2::uuid[]) and o.sequence <= $3
      and (f.standing or f.opened_by_group_id = any ($1::uuid[]) or f.closed_by_group_id = any ($1::uuid[]))
      and (c.sequence is null or c.sequence > $3 or f.closed_by_group_id = any ($1::uuid[]))
      and not (coalesce(f.closed_by_group_id = any ($1::uuid[]), false) and exists (select from flag n
        where n.firm_id = f.firm_id and n.subject_id = f.subject_id and n.code = f.code and n.group_id = f.group_id
          and n.refrigerant is not distinct from f.refrigerant and n.id <> f.id
          and n.opened_by_group_id = f.closed_by_group_id))
  ) f`;

const OUTCOME = `select json_build_object('entries', (${ENTRIES}), 'balances', (${BALANCES}), 'flags', (${FLAGS}),
  'groups', (select coalesce(json_agg(json_build_object('id', g.id, 'deviceSkewSeconds', g.device_skew_seconds)), '[]')
    from entry_group g where g.id = any ($1::uuid[])),
  'labels', (select coalesce(json_object_agg(l.id, l.label), '{}') from (
      select id, tag as label from cylinder where id = any ($2::uuid[])
      union all select id, tag from unit where id = any ($2::uuid[])
      union all select id, name from party where id = any ($2::uuid[])) l)) as outcome`;

/**
 * What a posting made of the log.
 * @param groupIds its groups
 * @param subjectIds the cylinders and units that it judged, and the reclaimers at its entries' ends
 * @param lastSequence of its records
 */
export async function readOutcome(
  manager: EntityManager,
  groupIds: readonly string[],
  subjectIds: readonly string[],
  lastSequence: number,
): Promise<PostingOutcome> {
  const values = [groupIds, subjectIds, lastSequence];
  const [row] = await plannedQuery<{ outcome: PostingOutcome }>(manager, 'posting_outcome', OUTCOME, values);
  if (!row) throw new Error('an outcome is one row');
  return row.outcome;
}

export interface EarlierPosting {
  requestHash: string;
  /** The group that it reverses or answers. */
  aboutGroupId: string | null;
  /** This group, and the one that was posted with it. */
  groupIds: string[];
  subjectIds: string[];
  lastSequence: number;
}

/** The posting that a group id stands for, if it was posted before. */
export async function findEarlierPosting(manager: EntityManager, groupId: string): Promise<EarlierPosting | null> {
  const [row] = await manager.query<(Omit<EarlierPosting, 'lastSequence'> & { lastSequence: string })[]>(
    `with mine as (
       select g.* from entry_group g where g.id = $1
     ), posted as (
       select * from mine
       union all
       -- a replacement is posted with the reversal of what it replaces, and answered with it
       select r.* from mine m join entry_group r on r.firm_id = m.firm_id and r.replaces_group_id = m.reverses_group_id
         and r.recorded_at = m.recorded_at
     ), spoken_of as (
       select id from posted union select reverses_group_id from posted
     ), ends as (
       select e.from_place as place, e.from_id as id, e.sequence from posted p
         join entry e on e.firm_id = p.firm_id and e.group_id = p.id
       union all select e.to_place, e.to_id, e.sequence from posted p
         join entry e on e.firm_id = p.firm_id and e.group_id = p.id
     )
     select encode((select request_hash from mine), 'hex') as "requestHash",
       (select coalesce(reverses_group_id, answers_group_id) from mine) as "aboutGroupId",
       array(select id from posted order by sequence) as "groupIds",
       array(select id from ends where place in ('cylinder', 'unit', 'reclaimer')
         union select r.cylinder_id from reading r where r.group_id in (select id from spoken_of)
         union select t.unit_id from statement t where t.group_id in (select id from spoken_of)) as "subjectIds",
       greatest((select max(sequence) from posted), (select max(sequence) from ends))::text as "lastSequence"
     from mine`,
    [groupId],
  );
  if (!row) return null;
  return { ...row, lastSequence: Number(row.lastSequence) };
}

/** Of the groups that exist, what they were posted with; of one that reverses or answers another nothing that a body has. */
export async function findEarlierHashes(
  manager: EntityManager,
  groupIds: readonly string[],
): Promise<Map<string, string>> {
  if (groupIds.length === 0) return new Map();
  const rows = await manager.query<{ id: string; hash: string }[]>(
    `select g.id, case when coalesce(g.reverses_group_id, g.answers_group_id) is null
        then encode(g.request_hash, 'hex') else '' end as hash
      from entry_group g where g.id = any ($1::uuid[])`,
    [groupIds],
  );
  return new Map(rows.map(({ id, hash }) => [id, hash]));
}
