import type { EntityManager } from 'typeorm';
import type { DifferenceKind } from '../../shared/books/flows.ts';
import { siteThen } from '../units/dated-site.ts';

/** What statements have put into a difference, and what was made of it; one row a statement, place and refrigerant. */
export interface DifferenceRow {
  groupId: string;
  kind: Exclude<DifferenceKind, 'missing'>;
  subjectKind: 'cylinder' | 'unit' | 'reclaimer';
  subjectId: string;
  label: string;
  refrigerant: string;
  /** Above zero: missing from the place, so that it stands in the difference. */
  mass: string;
  /** Of all refrigerants together: what the statement shows. A mixed cylinder's is only split by its book. */
  whole: string;
  settled: string;
  bookingMonth: string;
  occurredAt: Date;
  timeZone: string;
  firmTimeZone: string;
  recordedBy: string;
  recordedByName: string;
  /** The judge says of a unit that the scales do not explain it. */
  flagged: boolean;
}

export interface DifferenceSearch {
  /** Booking months, both included; null: from the first one. */
  from: string | null;
  to: string;
  refrigerant?: string | undefined;
  /** Leave out what was settled whole. */
  standingOnly: boolean;
}

const KINDS = `array['cylinderDifference', 'unitDifference', 'supplierShortFill', 'reclaimerDifference']`;

/** Entries of statements alone: at the other end of what month close posts stands no cylinder, unit or reclaimer. */
const SHOWN = `select e.firm_id, coalesce(e.corrects_group_id, e.group_id) as group_id, e.refrigerant, e.booking_month,
    case when e.to_place = any (${KINDS}) then e.to_place else e.from_place end as kind,
    case when e.to_place = any (${KINDS}) then e.from_place else e.to_place end as subject_kind,
    case when e.to_place = any (${KINDS}) then e.from_id else e.to_id end as subject_id,
    case when e.to_place = any (${KINDS}) then e.mass_micrograms else -e.mass_micrograms end as mass
  from entry e
  where (e.from_place = any (${KINDS}) or e.to_place = any (${KINDS}))
    and (e.from_place in ('cylinder', 'unit', 'reclaimer') or e.to_place in ('cylinder', 'unit', 'reclaimer'))
    and ($1::text is null or e.booking_month >= $1) and e.booking_month <= $2`;

/** What was settled in these months and stands: not reversed, and less what was undone since. */
const SETTLED = `select s.judged_group_id as group_id, s.judged_place_id as subject_id, s.difference as kind, s.refrigerant,
    sum(s.mass_micrograms - coalesce((select sum(u.mass_micrograms) from settlement_undo u
      where u.firm_id = s.firm_id and u.settlement_id = s.id), 0)) as mass
  from settlement s
  join entry e on e.firm_id = s.firm_id and e.id = s.entry_id
  where e.booking_month <= $2
    and not exists (select from entry_group r where r.firm_id = e.firm_id and r.reverses_group_id = e.group_id)
  group by 1, 2, 3, 4`;

const ITEMS = `select d.group_id as "groupId", d.kind, d.subject_kind as "subjectKind", d.subject_id as "subjectId",
    coalesce(c.tag, u.tag, y.name, '') as label, d.refrigerant, d.mass::text, d.whole::text, d.settled::text,
    d.booking_month as "bookingMonth", g.occurred_at as "occurredAt",
    coalesce(s.time_zone, f.time_zone) as "timeZone", f.time_zone as "firmTimeZone", g.recorded_by as "recordedBy",
    coalesce(p.name, '') as "recordedByName",
    exists (select from flag x where x.firm_id = d.firm_id and x.subject_id = d.subject_id and x.group_id = d.group_id
      and x.closed_at is null and x.code in ('moreCameOutThanWentIn', 'moreThanFullChargeCameOut')) as flagged
  from (
    select n.firm_id, n.group_id, n.kind, n.subject_kind, n.subject_id, n.refrigerant, n.booking_month, n.mass, n.whole,
        coalesce(t.mass, 0) as settled
      from (select firm_id, group_id, kind, subject_kind, subject_id, refrigerant, min(booking_month) as booking_month,
          sum(mass) as mass, sum(sum(mass)) over (partition by group_id, kind, subject_kind, subject_id) as whole
        from (${SHOWN}) x group by 1, 2, 3, 4, 5, 6 having sum(mass) <> 0) n
      left join (${SETTLED}) t on t.group_id = n.group_id and t.subject_id = n.subject_id and t.kind = n.kind
        and t.refrigerant = n.refrigerant
      where (not $4::boolean or n.mass <> coalesce(t.mass, 0)) and ($3::text is null or n.refrigerant = $3)) d
  join entry_group g on g.firm_id = d.firm_id and g.id = d.group_id
  join firm f on f.id = d.firm_id
  left join site s on s.firm_id = g.firm_id and s.id = ${siteThen('g')}
  left join person p on p.id = g.recorded_by
  left join cylinder c on c.firm_id = d.firm_id and c.id = d.subject_id
  left join unit u on u.firm_id = d.firm_id and u.id = d.subject_id
  left join party y on y.firm_id = d.firm_id and y.id = d.subject_id
  order by abs(d.mass - d.settled) desc, abs(d.mass) desc, d.group_id`;

/** Every difference by the statement that shows it: which of them count most is known once each is judged. */
export function findDifferences(manager: EntityManager, search: DifferenceSearch): Promise<DifferenceRow[]> {
  const { from, to, refrigerant, standingOnly } = search;
  return manager.query(ITEMS, [from, to, refrigerant ?? null, standingOnly]);
}
