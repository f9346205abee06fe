import type { EntityManager } from 'typeorm';
import type { StepReading } from '../../shared/ledger/cylinder-issues.ts';
import type { GroupKind } from '../../shared/ledger/entry-group.schema.ts';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import type { Scale } from '../../shared/ledger/scale.ts';

export interface StatementEntryRow {
  id: string;
  groupId: string;
  sequence: number;
  /** Of the group that it stands with: a correction stands with what it corrects. */
  anchorSequence: number;
  at: string;
  kind: GroupKind;
  refrigerant: string;
  /** Above zero: into the cylinder. */
  mass: string;
  counterPlace: PlaceKind;
  counterId: string | null;
  counterAs: AtmosphereKind | null;
  howKnown: string | null;
  addedByServer: boolean;
  correctsGroupId: string | null;
  cancelled: boolean;
  late: boolean;
  bookingMonth: string;
  recordedByName: string;
}

export interface StatementReadingRow {
  id: string;
  groupId: string;
  sequence: number;
  at: string;
  occurredAt: string;
  moment: StepReading['moment'];
  mode: StepReading['mode'];
  value: string;
  unit: string;
  gross: string;
  toolName: string | null;
  scale: Scale | null;
  cancelled: boolean;
  recordedByName: string;
}

export interface StatementFacts {
  cylinder: {
    id: string;
    tag: string;
    kind: string;
    refrigerant: string;
    tare: string;
    heldByName: string | null;
  };
  firmName: string;
  /** The book now, by refrigerant, and what was posted into it from the end of the period on. */
  balance: Record<string, string> | null;
  later: Record<string, string> | null;
  entries: StatementEntryRow[];
  readings: StatementReadingRow[];
  lastBefore: string | null;
}

const SIGNED = 'case when e.to_id = c.id then e.mass_micrograms else -e.mass_micrograms end';
const COUNTER = (field: string) => `case when e.to_id = c.id then e.from_${field} else e.to_${field} end`;
const ofCylinder = (when: string) => `(
  select e.* from entry e where e.firm_id = c.firm_id and e.to_id = c.id and ${when}
  union all select e.* from entry e where e.firm_id = c.firm_id and e.from_id = c.id and ${when}) e`;
const CANCELLED = (group: string) => `exists (select from entry_group x
  where x.firm_id = ${group}.firm_id and x.reverses_group_id = ${group}.id)`;

/** One statement: what the period holds, and from which book to count back. Masses as text: JSON numbers are doubles. */
const FACTS = `select json_build_object(
  'cylinder', json_build_object('id', c.id, 'tag', c.tag, 'kind', c.kind, 'refrigerant', c.refrigerant,
    'tare', (select t.mass_micrograms::text from cylinder_tare t where t.firm_id = c.firm_id and t.cylinder_id = c.id
      order by t.valid_from < $3 desc, case when t.valid_from < $3 then $3 - t.valid_from else t.valid_from - $3 end limit 1),
    'heldByName', (select p.name from person p where p.id = c.held_by)),
  'firmName', (select f.name from firm f where f.id = c.firm_id),
  'balance', (select json_object_agg(b.refrigerant, b.mass_micrograms::text) from balance b
    where b.firm_id = c.firm_id and b.place_key = 'cylinder:' || c.id),
  'later', (select json_object_agg(l.refrigerant, l.mass::text) from (
    select e.refrigerant, sum(${SIGNED}) as mass from ${ofCylinder('e.occurred_at >= $3')} group by e.refrigerant) l),
  'entries', (select coalesce(json_agg(json_build_object('id', e.id, 'groupId', e.group_id, 'sequence', e.sequence,
      'anchorSequence', coalesce((select x.sequence from entry_group x
        where x.firm_id = e.firm_id and x.id = e.corrects_group_id), g.sequence),
      'at', e.occurred_at, 'kind', e.kind, 'refrigerant', e.refrigerant, 'mass', (${SIGNED})::text,
      'counterPlace', ${COUNTER('place')}, 'counterId', ${COUNTER('id')}, 'counterAs', ${COUNTER('as')},
      'howKnown', e.how_known, 'addedByServer', e.added_by_server, 'correctsGroupId', e.corrects_group_id,
      'cancelled', e.reverses_entry_id is not null or (not e.added_by_server and ${CANCELLED('g')}),
      'late', e.late, 'bookingMonth', e.booking_month, 'recordedByName', coalesce(p.name, ''))
      order by e.occurred_at, e.sequence), '[]')
    from (select e.* from ${ofCylinder('e.occurred_at >= $2 and e.occurred_at < $3')}
      order by e.occurred_at, e.sequence limit $4) e
    join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
    left join person p on p.id = e.recorded_by),
  'readings', (select coalesce(json_agg(json_build_object('id', r.id, 'groupId', r.group_id, 'sequence', r.sequence,
      'at', r.read_at, 'occurredAt', g.occurred_at, 'moment', r.moment, 'mode', r.mode, 'value', r.typed_value,
      'unit', r.typed_unit, 'gross', r.mass_micrograms::text, 'toolName', t.name,
      'scale', case when r.resolution_g is not null then json_build_object('resolutionG', r.resolution_g,
        'repeatabilityG', r.repeatability_g, 'spanErrorRelative', r.span_error_relative, 'offsetG', r.offset_g) end,
      'cancelled', ${CANCELLED('g')}, 'recordedByName', coalesce(p.name, '')) order by r.read_at, r.sequence, r.id), '[]')
    from reading r
    join entry_group g on g.firm_id = r.firm_id and g.id = r.group_id
    left join tool t on t.firm_id = r.firm_id and t.id = r.tool_id
    left join person p on p.id = g.recorded_by
    where r.firm_id = c.firm_id and r.cylinder_id = c.id and r.read_at >= $2 and r.read_at < $3),
  'lastBefore', (select r.read_at from reading r where r.firm_id = c.firm_id and r.cylinder_id = c.id
    and r.read_at < $2 and r.mode = 'gross'
    and not exists (select from entry_group x where x.firm_id = r.firm_id and x.reverses_group_id = r.group_id)
    order by r.read_at desc, r.sequence desc limit 1)) as facts
  from cylinder c where c.id = $1`;

/**
 * What a statement of one cylinder is made of. Null where there is no such cylinder.
 * @param most entries; one more is read, so that the caller sees that there are more
 */
export async function readStatementFacts(
  manager: EntityManager,
  cylinderId: string,
  { from, to, most }: { from: Date; to: Date; most: number },
): Promise<StatementFacts | null> {
  const [row] = await manager.query<{ facts: StatementFacts }[]>(FACTS, [cylinderId, from, to, most + 1]);
  return row?.facts ?? null;
}
