import type { EntityManager } from 'typeorm';
import type { GroupView } from '../../shared/entries/entry.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { siteThen } from '../units/dated-site.ts';
import { entryListRepository } from './entry-list.repository.ts';

type GroupRow = Omit<GroupView, 'entries' | 'readings' | 'sequence' | 'occurredAt' | 'recordedAt'> & {
  sequence: string;
  occurredAt: Date;
  recordedAt: Date;
  readings: (Omit<GroupView['readings'][number], 'massG' | 'hoseG'> & { mass: string; hose: string | null })[];
};

const GROUP = `select g.id, g.sequence::text, g.kind, g.occurred_at as "occurredAt", g.recorded_at as "recordedAt",
    coalesce(s.time_zone, f.time_zone) as "timeZone", g.recorded_by as "recordedBy",
    coalesce(p.name, '') as "recordedByName", v.name as "supervisedByName", g.unit_id as "unitId",
    u.tag as "unitLabel", g.job_id as "jobId", g.charge_sheet_id as "chargeSheetId", g.open_weigh_in as "openWeighIn",
    g.closes_group_id as "closesGroupId", g.reverses_group_id as "reversesGroupId", g.reason,
    (select k.id from entry_group k where k.firm_id = g.firm_id and k.closes_group_id = g.id
      and not exists (select from entry_group x where x.firm_id = k.firm_id and x.reverses_group_id = k.id)
      limit 1) as "closedByGroupId",
    (select x.id from entry_group x where x.firm_id = g.firm_id and x.reverses_group_id = g.id) as "reversedByGroupId",
    (select x.id from entry_group x where x.firm_id = g.firm_id and x.replaces_group_id = g.id) as "replacedByGroupId",
    (select t.content from personal_text t where t.firm_id = g.firm_id and t.record_id = g.id and t.field = 'note'
      limit 1) as note,
    j.content::jsonb -> 'recoveryLevel' as "recoveryLevel",
    encode(j.hash, 'hex') as hash, encode(b.hash, 'hex') as "previousHash",
    (select coalesce(json_agg(json_build_object('id', r.id, 'cylinderId', r.cylinder_id, 'cylinderTag', coalesce(c.tag, ''),
        'toolId', r.tool_id, 'toolName', t.name, 'moment', r.moment, 'mode', r.mode, 'value', r.typed_value, 'unit', r.typed_unit,
        'readAt', r.read_at, 'mass', r.mass_micrograms::text, 'hoseFull', coalesce(r.hose_full, false), 'hose', r.hose_micrograms::text,
        'resolutionG', r.resolution_g, 'repeatabilityG', r.repeatability_g,
        'spanErrorRelative', r.span_error_relative, 'offsetG', r.offset_g) order by r.cylinder_id, r.moment = 'after', r.id), '[]')
      from reading r
      left join cylinder c on c.firm_id = r.firm_id and c.id = r.cylinder_id
      left join tool t on t.firm_id = r.firm_id and t.id = r.tool_id
      where r.firm_id = g.firm_id and r.group_id = g.id) as readings,
    (select coalesce(json_agg(json_build_object('about', 'unit', 'id', s.unit_id, 'is', s.condition, 'by', s.shown_by)
        order by s.sequence, s.ordinal), '[]')
      from statement s join entry_group w on w.firm_id = s.firm_id and w.id = s.group_id
      where s.firm_id = g.firm_id and (s.group_id = g.id or w.answers_group_id = g.id)) as statements,
    (select coalesce(json_agg(json_build_object('kind', d.kind, 'number', d.number, 'date', d.dated,
        'refrigerant', d.refrigerant, 'massG', d.mass_micrograms / 1e6,
        'typed', case when d.typed_value is not null
          then json_build_object('value', d.typed_value, 'unit', d.typed_unit) end) order by d.ordinal), '[]')
      from group_document d where d.firm_id = g.firm_id and d.group_id = g.id) as documents
  from entry_group g
  join firm f on f.id = g.firm_id
  left join site s on s.firm_id = g.firm_id and s.id = ${siteThen('g')}
  left join unit u on u.firm_id = g.firm_id and u.id = g.unit_id
  left join person p on p.id = g.recorded_by
  left join person v on v.id = g.supervised_by
  left join journal_record j on j.firm_id = g.firm_id and j.sequence = g.sequence
  left join journal_record b on b.firm_id = g.firm_id and b.sequence = g.sequence - 1
  where g.id = $1`;

/** Where the chain begins there is no record before: 32 zero bytes stand there. */
const BEFORE_THE_FIRST = '0'.repeat(64);

/** A group whole: what was entered, what was added for it, the answers given since, and its place in the chain. */
export async function findGroupView(manager: EntityManager, id: string, locale: Locale): Promise<GroupView | null> {
  const [row] = await manager.query<GroupRow[]>(GROUP, [id]);
  if (!row) return null;
  const entries = await entryListRepository(manager, locale).ofGroup(id);
  return {
    ...row,
    sequence: Number(row.sequence),
    occurredAt: row.occurredAt.toISOString(),
    recordedAt: row.recordedAt.toISOString(),
    readings: row.readings.map(({ mass, hose, ...reading }) => ({
      ...reading,
      readAt: new Date(reading.readAt).toISOString(),
      massG: gramsOfMicrograms(BigInt(mass)),
      hoseG: hose === null ? null : gramsOfMicrograms(BigInt(hose)),
    })),
    previousHash: row.hash === null ? null : (row.previousHash ?? BEFORE_THE_FIRST),
    entries,
  };
}
