import type { EntityManager } from 'typeorm';
import { ASSUMED_SCALE } from '../../shared/ledger/scale.ts';
import { microgramsOfGrams } from '../../shared/units/mass.ts';
import { siteAt, siteThen } from '../units/dated-site.ts';

/** A cylinder that holds no more than one step of an ordinary scale is empty: no reading could say otherwise. */
const LEAST_CONTENT = microgramsOfGrams(ASSUMED_SCALE.resolutionG);

export interface MonthSpan {
  month: string;
  /** The first moment of the month and of the next, on the firm's clock. */
  start: Date;
  end: Date;
}

export interface OpenWeighInRow {
  groupId: string;
  cylinderId: string;
  cylinderTag: string;
  unitLabel: string | null;
  startedAt: Date;
  timeZone: string;
  startedByName: string;
}

export interface UnweighedRow {
  cylinderId: string;
  cylinderTag: string;
  refrigerant: string;
  content: string;
  lastWeighedAt: Date | null;
  heldByName: string | null;
}

export interface JobRow {
  jobId: string;
  jobKind: string;
  title: string | null;
  unitId: string;
  unitLabel: string;
  customerName: string;
  openedAt: Date;
  closedAt: Date | null;
}

export interface CarriedRow {
  id: string;
  key: string;
  month: string;
  personId: string;
  name: string;
  reason: string;
  decidedAt: Date;
}

const STANDS = (group: string) => `not exists (select from entry_group x
  where x.firm_id = ${group}.firm_id and x.reverses_group_id = ${group}.id)`;

export function openItemsRepository(manager: EntityManager) {
  return {
    /** Weigh-ins that were started by the end of the month and have no end. */
    weighIns: ({ end }: MonthSpan): Promise<OpenWeighInRow[]> =>
      manager.query(
        `select g.id as "groupId", c.id as "cylinderId", c.tag as "cylinderTag", u.tag as "unitLabel",
            g.occurred_at as "startedAt", coalesce(s.time_zone, f.time_zone) as "timeZone",
            coalesce(p.name, '') as "startedByName"
          from entry_group g
          join firm f on f.id = g.firm_id
          join reading r on r.firm_id = g.firm_id and r.group_id = g.id
          join cylinder c on c.firm_id = r.firm_id and c.id = r.cylinder_id
          left join unit u on u.firm_id = g.firm_id and u.id = g.unit_id
          left join site s on s.firm_id = g.firm_id and s.id = ${siteThen('g')}
          left join person p on p.id = g.recorded_by
          where g.open_weigh_in and g.occurred_at < $1 and ${STANDS('g')}
            and not exists (select from entry_group k where k.firm_id = g.firm_id and k.closes_group_id = g.id
              and ${STANDS('k')})
          order by g.occurred_at, g.sequence`,
        [end],
      ),
    /** Cylinders with content at the end of the month that nobody has weighed since it began. */
    unweighed: ({ start, end }: MonthSpan): Promise<UnweighedRow[]> =>
      manager.query(
        `select c.id as "cylinderId", c.tag as "cylinderTag", c.refrigerant, w.content::text,
            (select max(r.read_at) from reading r where r.firm_id = c.firm_id and r.cylinder_id = c.id
              and r.mode = 'gross' and not exists (select from entry_group x
                where x.firm_id = r.firm_id and x.reverses_group_id = r.group_id)) as "lastWeighedAt",
            h.name as "heldByName"
          from cylinder c
          left join person h on h.id = c.held_by
          cross join lateral (select coalesce((select sum(b.mass_micrograms) from balance b
                where b.firm_id = c.firm_id and b.place_key = 'cylinder:' || c.id), 0)
              - coalesce((select sum(e.mass_micrograms) from entry e
                where e.firm_id = c.firm_id and e.to_id = c.id and e.occurred_at >= $2), 0)
              + coalesce((select sum(e.mass_micrograms) from entry e
                where e.firm_id = c.firm_id and e.from_id = c.id and e.occurred_at >= $2), 0) as content) w
          where w.content > $3 and not exists (select from reading r
            where r.firm_id = c.firm_id and r.cylinder_id = c.id and r.mode = 'gross' and r.read_at >= $1
              and not exists (select from entry_group x
                where x.firm_id = r.firm_id and x.reverses_group_id = r.group_id))
          order by c.tag, c.id`,
        [start, end, LEAST_CONTENT.toString()],
      ),
    /** Jobs of the month that moved nothing: begun by its end, and not ended before it began. */
    jobsWithoutPosting: ({ start, end }: MonthSpan): Promise<JobRow[]> =>
      manager.query(
        `select j.id as "jobId", j.kind as "jobKind", j.title, u.id as "unitId", u.tag as "unitLabel",
            coalesce(k.name, '') as "customerName", j.opened_at as "openedAt", j.closed_at as "closedAt"
          from job j
          join unit u on u.firm_id = j.firm_id and u.id = j.unit_id
          join site s on s.firm_id = u.firm_id and s.id = ${siteAt('u.id', 'j.opened_at', 'u.site_id')}
          left join customer k on k.firm_id = s.firm_id and k.id = s.customer_id
          where j.opened_at < $2 and (j.closed_at is null or j.closed_at >= $1)
            and not exists (select from entry_group g where g.firm_id = j.firm_id and g.job_id = j.id and ${STANDS('g')})
          order by j.opened_at, j.id`,
        [start, end],
      ),
    /** What is carried for this month, and what was for earlier ones; the last decision of each item and month. */
    carried: (month: string): Promise<CarriedRow[]> =>
      manager.query(
        `select distinct on (c.item_key, c.month) c.id, c.item_key as key, c.month, c.carried_by as "personId",
            coalesce(p.name, '') as name, c.reason, c.decided_at as "decidedAt"
          from carried_item c left join person p on p.id = c.carried_by
          where c.month <= $1 order by c.item_key, c.month, c.decided_at desc, c.id desc`,
        [month],
      ),
  };
}
