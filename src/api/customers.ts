import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { Customer, createCustomerRequest } from '../../shared/customers/customers.schema.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface CustomerFilters {
  search?: string | undefined;
  sort?: 'name' | '-name' | undefined;
}

export const customerQueries = {
  all: () => ['customers'] as const,
  list: (filters: CustomerFilters = {}) =>
    infiniteQueryOptions({
      queryKey: [...customerQueries.all(), 'list', filters] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Customer>>(`/customers${queryString({ ...filters, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** For a choice: the first 200 by name. */
  choice: () =>
    queryOptions({
      queryKey: [...customerQueries.all(), 'choice'] as const,
      queryFn: ({ signal }) => http.get<PageOf<Customer>>(`/customers${queryString({ limit: 200 })}`, { signal }),
      select: (page) => page.items,
      staleTime: 60_000,
    }),
  one: (id: string) =>
    queryOptions({
      queryKey: [...customerQueries.all(), id] as const,
      queryFn: ({ signal }) => http.get<Customer>(`/customers/${id}`, { signal }),
    }),
};

export function useCreateCustomer() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createCustomerRequest>) => http.post<Customer>('/customers', body),
    onSuccess: () => client.invalidateQueries({ queryKey: customerQueries.all() }),
  });
}
