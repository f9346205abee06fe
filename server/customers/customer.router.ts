import {
  createCustomerRequest,
  customer,
  customerListQuery,
  customerPage,
  updateCustomerRequest,
} from '../../shared/customers/customers.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister } from '../registers/register-routes.ts';
import { createCustomer, getCustomer, listCustomers, updateCustomer } from './customer.service.ts';

export function customerRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Customers');
  addRegister(routes, {
    path: '/customers',
    words: { one: 'a customer', many: 'Customers, by name' },
    write: 'customers:write',
    create: createCustomerRequest,
    update: updateCustomerRequest,
    view: customer,
    query: customerListQuery,
    page: customerPage,
    list: (actor, query) => listCustomers(parts, actor, query),
    get: (actor, id) => getCustomer(parts, actor, id),
    make: (actor, request) => createCustomer(parts, actor, request),
    change: (actor, id, version, request) => updateCustomer(parts, actor, id, version, request),
  });
  return routes;
}
