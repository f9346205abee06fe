import type { EntityManager } from 'typeorm';
import { isRetestOverdue } from '../../shared/cylinders/retest.ts';
import type { OpenWeighIn, Today } from '../../shared/today/today.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { siteThen } from '../units/dated-site.ts';

type WeighInRow = Omit<OpenWeighIn, 'startedAt' | 'startGrossG' | 'hoseG'> & {
  startedAt: Date;
  gross: string;
  hose: string | null;
};

/** Weigh-ins with a start and no end, oldest first. */
const OPEN_WEIGH_INS = `select g.id as "groupId", r.cylinder_id as "cylinderId", c.tag as "cylinderTag",
    g.unit_id as "unitId", u.tag as "unitLabel", g.charge_sheet_id as "chargeSheetId", c.refrigerant,
    g.occurred_at as "startedAt", coalesce(s.time_zone, f.time_zone) as "timeZone", r.mass_micrograms::text as gross,
    coalesce(r.hose_full, false) as "hoseFull", r.hose_micrograms::text as hose, r.tool_id as "toolId",
    g.recorded_by as "startedBy", coalesce(p.name, '') as "startedByName"
  from entry_group g
  join firm f on f.id = g.firm_id
  join reading r on r.firm_id = g.firm_id and r.group_id = g.id
  join cylinder c on c.firm_id = r.firm_id and c.id = r.cylinder_id
  left join unit u on u.firm_id = g.firm_id and u.id = g.unit_id
  left join site s on s.firm_id = g.firm_id and s.id = ${siteThen('g')}
  left join person p on p.id = g.recorded_by
  where g.open_weigh_in
    and not exists (select from entry_group x where x.firm_id = g.firm_id and x.reverses_group_id = g.id)
    and not exists (select from entry_group k where k.firm_id = g.firm_id and k.closes_group_id = g.id
      and not exists (select from entry_group x where x.firm_id = k.firm_id and x.reverses_group_id = k.id))
  order by g.occurred_at, g.sequence limit 200`;

export async function readOpenWeighIns(manager: EntityManager): Promise<OpenWeighIn[]> {
  const rows = await manager.query<WeighInRow[]>(OPEN_WEIGH_INS);
  return rows.map(({ startedAt, gross, hose, ...row }) => ({
    ...row,
    startedAt: startedAt.toISOString(),
    startGrossG: gramsOfMicrograms(BigInt(gross)),
    hoseG: hose === null ? null : gramsOfMicrograms(BigInt(hose)),
  }));
}

/** Re-tests and open invitations that end by the day given, nearest first. */
export async function readDue(
  manager: EntityManager,
  { today, until }: { today: string; until: string },
): Promise<Today['due']> {
  const due = await manager.query<Omit<Today['due'][number], 'overdue'>[]>(
    `select kind, id, label, day::text as "on" from (
       select 'retest' as kind, id, tag as label, retest_due as day from cylinder where retest_due is not null
       union all select 'invitationExpires', id, email, expires_at::date from invitation where accepted_at is null
         and expires_at >= $1::date
     ) d where day <= $2::date order by day, label limit 100`,
    [today, until],
  );
  return due.map((each) => ({ ...each, overdue: each.kind === 'retest' && isRetestOverdue(each.on, today) }));
}
