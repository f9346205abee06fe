import type { EntityManager } from 'typeorm';
import type { Customer, CustomerListQuery } from '../../shared/customers/customers.schema.ts';
import { Conditions, cursorScope, readPage, type Sort } from '../lists/list-query.ts';
import { CustomerEntity } from './customer.entity.ts';

export type CustomerRow = CustomerEntity;

const SORTS: Record<CustomerListQuery['sort'], Sort> = {
  name: { columns: byName(), direction: 'asc' },
  '-name': { columns: byName(), direction: 'desc' },
};
function byName(): Sort['columns'] {
  return [
    { sql: 'c.name', type: 'text' },
    { sql: 'c.id', type: 'uuid' },
  ];
}

const SELECT = `c.id, c.name, c.email, c.phone, c.note, c.version,
  (select count(*)::integer from site s where s.firm_id = c.firm_id and s.customer_id = c.id) as "siteCount"`;

export function customersRepository(manager: EntityManager) {
  const rows = manager.getRepository(CustomerEntity);
  return {
    find: (id: string): Promise<CustomerRow | null> => rows.findOneBy({ id }),
    async insert(row: Omit<CustomerRow, 'version'>): Promise<void> {
      await rows.insert(row);
    },
    async update({ firmId, id, name, email, phone, note }: CustomerRow): Promise<void> {
      await rows.update({ firmId, id }, { name, email, phone, note });
    },
    async findView(id: string): Promise<Customer | null> {
      const [row] = await manager.query<Customer[]>(`select ${SELECT} from customer c where c.id = $1`, [id]);
      return row ?? null;
    },
    list(query: CustomerListQuery) {
      const conditions = new Conditions().search('c.name', query.search);
      const of = cursorScope('customers', query);
      const list = { select: SELECT, from: 'customer c', conditions, sort: SORTS[query.sort], page: query, of };
      return readPage<Customer, Customer>(manager, list, presentCustomer);
    },
  };
}

export const presentCustomer = ({ id, name, email, phone, note, siteCount, version }: Customer): Customer => ({
  id,
  name,
  email,
  phone,
  note,
  siteCount,
  version,
});
