import type { EntityManager, QueryDeepPartialEntity } from 'typeorm';
import type { ChargeSheet } from '../../shared/charge-sheets/charge-sheet.schema.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import { Conditions, cursorScope, readPage, type Sort } from '../lists/list-query.ts';
import { ChargeSheetEntity } from './charge-sheet.entity.ts';

export type ChargeSheetRow = ChargeSheetEntity;
type ChargeSheetViewRow = Omit<ChargeSheetRow, 'firmId'> & { madeByName: string | null; recordHash: string | null };

const NEWEST_FIRST: Sort = {
  columns: [
    { sql: 's.made_at', type: 'timestamptz' },
    { sql: 's.id', type: 'uuid' },
  ],
  direction: 'desc',
};
const FROM = `charge_sheet s
  left join person p on p.id = s.made_by
  left join journal_record j on j.firm_id = s.firm_id and j.noun = 'chargeSheet' and j.subject_id = s.id and j.version = 1`;
const SELECT = `s.id, s.unit_id as "unitId", s.job_id as "jobId", s.made_at as "madeAt", s.made_by as "madeBy",
  p.name as "madeByName", s.request, s.result, s.manual_document as "manualDocument", s.manual_page as "manualPage",
  s.room, encode(j.content_hash, 'hex') as "recordHash"`;

export function chargeSheetsRepository(manager: EntityManager) {
  return {
    async insert(row: Omit<ChargeSheetRow, 'room'> & { room: ChargeSheet['room'] }): Promise<void> {
      await manager.getRepository(ChargeSheetEntity).insert(row as QueryDeepPartialEntity<ChargeSheetEntity>);
    },
    async findView(id: string): Promise<ChargeSheet | null> {
      const [row] = await manager.query<ChargeSheetViewRow[]>(`select ${SELECT} from ${FROM} where s.id = $1`, [id]);
      return row ? present(row) : null;
    },
    list(unitId: string, page: PageQuery) {
      const list = {
        select: SELECT,
        from: FROM,
        conditions: new Conditions().with('s.unit_id = $', unitId),
        sort: NEWEST_FIRST,
        page,
        of: cursorScope('charge-sheets', { unitId }),
      };
      return readPage<ChargeSheetViewRow, ChargeSheet>(manager, list, present);
    },
  };
}

const present = (row: ChargeSheetViewRow): ChargeSheet => ({
  id: row.id,
  unitId: row.unitId,
  madeAt: row.madeAt.toISOString(),
  madeBy: row.madeBy,
  madeByName: row.madeByName ?? '',
  request: row.request,
  result: row.result,
  manual: row.manualDocument === null ? null : { document: row.manualDocument, page: row.manualPage },
  room: row.room as ChargeSheet['room'],
  jobId: row.jobId,
  recordHash: row.recordHash,
});
