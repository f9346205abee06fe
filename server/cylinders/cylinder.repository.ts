import type { EntityManager } from 'typeorm';
import { cylinderLimit, heldOrMeant, pressureRatingHolds } from '../../shared/cylinder-fill/cylinder-limits.ts';
import type { FillJurisdiction } from '../../shared/cylinder-fill/filling-table.ts';
import type { Cylinder, CylinderListQuery } from '../../shared/cylinders/cylinder.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import type { StoredMassUnit } from '../../shared/units/stored-mass.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { insertRows } from '../registers/insert-rows.ts';
import { CylinderEntity } from './cylinder.entity.ts';
import { CylinderTareEntity } from './cylinder-tare.entity.ts';

export type CylinderRow = CylinderEntity;
export type CylinderTareRow = CylinderTareEntity;

/** What the database says of a cylinder; its limit and whether its rating holds follow from what is in it. */
export interface CylinderViewRow {
  id: string;
  tag: string;
  kind: Cylinder['kind'];
  refrigerant: string;
  contentState: Cylinder['contentState'];
  ownerKind: 'ours' | 'party' | 'customer';
  ownerId: string | null;
  tare: { mass: string; value: string; unit: StoredMassUnit };
  waterCapacity: string | null;
  stampedLimit: string | null;
  servicePressureKPaGauge: number | null;
  retestDue: string | null;
  heldBy: string | null;
  heldByName: string | null;
  batch: string | null;
  book: Record<string, string> | null;
  lastReading: { at: string; mass: string } | null;
  openWeighInGroupId: string | null;
  /** Whose rule its pressure is judged by. */
  jurisdiction: FillJurisdiction;
  version: number;
}

const FROM = 'cylinder c left join person h on h.id = c.held_by';
const SELECT = `c.id, c.tag, c.kind, c.refrigerant, c.content_state as "contentState", c.owner_kind as "ownerKind",
  coalesce(c.owner_party_id, c.owner_customer_id) as "ownerId",
  (select json_build_object('mass', t.mass_micrograms::text, 'value', t.typed_value, 'unit', t.typed_unit)
    from cylinder_tare t where t.firm_id = c.firm_id and t.cylinder_id = c.id
    order by t.valid_from desc, t.id desc limit 1) as tare,
  c.water_capacity_micrograms::text as "waterCapacity", c.stamped_limit_micrograms::text as "stampedLimit",
  c.service_pressure_kpa_gauge as "servicePressureKPaGauge", c.retest_due::text as "retestDue", c.held_by as "heldBy",
  h.name as "heldByName", c.batch, c.version, (select f.jurisdiction from firm f where f.id = c.firm_id) as jurisdiction,
  (select json_object_agg(b.refrigerant, b.mass_micrograms::text) from balance b
    where b.firm_id = c.firm_id and b.place = 'cylinder' and b.place_id = c.id and b.mass_micrograms <> 0) as book,
  (select json_build_object('at', r.read_at, 'mass', r.mass_micrograms::text) from reading r
    where r.firm_id = c.firm_id and r.cylinder_id = c.id and r.mode = 'gross'
      and not exists (select from entry_group x where x.firm_id = r.firm_id and x.reverses_group_id = r.group_id)
    order by r.read_at desc, r.sequence desc, (r.moment = 'after') desc limit 1) as "lastReading",
  (select g.id from reading r join entry_group g on g.firm_id = r.firm_id and g.id = r.group_id
    where r.firm_id = c.firm_id and r.cylinder_id = c.id and g.open_weigh_in
      and not exists (select from entry_group x where x.firm_id = g.firm_id and x.reverses_group_id = g.id)
      and not exists (select from entry_group k where k.firm_id = g.firm_id and k.closes_group_id = g.id
        and not exists (select from entry_group x where x.firm_id = k.firm_id and x.reverses_group_id = k.id))
    order by g.occurred_at desc limit 1) as "openWeighInGroupId"`;

const BY_TAG: readonly SortColumn[] = [
  { sql: 'c.tag', type: 'text' },
  { sql: 'c.id', type: 'uuid' },
];

