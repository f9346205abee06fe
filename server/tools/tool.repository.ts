import type { EntityManager } from 'typeorm';
import type { Tool, ToolListQuery } from '../../shared/tools/tools.schema.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { ToolEntity } from './tool.entity.ts';

export type ToolRow = ToolEntity;
type ToolViewRow = Omit<ToolRow, 'firmId'> & { heldByName: string | null };

const BY_NAME: readonly SortColumn[] = [
  { sql: 't.name', type: 'text' },
  { sql: 't.id', type: 'uuid' },
];
const FROM = 'tool t left join person h on h.id = t.held_by';
const SELECT = `t.id, t.kind, t.name, t.serial, t.resolution_g as "resolutionG", t.repeatability_g as "repeatabilityG",
  t.span_error_relative as "spanErrorRelative", t.offset_g as "offsetG", t.made_on::text as "madeOn",
  t.last_checked_on::text as "lastCheckedOn", t.held_by as "heldBy", h.name as "heldByName", t.version`;

export function toolsRepository(manager: EntityManager) {
  const rows = manager.getRepository(ToolEntity);
  return {
    find: (id: string): Promise<ToolRow | null> => rows.findOneBy({ id }),
    async insert(row: Omit<ToolRow, 'version'>): Promise<void> {
      await rows.insert(row);
    },
    async update({ firmId, id, kind: _kind, version: _version, ...facts }: ToolRow): Promise<void> {
      await rows.update({ firmId, id }, facts);
    },
    async findView(id: string): Promise<Tool | null> {
      const [row] = await manager.query<ToolViewRow[]>(`select ${SELECT} from ${FROM} where t.id = $1`, [id]);
      return row ? presentTool(row) : null;
    },
    list(query: ToolListQuery) {
      const conditions = new Conditions()
        .andIf('t.kind = $', query.kind)
        .andIf('t.held_by = $', query.heldBy)
        .search(`concat_ws(' ', t.name, t.serial)`, query.search);
      const sort = { columns: BY_NAME, direction: query.sort === 'name' ? ('asc' as const) : ('desc' as const) };
      const list = { select: SELECT, from: FROM, conditions, sort, page: query, of: cursorScope('tools', query) };
      return readPage<ToolViewRow, Tool>(manager, list, presentTool);
    },
  };
}

function presentTool(row: ToolViewRow): Tool {
  return {
    id: row.id,
    kind: row.kind,
    name: row.name,
    serial: row.serial,
    scale: scaleOf(row),
    madeOn: row.madeOn,
    lastCheckedOn: row.lastCheckedOn,
    heldBy: row.heldBy,
    heldByName: row.heldByName,
    version: row.version,
  };
}

export function scaleOf(row: Pick<ToolRow, 'resolutionG' | 'repeatabilityG' | 'spanErrorRelative' | 'offsetG'>) {
  if (row.resolutionG === null) return null;
  return {
    resolutionG: row.resolutionG,
    repeatabilityG: row.repeatabilityG ?? 0,
    spanErrorRelative: row.spanErrorRelative ?? 0,
    offsetG: row.offsetG ?? 0,
  };
}
