import { z } from 'zod';
import { id, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';

export const createCustomerRequest = z.strictObject({
  id,
  name: shortText(160),
  email: z.email().max(254).nullish(),
  phone: shortText(40).nullish(),
  note: shortText(2000).nullish(),
});
export const updateCustomerRequest = createCustomerRequest.omit({ id: true }).partial();
export const customer = z.strictObject({
  id,
  name: z.string(),
  email: z.string().nullable(),
  phone: z.string().nullable(),
  note: z.string().nullable(),
  siteCount: z.int(),
  version: z.int(),
});
export type Customer = z.output<typeof customer>;

export const CUSTOMER_SORTS = ['name', '-name'] as const;
export const customerListQuery = pageQuery.extend({
  sort: z.enum(CUSTOMER_SORTS).default('name'),
  /** Over the name. */
  search: searchText.optional(),
});
export type CustomerListQuery = z.output<typeof customerListQuery>;
export const customerPage = pageOf(customer);
