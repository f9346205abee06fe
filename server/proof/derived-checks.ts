import { SNAPSHOT_VERSION } from '../../shared/ledger/snapshot.ts';

/**
 * Tables that no record holds row by row, and that follow from the log all the same. Not checked: flags, and what the
 * judge remembers of a place beside its book, which only judging every timeline again would show.
 */

/**
 * Who held a cylinder from when on, told by the records of its register: one row where it is made, one for each change
 * of hands. `sequence` of the record, null where none speaks of the row; `column`, empty where the row is gone.
 */
export const HOLDER_DIFFERS = `
  with told as (
    select j.subject_id as cylinder_id, j.version, j.sequence, j.recorded_at,
        (j.content::jsonb #>> '{after,heldBy}')::uuid as held_by,
        lag((j.content::jsonb #>> '{after,heldBy}')::uuid) over (partition by j.subject_id order by j.version) as before
      from journal_record j where j.noun = 'cylinder')
  select t.sequence, coalesce(t.cylinder_id, h.cylinder_id) as id,
      case when t.cylinder_id is null or h.cylinder_id is null then ''
        when h.held_by is distinct from t.held_by then 'held_by' else 'valid_from' end as "column"
    from (select * from told where version = 1 or held_by is distinct from before) t
    full join cylinder_holder h on h.cylinder_id = t.cylinder_id and h.version = t.version
    where t.cylinder_id is null or h.cylinder_id is null or h.held_by is distinct from t.held_by
      or h.valid_from is distinct from t.recorded_at
    order by 1, 2 limit 1`;

const SETTLED_TO = `('atmosphere', 'supplier', 'missing')`;
const DIFFERENCES = `('cylinderDifference', 'unitDifference', 'supplierShortFill', 'reclaimerDifference')`;
/** A settlement that is reversed goes back whole, so that what was taken back of it is posted the other way. */
const REVERSES_SETTLEMENT = (group: string) => `exists (select from entry_group g
  join entry o on o.firm_id = g.firm_id and o.group_id = g.reverses_group_id
  join settlement x on x.firm_id = o.firm_id and x.entry_id = o.id where g.id = ${group})`;

/** What was taken back of settlements that is not what entries of the server took back: `place`, `refrigerant`. */
export const UNDO_DIFFERS = `
  with kept as (
    select u.group_id, s.judged_group_id, s.difference::text as place, s.settled_to::text as settled_to,
        s.refrigerant::text as refrigerant, sum(u.mass_micrograms) as mass
      from settlement_undo u join settlement s on s.firm_id = u.firm_id and s.id = u.settlement_id
      where not ${REVERSES_SETTLEMENT('u.group_id')} group by 1, 2, 3, 4, 5),
  posted as (
    select e.group_id, e.corrects_group_id as judged_group_id,
        (case when e.to_place in ${DIFFERENCES} then e.to_place else e.from_place end)::text as place,
        (case when e.to_place in ${DIFFERENCES} then e.from_place else e.to_place end)::text as settled_to,
        e.refrigerant::text as refrigerant,
        sum(case when e.to_place in ${DIFFERENCES} then e.mass_micrograms else -e.mass_micrograms end) as mass
      from entry e
      where e.added_by_server and not ${REVERSES_SETTLEMENT('e.group_id')}
        and ((e.from_place in ${SETTLED_TO} and e.to_place in ${DIFFERENCES})
          or (e.to_place in ${SETTLED_TO} and e.from_place in ${DIFFERENCES})) group by 1, 2, 3, 4, 5)
  select place, refrigerant
    from kept full join posted using (group_id, judged_group_id, place, settled_to, refrigerant)
    where coalesce(kept.mass, 0) <> coalesce(posted.mass, 0) order by 1, 2 limit 1`;

/** A place whose state, which the next posting is judged on, holds another book than its balance. */
export const STATE_DIFFERS = `
  with judged as (
    select s.place || ':' || s.place_id as place, s.state from place_state s
      where (s.state ->> 'version')::integer = ${SNAPSHOT_VERSION}),
  held as (
    select j.place, b.refrigerant, rtrim(b.mass, 'µg')::numeric as mass
      from judged j cross join lateral jsonb_each_text(j.state #> '{state,book}') b(refrigerant, mass)),
  kept as (
    select b.place_key as place, b.refrigerant::text as refrigerant, b.mass_micrograms as mass
      from balance b where b.place_key in (select place from judged))
  select place, refrigerant from held full join kept using (place, refrigerant)
    where coalesce(held.mass, 0) <> coalesce(kept.mass, 0) order by 1, 2 limit 1`;
