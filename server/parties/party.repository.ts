import type { EntityManager } from 'typeorm';
import type { Party, PartyListQuery } from '../../shared/parties/parties.schema.ts';
import { Conditions, cursorScope, readPage, type SortColumn } from '../lists/list-query.ts';
import { PartyEntity } from './party.entity.ts';

export type PartyRow = PartyEntity;

const BY_NAME: readonly SortColumn[] = [
  { sql: 'p.name', type: 'text' },
  { sql: 'p.id', type: 'uuid' },
];
const SELECT = 'p.id, p.kind, p.name, p.note, p.version';

export function partiesRepository(manager: EntityManager) {
  const rows = manager.getRepository(PartyEntity);
  return {
    find: (id: string): Promise<PartyRow | null> => rows.findOneBy({ id }),
    async insert(row: Omit<PartyRow, 'version'>): Promise<void> {
      await rows.insert(row);
    },
    async update({ firmId, id, name, note }: PartyRow): Promise<void> {
      await rows.update({ firmId, id }, { name, note });
    },
    list(query: PartyListQuery) {
      const conditions = new Conditions().andIf('p.kind = $', query.kind).search('p.name', query.search);
      const sort = { columns: BY_NAME, direction: query.sort === 'name' ? ('asc' as const) : ('desc' as const) };
      const list = {
        select: SELECT,
        from: 'party p',
        conditions,
        sort,
        page: query,
        of: cursorScope('parties', query),
      };
      return readPage<Party, Party>(manager, list, presentParty);
    },
  };
}

export const presentParty = ({ id, kind, name, note, version }: Party): Party => ({ id, kind, name, note, version });
