import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type {
  Customer,
  CustomerListQuery,
  createCustomerRequest,
  updateCustomerRequest,
} from '../../shared/customers/customers.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import type { Facts } from '../journal/register-journal.ts';
import { changeRow, makeOnce, taken } from '../registers/register-rows.ts';
import { type CustomerRow, customersRepository, presentCustomer } from './customer.repository.ts';

const PERSONAL = ['name', 'email', 'phone', 'note'];
type CustomerFacts = { name: string; email: string | null; phone: string | null; note: string | null };
const factsOf = ({ name, email, phone, note }: CustomerFacts): Facts => ({ name, email, phone, note });

export function listCustomers(parts: Parts, actor: Actor, query: CustomerListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => customersRepository(manager).list(query));
}

export function getCustomer(parts: Parts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createCustomer(parts: Parts, actor: Actor, request: z.output<typeof createCustomerRequest>) {
  const { id, name, email = null, phone = null, note = null } = request;
  const facts = { name, email, phone, note };
  return makeOnce(
    parts,
    actor,
    { noun: 'customer', subjectId: id, facts: factsOf(facts), personal: PERSONAL },
    {},
    (manager) => customersRepository(manager).insert({ firmId: actor.firmId, id, ...facts }),
    (manager) => requireView(manager, id),
  );
}

export function updateCustomer(
  parts: Parts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateCustomerRequest>,
) {
  return changeRow<CustomerRow, Customer>(
    parts,
    actor,
    {
      noun: 'customer',
      id,
      version,
      personal: PERSONAL,
      references: {},
      find: (manager) => customersRepository(manager).find(id),
      factsOf,
      changed: (row) => ({
        ...row,
        name: taken(request.name, row.name),
        email: taken(request.email, row.email),
        phone: taken(request.phone, row.phone),
        note: taken(request.note, row.note),
      }),
      update: (manager, row) => customersRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

async function requireView(manager: EntityManager, id: string) {
  const found = await customersRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return presentCustomer(found);
}
