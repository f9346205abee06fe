import type { EntityManager } from 'typeorm';
import type { FlagListQuery, FlagRow } from '../../shared/entries/entry.schema.ts';
import { FLAG_LEVELS } from '../../shared/ledger/flag.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { type Labels, readLabels } from '../entries/place-labels.ts';
import { flagMassesG, flagMessage } from '../entries/posting-answer.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import type { FlagEntity } from './flag.entity.ts';

const SELECT = `f.id, f.code, f.subject_kind as "subjectKind", f.subject_id as "subjectId", f.group_id as "groupId",
  f.refrigerant, f.mass_micrograms::text as mass, f.figures, f.opened_at as "openedAt",
  f.opened_by_group_id as "openedBy", f.closed_at as "closedAt", f.closed_by_group_id as "closedBy"`;
type Row = Pick<FlagEntity, 'id' | 'code' | 'subjectKind' | 'subjectId' | 'groupId' | 'refrigerant' | 'figures'> & {
  mass: string | null;
  openedAt: Date;
  openedBy: string;
  closedAt: Date | null;
  closedBy: string | null;
};

const BY_OPENING: readonly SortColumn[] = [
  { sql: 'f.opened_at', type: 'timestamptz' },
  { sql: 'f.id', type: 'uuid' },
];

export function flagsRepository(manager: EntityManager, locale: Locale) {
  const present = async (rows: readonly Row[]): Promise<FlagRow[]> => {
    const labels = await readLabels(
      manager,
      rows.map(({ subjectId }) => subjectId),
    );
    return rows.map((row) => presentFlag(row, labels, locale));
  };
  return {
    async list(query: FlagListQuery) {
      const conditions = new Conditions()
        .andIf(`f.subject_kind = 'unit' and f.subject_id = $`, query.unitId)
        .andIf(`f.subject_kind = 'cylinder' and f.subject_id = $`, query.cylinderId)
        .andIf('f.subject_id = $', query.subjectId)
        .andIf('f.group_id = $', query.groupId);
      if (query.open !== undefined) conditions.and(`f.closed_at is ${query.open ? '' : 'not '}null`);
      const direction = query.sort === 'openedAt' ? ('asc' as const) : ('desc' as const);
      const sort = { columns: BY_OPENING, direction };
      const list = { select: SELECT, from: 'flag f', conditions, sort, page: query, of: cursorScope('flags', query) };
      const page = await readPage<Row, Row>(manager, list, (row) => row);
      return { ...page, items: await present(page.items) };
    },
    /** What asks somebody to look, dangers first. */
    async contradictions(limit: number): Promise<FlagRow[]> {
      const codes = Object.entries(FLAG_LEVELS).filter(([, level]) => level !== 'note');
      const dangers = codes.filter(([, level]) => level === 'danger').map(([code]) => code);
      const rows = await manager.query<Row[]>(
        `select ${SELECT} from flag f where f.closed_at is null and f.code = any ($1)
          order by f.code = any ($2) desc, f.opened_at desc, f.id desc limit $3`,
        [codes.map(([code]) => code), dangers, limit],
      );
      return present(rows);
    },
  };
}

function presentFlag(row: Row, labels: Labels, locale: Locale): FlagRow {
  const label = labels.get(row.subjectId) ?? '';
  return {
    id: row.id,
    code: row.code,
    level: FLAG_LEVELS[row.code],
    subject: { kind: row.subjectKind, id: row.subjectId, label },
    groupId: row.groupId,
    massG: row.mass === null ? null : gramsOfMicrograms(BigInt(row.mass)),
    refrigerant: row.refrigerant,
    massesG: flagMassesG(row),
    message: flagMessage(row, label, locale),
    openedAt: row.openedAt.toISOString(),
    openedBy: row.openedBy,
    closedAt: row.closedAt?.toISOString() ?? null,
    closedBy: row.closedBy,
  };
}