export function cylindersRepository(manager: EntityManager) {
  const rows = manager.getRepository(CylinderEntity);
  return {
    find: (id: string): Promise<CylinderRow | null> => rows.findOneBy({ id }),
    insert: (...many: readonly Omit<CylinderRow, 'version'>[]): Promise<void> =>
      insertRows(manager, CylinderEntity, many),
    async update({ firmId, id, version: _version, ...facts }: CylinderRow): Promise<void> {
      await rows.update({ firmId, id }, facts);
    },
    addTare: (...many: readonly CylinderTareRow[]): Promise<void> => insertRows(manager, CylinderTareEntity, many),
    async findView(id: string): Promise<CylinderViewRow | null> {
      const [row] = await manager.query<CylinderViewRow[]>(`select ${SELECT} from ${FROM} where c.id = $1`, [id]);
      return row ?? null;
    },
    list<Item>(query: CylinderListQuery, present: (row: CylinderViewRow) => Item) {
      const conditions = new Conditions()
        .andIf('c.held_by = $', query.heldBy)
        .andIf('c.kind = $', query.kind)
        .andIf('c.refrigerant = $', query.refrigerant)
        .search(`concat_ws(' ', c.tag, c.batch)`, query.search);
      const sort = { columns: BY_TAG, direction: query.sort === 'tag' ? ('asc' as const) : ('desc' as const) };
      const list = { select: SELECT, from: FROM, conditions, sort, page: query, of: cursorScope('cylinders', query) };
      return readPage<CylinderViewRow, Item>(manager, list, present);
    },
  };
}

export function presentCylinder(row: CylinderViewRow): Cylinder {
  const byRefrigerant = Object.entries(row.book ?? {})
    .map(([refrigerant, mass]) => ({ refrigerant, massG: gramsOfMicrograms(BigInt(mass)) }))
    .sort((a, b) => (a.refrigerant < b.refrigerant ? -1 : 1));
  const held = byRefrigerant.filter(({ massG }) => massG > 0).map(({ refrigerant }) => refrigerant);
  const bigintOf = (text: string | null) => (text === null ? null : BigInt(text));
  const limit = cylinderLimit(
    {
      ...row,
      stampedLimitMicrograms: bigintOf(row.stampedLimit),
      waterCapacityMicrograms: bigintOf(row.waterCapacity),
    },
    held,
  );
  const content = Object.values(row.book ?? {}).reduce((sum, mass) => sum + BigInt(mass), 0n);
  return {
    id: row.id,
    tag: row.tag,
    kind: row.kind,
    refrigerant: row.refrigerant,
    contentState: row.contentState,
    owner: row.ownerKind === 'ours' ? { kind: 'ours' } : { kind: row.ownerKind, id: String(row.ownerId) },
    tareG: gramsOfMicrograms(BigInt(row.tare.mass)),
    tareTyped: { value: row.tare.value, unit: row.tare.unit },
    waterCapacityG: row.waterCapacity === null ? null : gramsOfMicrograms(BigInt(row.waterCapacity)),
    limitG: limit === null ? null : gramsOfMicrograms(limit),
    stampedLimitG: row.stampedLimit === null ? null : gramsOfMicrograms(BigInt(row.stampedLimit)),
    servicePressureKPaGauge: row.servicePressureKPaGauge,
    pressureRatingHolds: pressureRatingHolds(
      row.servicePressureKPaGauge,
      heldOrMeant(row.refrigerant, held),
      row.jurisdiction,
    ),
    retestDue: row.retestDue,
    heldBy: row.heldBy,
    heldByName: row.heldByName,
    batch: row.batch,
    contentG: gramsOfMicrograms(content),
    byRefrigerant,
    mixed: byRefrigerant.length > 1,
    lastWeighedAt: row.lastReading === null ? null : new Date(row.lastReading.at).toISOString(),
    lastReadingGrossG: row.lastReading === null ? null : gramsOfMicrograms(BigInt(row.lastReading.mass)),
    openWeighInGroupId: row.openWeighInGroupId,
    version: row.version,
  };
}
