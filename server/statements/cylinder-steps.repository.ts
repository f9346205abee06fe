import type { EntityManager } from 'typeorm';
import type { StepReading } from '../../shared/ledger/cylinder-issues.ts';
import type { Scale } from '../../shared/ledger/scale.ts';
import type { CylinderStep } from '../../shared/statements/walk-cylinder.ts';

interface StepRow {
  cylinderId: string;
  groupId: string;
  closesGroupId: string | null;
  occurredAt: Date;
  tare: string;
  readings: {
    id: string;
    at: string;
    toolId: string | null;
    scale: Scale | null;
    moment: StepReading['moment'];
    mode: StepReading['mode'];
    gross: string;
    hose: string | null;
  }[];
  masses: { mass: string; weighed: boolean; scale: Scale | null }[];
  posted: string;
  opened: string;
}

const SCALE = (alias: string) => `case when ${alias}.resolution_g is not null then json_build_object(
  'resolutionG', ${alias}.resolution_g, 'repeatabilityG', ${alias}.repeatability_g,
  'spanErrorRelative', ${alias}.span_error_relative, 'offsetG', ${alias}.offset_g) end`;

const SIGNED = (cylinder: string) =>
  `case when e.to_id = ${cylinder} then e.mass_micrograms else -e.mass_micrograms end`;

const ENTERED = (end: 'from' | 'to') => `(select coalesce(e.corrects_group_id, e.group_id) from entry e
  where e.firm_id = a.firm_id and e.${end}_id = a.id and e.reverses_entry_id is null and e.occurred_at >= a.first_at and e.occurred_at < a.until)`;

const ADDED = (end: 'from' | 'to') => `select coalesce(e.corrects_group_id, e.group_id) as group_id, e.occurred_at,
    ${SIGNED('c.id')} as mass
  from entry e
  where e.firm_id = c.firm_id and e.${end}_id = c.id and e.added_by_server and e.occurred_at < x.since`;

/**
 * When a reading last set the book before the span: what judging added for it stands, with its corrections (they carry
 * the time of what they correct). Nothing that happened before it has a part in a later difference.
 */
const RESTS_ON = `select coalesce(max(s.at), '-infinity') as first_at
  from (select max(e.occurred_at) as at from (${ADDED('to')} union all ${ADDED('from')}) e
    group by e.group_id having sum(e.mass) <> 0) s`;

/**
 * A cylinder at a time, by its id. A plain join is taken for one row on either side, so that the whole register may be
 * gone through first and everything below looked up for each of its cylinders.
 */
const ONE_CYLINDER = '(select c.id, c.firm_id from cylinder c where c.id = x.id offset 0)';

/** Groups that touch some cylinders, of a period and back to the reading that its book rests on; nothing that was reversed. */
const STEPS = `with asked as materialized (select c.id, c.firm_id, x.until, k.first_at
    from unnest($1::uuid[], $2::timestamptz[], $3::timestamptz[]) x(id, since, until)
    cross join lateral ${ONE_CYLINDER} c cross join lateral (${RESTS_ON}) k),
  touching as materialized (
    select a.id as cylinder_id, a.until, t.group_id from asked a cross join lateral (
      (select r.group_id from reading r where r.firm_id = a.firm_id and r.cylinder_id = a.id
        and r.read_at >= a.first_at and r.read_at < a.until)
      union ${ENTERED('to')}
      union ${ENTERED('from')}) t)
  select t.cylinder_id as "cylinderId", g.id as "groupId", g.closes_group_id as "closesGroupId",
    g.occurred_at as "occurredAt", w.tare::text, coalesce(n.readings, '[]') as readings,
    coalesce(m.masses, '[]') as masses, p.posted::text, p.opened::text
  from touching t
  join entry_group g on g.id = t.group_id
  cross join lateral (select x.mass_micrograms as tare from cylinder_tare x
    where x.firm_id = g.firm_id and x.cylinder_id = t.cylinder_id
    order by x.valid_from <= g.occurred_at desc,
      case when x.valid_from <= g.occurred_at then g.occurred_at - x.valid_from else x.valid_from - g.occurred_at end
    limit 1) w
  cross join lateral (select json_agg(json_build_object('id', r.id, 'at', r.read_at, 'toolId', r.tool_id,
      'scale', ${SCALE('r')}, 'moment', r.moment, 'mode', r.mode, 'gross', r.mass_micrograms::text,
      'hose', case when r.hose_full then r.hose_micrograms::text end) order by r.read_at, r.id) as readings
    from reading r where r.firm_id = g.firm_id and r.group_id = g.id and r.cylinder_id = t.cylinder_id) n
  cross join lateral (select json_agg(json_build_object('mass', (${SIGNED('t.cylinder_id')})::text,
      'weighed', e.how_known = 'weighed', 'scale', (select ${SCALE('o')} from reading o
        where o.firm_id = e.firm_id and o.group_id = e.group_id
          and o.cylinder_id = case when e.to_id = t.cylinder_id then e.from_id else e.to_id end limit 1))
      order by e.sequence) as masses
    from entry e where e.firm_id = g.firm_id and e.group_id = g.id and t.cylinder_id in (e.from_id, e.to_id)
      and not e.added_by_server and e.reverses_entry_id is null) m
  cross join lateral (select coalesce(sum(${SIGNED('t.cylinder_id')}), 0) as posted,
      coalesce(sum(${SIGNED('t.cylinder_id')}) filter (where 'opening' in (e.from_place, e.to_place)), 0) as opened
    from (
      select x.* from entry x where x.firm_id = g.firm_id and x.group_id = g.id and x.corrects_group_id is null
      union all select x.* from entry x where x.firm_id = g.firm_id and x.corrects_group_id = g.id) e
    where e.added_by_server and t.cylinder_id in (e.from_id, e.to_id)) p
  where g.reverses_group_id is null and g.occurred_at < t.until
    and not exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = g.id)
  order by t.cylinder_id, g.occurred_at, g.sequence`;

