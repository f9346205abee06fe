import type { EntityManager } from 'typeorm';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import type { Unit, UnitListQuery } from '../../shared/unit-register/unit.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import type { StoredMassUnit } from '../../shared/units/stored-mass.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { insertRows } from '../registers/insert-rows.ts';
import { UnitEntity } from './unit.entity.ts';

export type UnitRow = UnitEntity;

/** What the database says of a unit; the CO2 equivalent comes from the reference tables. */
export interface UnitViewRow {
  id: string;
  siteId: string;
  siteName: string;
  customerId: string;
  customerName: string;
  tag: string;
  name: string;
  applianceKind: Unit['applianceKind'];
  subsector: Unit['subsector'];
  refrigerant: string;
  serials: Unit['serials'];
  nameplateReadable: boolean;
  designPressureHighKPaGauge: number | null;
  designPressureLowKPaGauge: number | null;
  installedOn: string | null;
  fullCharge: FullChargeJson | null;
  known: boolean;
  book: Record<string, string> | null;
  gwpSet: GwpSet;
  version: number;
}

export interface FullChargeJson {
  id: string;
  refrigerant: string;
  mass: string;
  typedValue: string;
  typedUnit: StoredMassUnit;
  method: NonNullable<Unit['fullCharge']>['method'];
  validFrom: string;
  jobId: string | null;
  reason: string | null;
}

export const FULL_CHARGE_JSON = `json_build_object('id', fc.id, 'refrigerant', fc.refrigerant,
  'mass', fc.mass_micrograms::text, 'typedValue', fc.typed_value, 'typedUnit', fc.typed_unit, 'method', fc.method,
  'validFrom', fc.valid_from, 'jobId', fc.job_id, 'reason', fc.reason)`;

const FROM = `unit u
  join site s on s.firm_id = u.firm_id and s.id = u.site_id
  join customer c on c.firm_id = s.firm_id and c.id = s.customer_id
  join firm f on f.id = u.firm_id`;
const SELECT = `u.id, u.site_id as "siteId", s.name as "siteName", c.id as "customerId", c.name as "customerName", u.tag,
  u.name, u.appliance_kind as "applianceKind", u.subsector, u.refrigerant, u.serials,
  u.nameplate_readable as "nameplateReadable", u.design_pressure_high_kpa_gauge as "designPressureHighKPaGauge",
  u.design_pressure_low_kpa_gauge as "designPressureLowKPaGauge", u.installed_on::text as "installedOn", u.version,
  f.gwp_set as "gwpSet",
  (select ${FULL_CHARGE_JSON} from unit_full_charge fc
    where fc.firm_id = u.firm_id and fc.unit_id = u.id and fc.refrigerant = u.refrigerant
    order by fc.valid_from desc, fc.id desc limit 1) as "fullCharge",
  coalesce((select p.known from place_state p
    where p.firm_id = u.firm_id and p.place = 'unit' and p.place_id = u.id), false) as known,
  (select json_object_agg(b.refrigerant, b.mass_micrograms::text) from balance b
    where b.firm_id = u.firm_id and b.place = 'unit' and b.place_id = u.id and b.mass_micrograms <> 0) as book`;

const SORTS: Record<'tag' | 'name', readonly SortColumn[]> = {
  tag: [
    { sql: 'u.tag', type: 'text' },
    { sql: 'u.id', type: 'uuid' },
  ],
  name: [
    { sql: 'u.name', type: 'text' },
    { sql: 'u.id', type: 'uuid' },
  ],
};
const SEARCHED = `concat_ws(' ', u.tag, u.name, u.serials::text, s.name, array_to_string(s.address_lines, ' '), c.name)`;

export function unitsRepository(manager: EntityManager) {
  const rows = manager.getRepository(UnitEntity);
  return {
    find: (id: string): Promise<UnitRow | null> => rows.findOneBy({ id }),
    insert: (...many: readonly Omit<UnitRow, 'version'>[]): Promise<void> => insertRows(manager, UnitEntity, many),
    async update({ firmId, id, version: _version, ...facts }: UnitRow): Promise<void> {
      await rows.update({ firmId, id }, facts);
    },
    async findView(id: string): Promise<UnitViewRow | null> {
      const [row] = await manager.query<UnitViewRow[]>(`select ${SELECT} from ${FROM} where u.id = $1`, [id]);
      return row ?? null;
    },
    list<Item>(query: UnitListQuery, present: (row: UnitViewRow) => Item) {
      const conditions = new Conditions()
        .andIf('u.site_id = $', query.siteId)
        .andIf('c.id = $', query.customerId)
        .andIf('u.refrigerant = $', query.refrigerant)
        .search(SEARCHED, query.search);
      const [, descending, column] = /^(-?)(tag|name)$/.exec(query.sort) ?? [];
      const sort = {
        columns: SORTS[column as 'tag' | 'name'],
        direction: descending ? ('desc' as const) : ('asc' as const),
      };
      const list = { select: SELECT, from: FROM, conditions, sort, page: query, of: cursorScope('units', query) };
      return readPage<UnitViewRow, Item>(manager, list, present);
    },
    /** What was made in the very transaction that made each unit: what its request asked for beside the unit. */
    async findMadeWith(ids: readonly string[]): Promise<Map<string, MadeWith>> {
      if (ids.length === 0) return new Map();
      const made = await manager.query<(MadeWith & { id: string })[]>(
        // Look-ups by key, one unit after the other: `offset 0` keeps the planner from meeting the whole log for it.
        `select w.id, array(select fc.id from (select x.id from unit_full_charge x where x.unit_id = w.id offset 0) fc
             cross join lateral (select j.recorded_at from journal_record j where j.noun = 'unitFullCharge'
               and j.subject_id = fc.id and j.version = 1 offset 0) j
             where j.recorded_at = made.recorded_at order by fc.id) as "fullChargeIds",
           array(select g.id from (select x.id, x.kind, x.recorded_at from entry_group x
               where x.unit_id = w.id offset 0) g
             where g.kind in ('factoryCharge', 'opening') and g.recorded_at = made.recorded_at) as "groupIds"
         from unnest($1::uuid[]) w(id)
         cross join lateral (select j.recorded_at from journal_record j
           where j.noun = 'unit' and j.subject_id = w.id and j.version = 1 offset 0) made`,
        [ids],
      );
      return new Map(made.map(({ id, fullChargeIds, groupIds }) => [id, { fullChargeIds, groupIds }]));
    },
  };
}

export interface MadeWith {
  fullChargeIds: string[];
  groupIds: string[];
}

export function presentFullCharge(row: FullChargeJson): NonNullable<Unit['fullCharge']> {
  return {
    id: row.id,
    refrigerant: row.refrigerant,
    massG: gramsOfMicrograms(BigInt(row.mass)),
    typed: { value: row.typedValue, unit: row.typedUnit },
    method: row.method,
    validFrom: new Date(row.validFrom).toISOString(),
    jobId: row.jobId,
    reason: row.reason,
  };
}
