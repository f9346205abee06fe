import type { EntityManager } from 'typeorm';
import type { Site, SiteListQuery } from '../../shared/sites/sites.schema.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { SiteEntity } from './site.entity.ts';

export type SiteRow = SiteEntity;

const BY_NAME: readonly SortColumn[] = [
  { sql: 's.name', type: 'text' },
  { sql: 's.id', type: 'uuid' },
];
const FROM = 'site s join customer c on c.firm_id = s.firm_id and c.id = s.customer_id';
const SELECT = `s.id, s.customer_id as "customerId", c.name as "customerName", s.name, s.address_lines as "addressLines",
  s.time_zone as "timeZone", s.altitude_m as "altitudeM", s.jurisdiction, s.version,
  (select count(*)::integer from unit u where u.firm_id = s.firm_id and u.site_id = s.id) as "unitCount"`;

export function sitesRepository(manager: EntityManager) {
  const rows = manager.getRepository(SiteEntity);
  return {
    find: (id: string): Promise<SiteRow | null> => rows.findOneBy({ id }),
    async insert(row: Omit<SiteRow, 'version'>): Promise<void> {
      await rows.insert(row);
    },
    async update({ firmId, id, name, addressLines, timeZone, altitudeM, jurisdiction }: SiteRow): Promise<void> {
      await rows.update({ firmId, id }, { name, addressLines, timeZone, altitudeM, jurisdiction });
    },
    async findView(id: string): Promise<Site | null> {
      const [row] = await manager.query<Site[]>(`select ${SELECT} from ${FROM} where s.id = $1`, [id]);
      return row ?? null;
    },
    list(query: SiteListQuery) {
      const conditions = new Conditions()
        .andIf('s.customer_id = $', query.customerId)
        .search(`concat_ws(' ', s.name, array_to_string(s.address_lines, ' '), c.name)`, query.search);
      const sort = { columns: BY_NAME, direction: query.sort === 'name' ? ('asc' as const) : ('desc' as const) };
      const list = { select: SELECT, from: FROM, conditions, sort, page: query, of: cursorScope('sites', query) };
      return readPage<Site, Site>(manager, list, presentSite);
    },
  };
}

export const presentSite = (row: Site): Site => ({
  id: row.id,
  customerId: row.customerId,
  customerName: row.customerName,
  name: row.name,
  addressLines: row.addressLines,
  timeZone: row.timeZone,
  altitudeM: row.altitudeM,
  jurisdiction: row.jurisdiction,
  unitCount: row.unitCount,
  version: row.version,
});
