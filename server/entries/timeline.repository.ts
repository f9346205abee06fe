import type { EntityManager } from 'typeorm';
import { type AddedEntry, postedAsAdded } from '../../shared/ledger/added-entry.ts';
import type { EmptyBy, GroupKind, HowKnown, UnitCondition } from '../../shared/ledger/entry-group.schema.ts';
import type { JudgedStatement } from '../../shared/ledger/judged-group.ts';
import { type Place, type PlaceFields, toPlace } from '../../shared/ledger/place.ts';
import { ASSUMED_SCALE, type Scale } from '../../shared/ledger/scale.ts';
import { FLAG_FIELDS, type FlagRow, storedFlag } from './posting-facts.repository.ts';
import type { StoredFlag, StoredGroup } from './posting-facts.ts';

/** Whole timelines of some places: for what arrives late, is reversed, answered or revised. */
export interface Timelines {
  readonly groups: readonly StoredGroup[];
  readonly posted: readonly AddedEntry[];
  /** Every open flag of these places, and of the group that is being reversed. */
  readonly flags: readonly StoredFlag[];
}

interface GroupRow {
  id: string;
  sequence: string;
  kind: GroupKind;
  unitId: string | null;
  siteId: string | null;
  jobId: string | null;
  chargeSheetId: string | null;
  occurredAt: Date;
  recordedAt: Date;
  recordedBy: string;
  openWeighIn: boolean;
  closesGroupId: string | null;
  reversesGroupId: string | null;
  answersGroupId: string | null;
  reversedBy: string | null;
  closedBy: string | null;
  readings: {
    cylinderId: string;
    moment: 'before' | 'after' | 'only';
    mode: 'gross' | 'zeroed';
    gross: string;
    hose: string | null;
    scale: Scale | null;
    toolId: string | null;
    at: string;
  }[];
  entries: {
    id: string;
    refrigerant: string;
    mass: string;
    from: PlaceFields;
    to: PlaceFields;
    howKnown: HowKnown;
    unitId: string | null;
    siteId: string | null;
  }[];
  statements: { id: string; is: UnitCondition; by: EmptyBy | null }[];
  documentCount: number;
}

const PLACE = (end: 'from' | 'to') =>
  `json_build_object('place', e.${end}_place, 'id', e.${end}_id, 'as', e.${end}_as)`;

const GROUP = `select g.id, g.sequence::text, g.kind, g.unit_id as "unitId", g.site_id as "siteId", g.job_id as "jobId",
    g.charge_sheet_id as "chargeSheetId", g.occurred_at as "occurredAt", g.recorded_at as "recordedAt",
    g.recorded_by as "recordedBy", g.open_weigh_in as "openWeighIn", g.closes_group_id as "closesGroupId",
    g.reverses_group_id as "reversesGroupId", g.answers_group_id as "answersGroupId",
    (select r.id from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = g.id) as "reversedBy",
    (select c.id from entry_group c where c.firm_id = g.firm_id and c.closes_group_id = g.id and not exists (
      select from entry_group r where r.firm_id = c.firm_id and r.reverses_group_id = c.id) limit 1) as "closedBy",
    (select coalesce(json_agg(json_build_object('cylinderId', r.cylinder_id, 'moment', r.moment, 'mode', r.mode,
        'toolId', r.tool_id, 'at', r.read_at, 'gross', r.mass_micrograms::text, 'hose', case when r.hose_full then r.hose_micrograms::text end,
        'scale', case when r.resolution_g is not null then json_build_object('resolutionG', r.resolution_g,
          'repeatabilityG', r.repeatability_g, 'spanErrorRelative', r.span_error_relative, 'offsetG', r.offset_g) end)
        order by r.id), '[]')
      from reading r where r.firm_id = g.firm_id and r.group_id = g.id) as readings,
    (select coalesce(json_agg(json_build_object('id', e.id, 'refrigerant', e.refrigerant,
        'mass', e.mass_micrograms::text, 'from', ${PLACE('from')}, 'to', ${PLACE('to')}, 'howKnown', e.how_known,
        'unitId', e.unit_id, 'siteId', e.site_id) order by e.sequence), '[]')
      from entry e where e.firm_id = g.firm_id and e.group_id = g.id and not e.added_by_server
        and e.reverses_entry_id is null) as entries,
    (select coalesce(json_agg(json_build_object('id', s.unit_id, 'is', s.condition, 'by', s.shown_by)
        order by s.ordinal), '[]')
      from statement s where s.firm_id = g.firm_id and s.group_id = g.id) as statements,
    (select count(*)::integer from group_document d where d.firm_id = g.firm_id and d.group_id = g.id) as "documentCount"
  from entry_group g`;

