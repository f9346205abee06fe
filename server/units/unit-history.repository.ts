import type { EntityManager } from 'typeorm';
import type { StoredChargeBasis } from '../../shared/charge-sheets/charge-sheet.schema.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import type { LineSet, Unit } from '../../shared/unit-register/unit.schema.ts';
import { Conditions, cursorScope, readPage, type Sort } from '../lists/list-query.ts';
import { insertRows } from '../registers/insert-rows.ts';
import { ChargeBasisEntity } from './charge-basis.entity.ts';
import { LineSetEntity } from './line-set.entity.ts';
import { FULL_CHARGE_JSON, type FullChargeJson, presentFullCharge } from './unit.repository.ts';
import { UnitFullChargeEntity } from './unit-full-charge.entity.ts';
import { UnitRefrigerantEntity } from './unit-refrigerant.entity.ts';
import { UnitSiteEntity } from './unit-site.entity.ts';

export type FullChargeRow = UnitFullChargeEntity;
export type UnitRefrigerantRow = UnitRefrigerantEntity;
export type LineSetRow = LineSetEntity;
export type ChargeBasisRow = ChargeBasisEntity;

const newestFirst = (alias: string): Sort => ({
  columns: [
    { sql: `${alias}.valid_from`, type: 'timestamptz' },
    { sql: `${alias}.id`, type: 'uuid' },
  ],
  direction: 'desc',
});

/** What holds from a day on. Rows are only ever added. */
export function unitHistoryRepository(manager: EntityManager) {
  return {
    addRefrigerant: (...many: readonly UnitRefrigerantRow[]) => insertRows(manager, UnitRefrigerantEntity, many),
    addSite: (...many: readonly UnitSiteEntity[]) => insertRows(manager, UnitSiteEntity, many),
    addFullCharge: (...many: readonly FullChargeRow[]) => insertRows(manager, UnitFullChargeEntity, many),
    async addLineSet(row: LineSetRow): Promise<void> {
      await manager.getRepository(LineSetEntity).insert(row);
    },
    async addChargeBasis(row: ChargeBasisRow): Promise<void> {
      await manager.getRepository(ChargeBasisEntity).insert(row);
    },
    async findSiteZones(siteIds: readonly string[]): Promise<Map<string, string>> {
      const rows = await manager.query<{ id: string; zone: string }[]>(
        'select id, time_zone as zone from site where id = any ($1::uuid[])',
        [[...new Set(siteIds)]],
      );
      return new Map(rows.map(({ id, zone }) => [id, zone]));
    },
    async refrigerantsOf(unitId: string): Promise<UnitRefrigerantRow[]> {
      const rows = await manager.getRepository(UnitRefrigerantEntity).findBy({ unitId });
      return rows.toSorted((a, b) => a.validFrom.getTime() - b.validFrom.getTime());
    },
    listFullCharges(unitId: string, page: PageQuery) {
      const list = {
        select: `${FULL_CHARGE_JSON} as "fullCharge"`,
        from: 'unit_full_charge fc',
        conditions: new Conditions().with('fc.unit_id = $', unitId),
        sort: newestFirst('fc'),
        page,
        of: cursorScope('full-charges', { unitId }),
      };
      return readPage<{ fullCharge: FullChargeJson }, NonNullable<Unit['fullCharge']>>(manager, list, (row) =>
        presentFullCharge(row.fullCharge),
      );
    },
    listLineSets(unitId: string, page: PageQuery) {
      const list = {
        select: 'l.id, l.unit_id as "unitId", l.valid_from as "validFrom", l.branches, l.note',
        from: 'line_set l',
        conditions: new Conditions().with('l.unit_id = $', unitId),
        sort: newestFirst('l'),
        page,
        of: cursorScope('line-sets', { unitId }),
      };
      return readPage<LineSetRow, LineSet>(manager, list, presentLineSet);
    },
    listChargeBases(unitId: string, page: PageQuery) {
      const list = {
        select: 'b.id, b.unit_id as "unitId", b.valid_from as "validFrom", b.basis, b.document, b.page, b.note',
        from: 'charge_basis b',
        conditions: new Conditions().with('b.unit_id = $', unitId),
        sort: newestFirst('b'),
        page,
        of: cursorScope('charge-bases', { unitId }),
      };
      return readPage<ChargeBasisRow, StoredChargeBasis>(manager, list, presentChargeBasis);
    },
    async findLineSet(id: string): Promise<LineSet | null> {
      const row = await manager.getRepository(LineSetEntity).findOneBy({ id });
      return row && presentLineSet(row);
    },
    async findChargeBasis(id: string): Promise<StoredChargeBasis | null> {
      const row = await manager.getRepository(ChargeBasisEntity).findOneBy({ id });
      return row && presentChargeBasis(row);
    },
  };
}

const presentLineSet = (row: LineSetRow): LineSet => ({
  id: row.id,
  unitId: row.unitId,
  validFrom: row.validFrom.toISOString(),
  branches: row.branches,
  note: row.note,
});

const presentChargeBasis = (row: ChargeBasisRow): StoredChargeBasis => ({
  id: row.id,
  unitId: row.unitId,
  validFrom: row.validFrom.toISOString(),
  basis: row.basis,
  manual: { document: row.document, page: row.page },
  note: row.note,
});
