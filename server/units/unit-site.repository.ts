import type { EntityManager } from 'typeorm';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import type { UnitSite } from '../../shared/unit-register/unit.schema.ts';
import { Conditions, cursorScope, readPage, type Sort } from '../lists/list-query.ts';
import { UnitSiteEntity } from './unit-site.entity.ts';

export type UnitSiteRow = UnitSiteEntity;
type UnitSiteViewRow = Omit<UnitSite, 'validFrom'> & { validFrom: Date };

const NEWEST_FIRST: Sort = {
  columns: [
    { sql: 'us.valid_from', type: 'timestamptz' },
    { sql: 'us.id', type: 'uuid' },
  ],
  direction: 'desc',
};
const SELECT = `us.id, us.unit_id as "unitId", us.site_id as "siteId", s.name as "siteName", c.id as "customerId",
  c.name as "customerName", us.valid_from as "validFrom"`;
const FROM = `unit_site us
  join site s on s.firm_id = us.firm_id and s.id = us.site_id
  join customer c on c.firm_id = s.firm_id and c.id = s.customer_id`;

/** Where a unit stood from when. Rows are only ever added. */
export function unitSiteRepository(manager: EntityManager) {
  const rows = manager.getRepository(UnitSiteEntity);
  return {
    async insert(row: UnitSiteRow): Promise<void> {
      await rows.insert(row);
    },
    /** Oldest first; of two from the same moment the later told one counts. */
    async ofUnit(unitId: string): Promise<UnitSiteRow[]> {
      return (await rows.findBy({ unitId })).toSorted(
        (a, b) => a.validFrom.getTime() - b.validFrom.getTime() || (a.id < b.id ? -1 : 1),
      );
    },
    async findView(id: string): Promise<UnitSite | null> {
      const [row] = await manager.query<UnitSiteViewRow[]>(`select ${SELECT} from ${FROM} where us.id = $1`, [id]);
      return row ? present(row) : null;
    },
    list(unitId: string, page: PageQuery) {
      const list = {
        select: SELECT,
        from: FROM,
        conditions: new Conditions().with('us.unit_id = $', unitId),
        sort: NEWEST_FIRST,
        page,
        of: cursorScope('unit-sites', { unitId }),
      };
      return readPage<UnitSiteViewRow, UnitSite>(manager, list, present);
    },
  };
}

const present = (row: UnitSiteViewRow): UnitSite => ({
  id: row.id,
  unitId: row.unitId,
  siteId: row.siteId,
  siteName: row.siteName,
  customerId: row.customerId,
  customerName: row.customerName,
  validFrom: row.validFrom.toISOString(),
});