const TOUCHING = `select e.group_id from entry e
    where (e.from_id = any ($1::uuid[]) or e.to_id = any ($1::uuid[])) and not e.added_by_server
      and e.reverses_entry_id is null
  union select r.group_id from reading r where r.cylinder_id = any ($1::uuid[])
  union select s.group_id from statement s where s.unit_id = any ($1::uuid[])`;

/** What judging added, in whose timeline: a cylinder's or unit's own entries, and what was lost before our care. */
const ADDED = `select e.group_id as "groupId", e.corrects_group_id as "correctsGroupId", e.refrigerant,
    e.mass_micrograms::text as mass, ${PLACE('from')} as "from", ${PLACE('to')} as "to", e.at_least as "atLeast",
    e.unit_id as "unitId"
  from entry e
  where e.added_by_server and (e.from_id = any ($1::uuid[]) or e.to_id = any ($1::uuid[])
    or (e.unit_id = any ($1::uuid[]) and e.from_id is null and e.to_id is null
      and 'opening' in (e.from_place, e.to_place)))`;

/**
 * @param placeIds of cylinders and units
 * @param withoutGroupId is being reversed, so that it and what it answered counts no longer
 */
export async function loadTimelines(
  manager: EntityManager,
  placeIds: readonly string[],
  withoutGroupId: string | null = null,
): Promise<Timelines> {
  if (placeIds.length === 0 && withoutGroupId === null) return { groups: [], posted: [], flags: [] };
  const rows = await manager.query<GroupRow[]>(`${GROUP} where g.id in (${TOUCHING})`, [placeIds]);
  const posted = await manager.query<
    {
      groupId: string;
      correctsGroupId: string | null;
      refrigerant: string;
      mass: string;
      from: PlaceFields;
      to: PlaceFields;
      atLeast: boolean;
      unitId: string | null;
    }[]
  >(ADDED, [placeIds]);
  const flags = await manager.query<{ flag: FlagRow }[]>(
    `select ${FLAG_FIELDS} as flag from flag f
      where (f.subject_id = any ($1::uuid[]) or f.group_id = $2) and f.closed_at is null`,
    [placeIds, withoutGroupId],
  );
  return {
    groups: withAnswers(
      rows.map(storedGroup).map((group) => (group.id === withoutGroupId ? { ...group, reversed: true } : group)),
    ),
    posted: posted.map(({ mass, from, to, unitId, ...entry }) => {
      const ends = { from: toPlace(from), to: toPlace(to) };
      return postedAsAdded({
        ...entry,
        ...ends,
        massMicrograms: BigInt(mass),
        judgedPlace: judgedPlaceOf(ends.from, ends.to, unitId),
      });
    }),
    flags: flags.map(({ flag }) => storedFlag(flag)),
  };
}

/** One group, with the answers that were given later. Null where there is none. */
export async function findGroup(manager: EntityManager, groupId: string): Promise<StoredGroup | null> {
  const rows = await manager.query<GroupRow[]>(
    `${GROUP} where g.id = $1 or g.answers_group_id = $1 order by g.sequence`,
    [groupId],
  );
  const groups = rows.map(storedGroup);
  return withAnswers(groups).find(({ id }) => id === groupId) ?? groups.find(({ id }) => id === groupId) ?? null;
}