export interface CylinderSpan {
  cylinderId: string;
  from: Date;
  to: Date;
}

/** The timeline of some cylinders, each from the reading that its book rests on at `from`, to before `to`. */
export async function readCylinderSteps(
  manager: EntityManager,
  spans: readonly CylinderSpan[],
): Promise<Map<string, CylinderStep[]>> {
  const steps = new Map<string, CylinderStep[]>(spans.map(({ cylinderId }) => [cylinderId, []]));
  if (spans.length === 0) return steps;
  const rows = await manager.query<StepRow[]>(STEPS, [
    spans.map(({ cylinderId }) => cylinderId),
    spans.map(({ from }) => from),
    spans.map(({ to }) => to),
  ]);
  for (const row of rows) steps.get(row.cylinderId)?.push(stepOf(row));
  return steps;
}

/** What each of these cylinders held by its book at the start of its span, all refrigerants together. */
export async function readBooksAtStart(
  manager: EntityManager,
  spans: readonly CylinderSpan[],
): Promise<Map<string, bigint>> {
  if (spans.length === 0) return new Map();
  const rows = await manager.query<{ id: string; mass: string }[]>(
    `select c.id, (coalesce((select sum(b.mass_micrograms) from balance b
          where b.firm_id = c.firm_id and b.place_key = 'cylinder:' || c.id), 0)
        - coalesce((select sum(e.mass_micrograms) from entry e
          where e.firm_id = c.firm_id and e.to_id = c.id and e.occurred_at >= x.since), 0)
        + coalesce((select sum(e.mass_micrograms) from entry e
          where e.firm_id = c.firm_id and e.from_id = c.id and e.occurred_at >= x.since), 0))::text as mass
      from unnest($1::uuid[], $2::timestamptz[]) x(id, since) cross join lateral ${ONE_CYLINDER} c`,
    [spans.map(({ cylinderId }) => cylinderId), spans.map(({ from }) => from)],
  );
  return new Map(rows.map(({ id, mass }) => [id, BigInt(mass)]));
}

function stepOf(row: StepRow): CylinderStep {
  return {
    groupId: row.groupId,
    closesGroupId: row.closesGroupId,
    occurredAt: row.occurredAt.getTime(),
    tareMicrograms: BigInt(row.tare),
    readings: row.readings.map(({ at, gross, hose, ...reading }) => ({
      ...reading,
      at: Date.parse(at),
      grossMicrograms: BigInt(gross),
      hoseMicrograms: BigInt(hose ?? 0),
    })),
    masses: row.masses.map(({ mass, weighed, scale }) => ({
      massMicrograms: BigInt(mass),
      weighed,
      otherScale: scale,
    })),
    postedMicrograms: BigInt(row.posted),
    opens: row.opened !== '0',
  };
}
