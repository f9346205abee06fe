import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { createSiteRequest, Site, updateSiteRequest } from '../../shared/sites/sites.schema.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface SiteFilters {
  search?: string | undefined;
  customerId?: string | undefined;
  sort?: 'name' | '-name' | undefined;
}

export const siteQueries = {
  all: () => ['sites'] as const,
  list: (filters: SiteFilters = {}) =>
    infiniteQueryOptions({
      queryKey: [...siteQueries.all(), 'list', filters] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Site>>(`/sites${queryString({ ...filters, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** For a choice: the first 200 by name. */
  choice: () =>
    queryOptions({
      queryKey: [...siteQueries.all(), 'choice'] as const,
      queryFn: ({ signal }) => http.get<PageOf<Site>>(`/sites${queryString({ limit: 200 })}`, { signal }),
      select: (page) => page.items,
      staleTime: 60_000,
    }),
  one: (id: string) =>
    queryOptions({
      queryKey: [...siteQueries.all(), id] as const,
      queryFn: ({ signal }) => http.get<Site>(`/sites/${id}`, { signal }),
    }),
};

export function useCreateSite() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createSiteRequest>) => http.post<Site>('/sites', body),
    onSuccess: () =>
      Promise.all([siteQueries.all(), ['customers']].map((queryKey) => client.invalidateQueries({ queryKey }))),
  });
}

export function useUpdateSite({ id, version }: { id: string; version: number }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof updateSiteRequest>) => http.patch<Site>(`/sites/${id}`, body, { version }),
    onSuccess: () =>
      Promise.all([siteQueries.all(), ['units']].map((queryKey) => client.invalidateQueries({ queryKey }))),
  });
}