/** A cylinder's entry is judged there, a unit's there; what touches neither (lost before our care) in the unit named. */
export function judgedPlaceOf(from: Place, to: Place, unitId: string | null): Place {
  const cylinder = [from, to].find((place) => place.place === 'cylinder');
  const unit = [from, to].find((place) => place.place === 'unit');
  const judged = cylinder ?? unit ?? (unitId === null ? null : ({ place: 'unit', id: unitId } as const));
  if (!judged) throw new RangeError('an entry of the server belongs to a cylinder or a unit');
  return judged;
}

function storedGroup(row: GroupRow): StoredGroup {
  const readings = row.readings.map((reading) => ({
    cylinderId: reading.cylinderId,
    moment: reading.moment,
    mode: reading.mode,
    grossMicrograms: BigInt(reading.gross),
    hoseFullMicrograms: BigInt(reading.hose ?? 0),
    scale: reading.scale ?? ASSUMED_SCALE,
    toolId: reading.toolId,
    at: Date.parse(reading.at),
  }));
  const scaleAt = (place: PlaceFields): Scale | null =>
    place.place === 'cylinder' ? (readings.find(({ cylinderId }) => cylinderId === place.id)?.scale ?? null) : null;
  const statements = row.statements.map(({ id, is, by }) => ({ about: 'unit' as const, id, is, by }));
  return {
    id: row.id,
    sequence: Number(row.sequence),
    occurredAt: row.occurredAt.getTime(),
    kind: row.kind,
    jobId: row.jobId,
    chargeSheetId: row.chargeSheetId,
    reversed: row.reversedBy !== null,
    readings,
    masses: row.entries.map((entry) => ({
      refrigerant: entry.refrigerant,
      massMicrograms: BigInt(entry.mass),
      from: toPlace(entry.from),
      to: toPlace(entry.to),
      howKnown: entry.howKnown,
      scale: entry.howKnown === 'weighed' ? (scaleAt(entry.to) ?? scaleAt(entry.from)) : null,
    })),
    statements,
    ownStatements: statements,
    unitId: row.unitId,
    siteId: row.siteId,
    recordedBy: row.recordedBy,
    recordedAt: row.recordedAt.getTime(),
    openWeighIn: row.openWeighIn,
    closesGroupId: row.closesGroupId,
    reversesGroupId: row.reversesGroupId,
    answersGroupId: row.answersGroupId,
    isCorrection:
      row.entries.length + row.readings.length + row.statements.length + row.documentCount === 0 &&
      row.reversesGroupId === null,
    reversedByGroupId: row.reversedBy,
    closedByGroupId: row.closedBy,
    entries: row.entries.map(({ id, unitId, siteId }) => ({ id, unitId, siteId })),
  };
}

/** An answer is a record of its own, and speaks for the group that it answers; the last one that stands counts. */
function withAnswers(groups: readonly StoredGroup[]): StoredGroup[] {
  const answers = groups
    .filter((group) => group.answersGroupId !== null && !group.reversed)
    .toSorted((a, b) => Number(a.sequence) - Number(b.sequence));
  return groups
    .filter((group) => group.answersGroupId === null)
    .map((group) => {
      const given = answers
        .filter(({ answersGroupId }) => answersGroupId === group.id)
        .flatMap(({ ownStatements }) => ownStatements);
      return given.length === 0 ? group : { ...group, statements: answered(group.statements, given) };
    });
}

export function answered(own: readonly JudgedStatement[], given: readonly JudgedStatement[]): JudgedStatement[] {
  return given.reduce<JudgedStatement[]>(
    (statements, answer) => [...statements.filter(({ id }) => id !== answer.id), answer],
    [...own],
  );
}
