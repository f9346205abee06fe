import type { EntityManager } from 'typeorm';
import type { EntryExportQuery, EntryListQuery, EntryRow } from '../../shared/entries/entry.schema.ts';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { Conditions, cursorScope, readPage, type Sort } from '../lists/list-query.ts';
import { siteThen } from '../units/dated-site.ts';
import { type Labels, placeView, readLabels } from './place-labels.ts';

export interface EntryJson {
  id: string;
  sequence: string;
  groupId: string;
  kind: EntryRow['kind'];
  refrigerant: string;
  mass: string;
  typedValue: string | null;
  typedUnit: string | null;
  fromPlace: PlaceKind;
  fromId: string | null;
  fromAs: AtmosphereKind | null;
  toPlace: PlaceKind;
  toId: string | null;
  toAs: AtmosphereKind | null;
  howKnown: string | null;
  occurredAt: Date;
  recordedAt: Date;
  timeZone: string;
  bookingMonth: string;
  late: boolean;
  addedByServer: boolean;
  atLeast: boolean;
  correctsGroupId: string | null;
  reversedBy: string | null;
  reverses: string | null;
  recordedByName: string | null;
  unitId: string | null;
}

const SELECT = `e.id, e.sequence::text, e.group_id as "groupId", e.kind, e.refrigerant, e.mass_micrograms::text as mass,
  e.typed_value as "typedValue", e.typed_unit as "typedUnit", e.from_place as "fromPlace", e.from_id as "fromId",
  e.from_as as "fromAs", e.to_place as "toPlace", e.to_id as "toId", e.to_as as "toAs", e.how_known as "howKnown",
  e.occurred_at as "occurredAt", e.recorded_at as "recordedAt", coalesce(s.time_zone, f.time_zone) as "timeZone",
  e.booking_month as "bookingMonth", e.late, e.added_by_server as "addedByServer", e.at_least as "atLeast",
  e.corrects_group_id as "correctsGroupId", r.id as "reversedBy", g.reverses_group_id as "reverses",
  p.name as "recordedByName", e.unit_id as "unitId"`;

const JOINED = `join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
  join firm f on f.id = e.firm_id
  left join site s on s.firm_id = e.firm_id and s.id = ${siteThen('e')}
  left join entry_group r on r.firm_id = e.firm_id and r.reverses_group_id = e.group_id
  left join person p on p.id = e.recorded_by`;

/** `base` is the entries to read, as `e`. */
export const entriesFrom = (base: string): string => `${base}
  ${JOINED}`;

export const ENTRY_SORT: Record<EntryListQuery['sort'], Sort> = {
  '-sequence': { columns: [{ sql: 'e.sequence', type: 'bigint' }], direction: 'desc' },
  sequence: { columns: [{ sql: 'e.sequence', type: 'bigint' }], direction: 'asc' },
  '-occurredAt': { columns: byTime(), direction: 'desc' },
  occurredAt: { columns: byTime(), direction: 'asc' },
};
function byTime(): Sort['columns'] {
  return [
    { sql: 'e.occurred_at', type: 'timestamptz' },
    { sql: 'e.sequence', type: 'bigint' },
  ];
}

export function entryListRepository(manager: EntityManager, locale: Locale) {
  return {
    async list(query: EntryListQuery) {
      const conditions = entryConditions(query);
      const list = {
        select: SELECT,
        from: 'entry e',
        joined: { alias: 'e', sql: JOINED },
        conditions,
        sort: ENTRY_SORT[query.sort],
        page: query,
        of: cursorScope('entries', query),
      };
      const page = await readPage<EntryJson, EntryJson>(manager, list, (row) => row);
      return { ...page, items: await this.present(page.items) };
    },
    async ofGroup(groupId: string): Promise<EntryRow[]> {
      const rows = await manager.query<EntryJson[]>(
        `select ${SELECT} from ${entriesFrom('entry e')} where e.group_id = $1 order by e.sequence`,
        [groupId],
      );
      return this.present(rows);
    },
    async present(rows: readonly EntryJson[]): Promise<EntryRow[]> {
      const labels = await readLabels(
        manager,
        rows.flatMap(({ fromId, toId }) => [fromId, toId]),
      );
      return rows.map((row) => presentEntry(row, labels, locale));
    },
  };
}

/** Filters of the log as conditions on `e`. Either end of an entry counts for a cylinder or a kind of place. */
export function entryConditions(query: EntryExportQuery): Conditions {
  const conditions = new Conditions()
    .andIf('e.refrigerant = $', query.refrigerant)
    .andIf('e.booking_month = $', query.month)
    .andIf('e.unit_id = $', query.unitId)
    .andIf('e.recorded_by = $', query.personId)
    .andIf('e.kind = $', query.kind);
  if (query.cylinderId) conditions.with('(e.from_id = $ or e.to_id = $)', query.cylinderId);
  if (query.place) conditions.with('(e.from_place = $ or e.to_place = $)', query.place);
  if (query.without === 'reversed') {
    // What was added or corrected for a reversed group comes to nothing together with its reversal.
    conditions.and(`e.reverses_entry_id is null and not exists (select from entry_group x
      where x.firm_id = e.firm_id and x.reverses_group_id = coalesce(e.corrects_group_id, e.group_id))`);
  }
  return conditions;
}

function presentEntry(row: EntryJson, labels: Labels, locale: Locale): EntryRow {
  const { typedValue, typedUnit } = row;
  return {
    id: row.id,
    sequence: Number(row.sequence),
    groupId: row.groupId,
    kind: row.kind,
    refrigerant: row.refrigerant,
    massG: gramsOfMicrograms(BigInt(row.mass)),
    typed: typedValue !== null && typedUnit !== null ? { value: typedValue, unit: typedUnit } : null,
    from: placeView({ place: row.fromPlace, id: row.fromId, as: row.fromAs }, labels, locale),
    to: placeView({ place: row.toPlace, id: row.toId, as: row.toAs }, labels, locale),
    howKnown: row.howKnown,
    occurredAt: row.occurredAt.toISOString(),
    recordedAt: row.recordedAt.toISOString(),
    timeZone: row.timeZone,
    bookingMonth: row.bookingMonth,
    late: row.late,
    addedByServer: row.addedByServer,
    atLeast: row.atLeast,
    correctsGroupId: row.correctsGroupId,
    reversedByGroupId: row.reversedBy,
    reversesGroupId: row.reverses,
    recordedByName: row.recordedByName ?? '',
    unitId: row.unitId,
  };
}
