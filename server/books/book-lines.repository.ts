import type { EntityManager } from 'typeorm';
import type { BooksPageQuery, CylinderBook, JobBook } from '../../shared/books/books.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { siteAt } from '../units/dated-site.ts';

export interface Period {
  from: string;
  to: string;
  refrigerant?: string | undefined;
}

const grams = (mass: string | null): number => gramsOfMicrograms(BigInt(mass ?? 0));

/** A reversal counts off the way that it reverses: out of the sum of what came in, or of what went out. */
const SIGN = 'case when e.reverses_entry_id is null then e.mass_micrograms else -e.mass_micrograms end';
const IS_DIFFERENCE = (end: string) => `e.${end}_place in ('cylinderDifference', 'supplierShortFill')`;

type CylinderRow = Omit<CylinderBook, 'startG' | 'inG' | 'outG' | 'differenceG' | 'endG'> & {
  now: string;
  since: string;
  later: string;
  came: string;
  went: string;
  difference: string;
};

const CYLINDER = `c.id as "cylinderId", c.tag, c.kind, c.refrigerant, h.name as "heldByName",
  coalesce(b.mass, 0)::text as now, coalesce(s.since, 0)::text as since, coalesce(s.later, 0)::text as later,
  coalesce(s.came, 0)::text as came, coalesce(s.went, 0)::text as went, coalesce(s.difference, 0)::text as difference`;

/** `$1` and `$2` are the months, `$3` the refrigerant or null: `ofPeriod` puts them first among the values. */
function ofPeriod({ from, to, refrigerant }: Period): Conditions {
  return new Conditions().with('$::text <= $::text', from, to).with('($::text is null or true)', refrigerant ?? null);
}

const SIGNED = 'case when e.came then e.mass_micrograms else -e.mass_micrograms end';
const COUNTED = 'e.booking_month <= $2 and not e.of_difference';
const MOVED = (end: 'from' | 'to', came: boolean) => `select e.*, ${came} as came,
    ${IS_DIFFERENCE(end === 'to' ? 'from' : 'to')} as of_difference from entry e
  where e.firm_id = c.firm_id and e.${end}_id = c.id and e.booking_month >= $1 and ($3::text is null or e.refrigerant = $3)`;

const CYLINDERS = `cylinder c
  left join person h on h.id = c.held_by
  left join lateral (select sum(x.mass_micrograms) as mass from balance x where x.firm_id = c.firm_id
    and x.place_key = 'cylinder:' || c.id and ($3::text is null or x.refrigerant = $3)) b on true
  left join lateral (select sum(${SIGNED}) as since, sum(${SIGNED}) filter (where e.booking_month > $2) as later,
      sum(${SIGN}) filter (where ${COUNTED} and (e.came <> (e.reverses_entry_id is not null))) as came,
      sum(${SIGN}) filter (where ${COUNTED} and (e.came = (e.reverses_entry_id is not null))) as went,
      sum(${SIGNED}) filter (where e.booking_month <= $2 and e.of_difference) as difference, count(*) as entries
    from (${MOVED('to', true)} union all ${MOVED('from', false)}) e) s on true`;

const BY_TAG: readonly SortColumn[] = [
  { sql: 'c.tag', type: 'text' },
  { sql: 'c.id', type: 'uuid' },
];

/** Cylinders in which there is something or in which something moved, by tag. */
export function listCylinderBooks(manager: EntityManager, query: BooksPageQuery) {
  const list = {
    select: CYLINDER,
    from: CYLINDERS,
    conditions: ofPeriod(query).and('(coalesce(b.mass, 0) <> 0 or s.entries > 0)'),
    sort: { columns: BY_TAG, direction: 'asc' as const },
    page: query,
    of: cursorScope('cylinder books', query),
  };
  return readPage<CylinderRow, CylinderBook>(manager, list, ({ now, since, later, came, went, difference, ...row }) => {
    const end = BigInt(now) - BigInt(later);
    return {
      cylinderId: row.cylinderId,
      tag: row.tag,
      kind: row.kind,
      refrigerant: row.refrigerant,
      heldByName: row.heldByName,
      startG: gramsOfMicrograms(BigInt(now) - BigInt(since)),
      inG: grams(came),
      outG: grams(went),
      differenceG: grams(difference),
      endG: gramsOfMicrograms(end),
    };
  });
}

