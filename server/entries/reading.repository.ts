import type { EntityManager } from 'typeorm';
import type { ReadingListQuery, ReadingRow } from '../../shared/entries/entry.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';

type Row = Omit<ReadingRow, 'at' | 'massG' | 'hoseG'> & { at: Date; mass: string; hose: string | null };

const SELECT = `r.id, r.group_id as "groupId", g.kind, r.cylinder_id as "cylinderId", r.tool_id as "toolId",
  t.name as "toolName", r.read_at as at, r.moment, r.mode, r.typed_value as value, r.typed_unit as unit,
  r.mass_micrograms::text as mass, coalesce(r.hose_full, false) as "hoseFull", r.hose_micrograms::text as hose,
  exists (select from entry_group x where x.firm_id = r.firm_id and x.reverses_group_id = r.group_id) as reversed,
  coalesce(p.name, '') as "recordedByName"`;
const FROM = `reading r
  join entry_group g on g.firm_id = r.firm_id and g.id = r.group_id
  left join tool t on t.firm_id = r.firm_id and t.id = r.tool_id
  left join person p on p.id = g.recorded_by`;
const BY_TIME: readonly SortColumn[] = [
  { sql: 'r.read_at', type: 'timestamptz' },
  { sql: 'r.sequence', type: 'bigint' },
  { sql: 'r.id', type: 'uuid' },
];

/** Readings of one cylinder. */
export function listReadings(manager: EntityManager, query: ReadingListQuery) {
  const list = {
    select: SELECT,
    from: FROM,
    conditions: new Conditions().with('r.cylinder_id = $', query.cylinderId),
    sort: { columns: BY_TIME, direction: query.sort === 'at' ? ('asc' as const) : ('desc' as const) },
    page: query,
    of: cursorScope('readings', query),
  };
  return readPage<Row, ReadingRow>(manager, list, (row) => ({
    id: row.id,
    groupId: row.groupId,
    kind: row.kind,
    cylinderId: row.cylinderId,
    toolId: row.toolId,
    toolName: row.toolName,
    at: row.at.toISOString(),
    moment: row.moment,
    mode: row.mode,
    value: row.value,
    unit: row.unit,
    massG: gramsOfMicrograms(BigInt(row.mass)),
    hoseFull: row.hoseFull,
    hoseG: row.hose === null ? null : gramsOfMicrograms(BigInt(row.hose)),
    reversed: row.reversed,
    recordedByName: row.recordedByName,
  }));
}
