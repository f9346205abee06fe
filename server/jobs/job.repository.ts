import type { EntityManager } from 'typeorm';
import type { Job, JobListQuery } from '../../shared/jobs/jobs.schema.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { siteAt } from '../units/dated-site.ts';
import { JobEntity } from './job.entity.ts';

export type JobRow = JobEntity;
type JobViewRow = Omit<JobRow, 'firmId'> & { unitName: string; siteName: string };

const BY_OPENING: readonly SortColumn[] = [
  { sql: 'j.opened_at', type: 'timestamptz' },
  { sql: 'j.id', type: 'uuid' },
];
const FROM = `job j
  join unit u on u.firm_id = j.firm_id and u.id = j.unit_id
  join site s on s.firm_id = u.firm_id and s.id = ${siteAt('u.id', 'j.opened_at', 'u.site_id')}`;
const SELECT = `j.id, j.unit_id as "unitId", u.name as "unitName", s.name as "siteName", j.kind, j.title,
  j.opened_at as "openedAt", j.closed_at as "closedAt", j.version`;

export function jobsRepository(manager: EntityManager) {
  const rows = manager.getRepository(JobEntity);
  return {
    find: (id: string): Promise<JobRow | null> => rows.findOneBy({ id }),
    async insert(row: Omit<JobRow, 'version'>): Promise<void> {
      await rows.insert(row);
    },
    async update({ firmId, id, title, closedAt }: JobRow): Promise<void> {
      await rows.update({ firmId, id }, { title, closedAt });
    },
    async findView(id: string): Promise<Job | null> {
      const [row] = await manager.query<JobViewRow[]>(`select ${SELECT} from ${FROM} where j.id = $1`, [id]);
      return row ? presentJob(row) : null;
    },
    list(query: JobListQuery) {
      const conditions = new Conditions().andIf('j.unit_id = $', query.unitId);
      if (query.open !== undefined) conditions.and(`j.closed_at is ${query.open ? '' : 'not '}null`);
      const direction = query.sort === 'openedAt' ? ('asc' as const) : ('desc' as const);
      const sort = { columns: BY_OPENING, direction };
      const list = { select: SELECT, from: FROM, conditions, sort, page: query, of: cursorScope('jobs', query) };
      return readPage<JobViewRow, Job>(manager, list, presentJob);
    },
  };
}

const presentJob = (row: JobViewRow): Job => ({
  id: row.id,
  unitId: row.unitId,
  unitName: row.unitName,
  siteName: row.siteName,
  kind: row.kind,
  title: row.title,
  openedAt: row.openedAt.toISOString(),
  closedAt: row.closedAt?.toISOString() ?? null,
  version: row.version,
});