/** Which way an entry went, or the one that it reverses. */
const WENT = (from: string, to: string): string => `case when e.reverses_entry_id is null
  then e.from_place = '${from}' and e.to_place = '${to}' else e.to_place = '${from}' and e.from_place = '${to}' end`;

export interface PersonSums {
  personId: string;
  name: string;
  van: string | null;
  intoUnitsG: number;
  recoveredG: number;
  hoseG: number;
  entryCount: number;
  holdsG: number;
  holdsCylinders: number;
}

/** What each person recorded in the period (a reversal counts for whoever recorded what it reverses), and holds now. */
export async function readPersonSums(manager: EntityManager, { from, to, refrigerant }: Period): Promise<PersonSums[]> {
  const rows = await manager.query<
    (Omit<PersonSums, 'intoUnitsG' | 'recoveredG' | 'hoseG' | 'holdsG'> & {
      intoUnits: string;
      recovered: string;
      hose: string;
      holds: string;
    })[]
  >(
    `with recorded as (
       select coalesce(o.recorded_by, e.recorded_by) as person_id,
           sum(${SIGN}) filter (where ${WENT('cylinder', 'unit')}) as into_units,
           sum(${SIGN}) filter (where ${WENT('unit', 'cylinder')}) as recovered,
           sum(${SIGN}) filter (where 'hose' in (e.from_as, e.to_as)) as hose,
           count(*)::integer as entries
         from entry e
         left join entry o on o.firm_id = e.firm_id and o.id = e.reverses_entry_id
         where e.booking_month between $1 and $2 and ($3::text is null or e.refrigerant = $3) and not e.added_by_server
         group by 1),
     held as (
       select c.held_by as person_id, count(distinct c.id)::integer as cylinders, sum(b.mass_micrograms) as mass
         from cylinder c join balance b on b.firm_id = c.firm_id and b.place = 'cylinder' and b.place_id = c.id
         where c.held_by is not null and b.mass_micrograms > 0 and ($3::text is null or b.refrigerant = $3) group by 1)
     select m.person_id as "personId", p.name, m.van, coalesce(r.into_units, 0)::text as "intoUnits",
         coalesce(r.recovered, 0)::text as recovered, coalesce(r.hose, 0)::text as hose,
         coalesce(r.entries, 0) as "entryCount", coalesce(h.mass, 0)::text as holds,
         coalesce(h.cylinders, 0) as "holdsCylinders"
       from membership m
       join person p on p.id = m.person_id
       left join recorded r on r.person_id = m.person_id
       left join held h on h.person_id = m.person_id
       order by p.name, m.person_id`,
    [from, to, refrigerant ?? null],
  );
  return rows.map(({ intoUnits, recovered, hose, holds, ...row }) => ({
    ...row,
    intoUnitsG: grams(intoUnits),
    recoveredG: grams(recovered),
    hoseG: grams(hose),
    holdsG: grams(holds),
  }));
}

export interface SupplierSums {
  supplierId: string;
  name: string;
  boughtG: number;
  purchaseCount: number;
  returnedG: number;
  shortFillG: number;
  withoutPriceG: number;
  paidMicros: number;
}

/** What was bought from each, what it cost, and what their cylinders held less of at the first weighing. */
export async function readSupplierSums(
  manager: EntityManager,
  { from, to, refrigerant }: Period,
): Promise<SupplierSums[]> {
  const rows = await manager.query<
    {
      supplierId: string;
      name: string;
      bought: string;
      purchaseCount: number;
      returned: string;
      shortFill: string;
      withoutPrice: string;
      paid: number;
    }[]
  >(
    `with moved as (
       select e.*, case when e.from_place = 'supplier' then e.from_id else e.to_id end as supplier_id,
           ((e.from_place = 'supplier') <> (e.reverses_entry_id is not null)) as bought, ${SIGN} as signed,
           (select x.micros_per_kg from purchase_price x where x.firm_id = e.firm_id and x.refrigerant = e.refrigerant
             and x.group_id = coalesce((select o.group_id from entry o
               where o.firm_id = e.firm_id and o.id = e.reverses_entry_id), e.group_id)
             order by x.given_at desc, x.id desc limit 1) as micros_per_kg
         from entry e
         where 'supplier' in (e.from_place, e.to_place) and e.kind <> 'monthClose'
           and e.booking_month between $1 and $2 and ($3::text is null or e.refrigerant = $3)),
     short as (
       select l.supplier_id, sum(case when e.to_place = 'supplierShortFill' then e.mass_micrograms
           else -e.mass_micrograms end) as mass
         from entry e
         cross join lateral (select x.from_id as supplier_id from entry x
           where x.firm_id = e.firm_id and x.to_id = coalesce(e.from_id, e.to_id) and x.from_place = 'supplier'
             and x.occurred_at <= e.occurred_at order by x.occurred_at desc, x.sequence desc limit 1) l
         where 'supplierShortFill' in (e.from_place, e.to_place) and 'cylinder' in (e.from_place, e.to_place)
           and e.booking_month between $1 and $2 and ($3::text is null or e.refrigerant = $3)
         group by 1)
     select y.id as "supplierId", y.name, coalesce(sum(m.signed) filter (where m.bought), 0)::text as bought,
         count(distinct m.group_id) filter (where m.from_place = 'supplier' and m.reverses_entry_id is null
           and not exists (select from entry r where r.firm_id = m.firm_id and r.reverses_entry_id = m.id
             and r.booking_month <= $2))::integer as "purchaseCount",
         coalesce(sum(m.signed) filter (where not m.bought), 0)::text as returned,
         coalesce(max(s.mass), 0)::text as "shortFill",
         coalesce(sum(m.signed) filter (where m.bought and m.micros_per_kg is null), 0)::text as "withoutPrice",
         coalesce(sum(m.signed::numeric * m.micros_per_kg / 1e9) filter (where m.bought), 0)::float8 as paid
       from party y
       left join moved m on m.supplier_id = y.id
       left join short s on s.supplier_id = y.id
       where m.id is not null or s.supplier_id is not null
       group by y.id, y.name order by y.name, y.id`,
    [from, to, refrigerant ?? null],
  );
  return rows.map(({ bought, returned, shortFill, withoutPrice, paid, ...row }) => ({
    ...row,
    boughtG: grams(bought),
    returnedG: grams(returned),
    shortFillG: grams(shortFill),
    withoutPriceG: grams(withoutPrice),
    paidMicros: paid,
  }));
}

/** A job with what it took by month, so that each month's average can price it. */
export interface JobSums extends Omit<JobBook, 'cost' | 'intoUnitG' | 'recoveredG' | 'chargedG' | 'openedAt'> {
  openedAt: Date;
  intoUnit: string;
  recovered: string;
  charged: { month: string; refrigerant: string; mass: string }[];
}

/** Entries of the job's groups that stand; a reversed group counts for nothing, in whatever month it was reversed. */
const OF_JOB = `entry_group g join entry e on e.firm_id = g.firm_id and e.group_id = g.id
  where g.firm_id = j.firm_id and g.job_id = j.id and not e.added_by_server
    and not exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = g.id)
    and e.booking_month between $1 and $2 and ($3::text is null or e.refrigerant = $3)`;

const JOB = `j.id as "jobId", j.kind, j.title, j.opened_at as "openedAt", j.unit_id as "unitId", u.tag as "unitLabel",
  coalesce(k.name, '') as "customerName", s.name as "siteName",
  (select coalesce(sum(e.mass_micrograms), 0)::text from ${OF_JOB} and e.to_place = 'unit') as "intoUnit",
  (select coalesce(sum(e.mass_micrograms), 0)::text from ${OF_JOB} and e.from_place = 'unit'
    and e.to_place = 'cylinder') as recovered,
  (select coalesce(json_agg(x), '[]') from (
    select e.booking_month as month, e.refrigerant, sum(e.mass_micrograms)::text as mass
      from ${OF_JOB} and e.to_place = 'unit' and exists (select from cylinder c where c.firm_id = e.firm_id
        and c.id = e.from_id and c.kind <> 'recovery' and c.owner_kind <> 'customer')
      group by 1, 2) x) as charged`;

const BY_OPENING: readonly SortColumn[] = [
  { sql: 'j.opened_at', type: 'timestamptz' },
  { sql: 'j.id', type: 'uuid' },
];

/** Jobs with an entry in the period, the latest opened first. */
export function listJobSums<Item>(manager: EntityManager, query: BooksPageQuery, present: (row: JobSums) => Item) {
  const list = {
    select: JOB,
    from: `job j
      join unit u on u.firm_id = j.firm_id and u.id = j.unit_id
      join site s on s.firm_id = u.firm_id and s.id = ${siteAt('u.id', 'j.opened_at', 'u.site_id')}
      left join customer k on k.firm_id = s.firm_id and k.id = s.customer_id`,
    conditions: ofPeriod(query).and(`exists (select from ${OF_JOB})`),
    sort: { columns: BY_OPENING, direction: 'desc' as const },
    page: query,
    of: cursorScope('job books', query),
  };
  return readPage<JobSums, Item>(manager, list, present);
}

export interface PurchaseSums {
  groupId: string;
  refrigerant: string;
  mass: string;
  occurredAt: Date;
  bookingMonth: string;
  supplierName: string;
  cylinderTags: string[];
  documentNumber: string | null;
  documentDate: string | null;
  price: { value: string; per: 'kg' | 'lb'; microsPerKg: string; givenAt: string } | null;
}

const BY_TIME: readonly SortColumn[] = [
  { sql: 'b.occurred_at', type: 'timestamptz' },
  { sql: 'b.group_id', type: 'uuid' },
  { sql: 'b.refrigerant', type: 'text' },
];

/** What was bought and stands, the latest first, each with the price that counts. */
export function listPurchaseSums<Item>(
  manager: EntityManager,
  query: BooksPageQuery,
  present: (row: PurchaseSums) => Item,
) {
  const list = {
    select: `b.group_id as "groupId", b.refrigerant, b.mass::text, b.occurred_at as "occurredAt",
      b.booking_month as "bookingMonth", b.supplier_name as "supplierName", b.tags as "cylinderTags",
      d.number as "documentNumber", d.dated::text as "documentDate",
      (select json_build_object('value', x.typed_value, 'per', x.typed_unit, 'microsPerKg', x.micros_per_kg::text,
          'givenAt', x.given_at)
        from purchase_price x where x.firm_id = b.firm_id and x.group_id = b.group_id and x.refrigerant = b.refrigerant
        order by x.given_at desc, x.id desc limit 1) as price`,
    from: `(
      select e.firm_id, e.group_id, e.refrigerant, min(e.occurred_at) as occurred_at, min(e.booking_month) as booking_month,
          sum(e.mass_micrograms) as mass, min(y.name) as supplier_name,
          coalesce(array_agg(distinct c.tag::text) filter (where c.tag is not null), '{}') as tags
        from entry e
        join party y on y.firm_id = e.firm_id and y.id = e.from_id
        left join cylinder c on c.firm_id = e.firm_id and c.id = e.to_id
        where e.from_place = 'supplier' and e.reverses_entry_id is null and e.kind <> 'monthClose'
          and e.booking_month between $1 and $2 and ($3::text is null or e.refrigerant = $3)
          and not exists (select from entry_group r where r.firm_id = e.firm_id and r.reverses_group_id = e.group_id)
        group by 1, 2, 3) b
      left join lateral (select x.number, x.dated from group_document x where x.firm_id = b.firm_id
        and x.group_id = b.group_id and (x.refrigerant is null or x.refrigerant = b.refrigerant)
        order by x.kind <> 'invoice', x.ordinal limit 1) d on true`,
    conditions: ofPeriod(query),
    sort: { columns: BY_TIME, direction: 'desc' as const },
    page: query,
    of: cursorScope('purchases', query),
  };
  return readPage<PurchaseSums, Item>(manager, list, present);
}
