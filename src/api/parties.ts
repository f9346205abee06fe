import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { createPartyRequest, Party, partyKind, updatePartyRequest } from '../../shared/parties/parties.schema.ts';
import { http, isStale, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface PartyFilters {
  kind?: z.output<typeof partyKind> | undefined;
  search?: string | undefined;
  sort?: 'name' | '-name' | undefined;
}

export const partyQueries = {
  all: () => ['parties'] as const,
  list: (filters: PartyFilters = {}) =>
    infiniteQueryOptions({
      queryKey: [...partyQueries.all(), 'list', filters] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Party>>(`/parties${queryString({ ...filters, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** For a choice: the first 200 of a kind, by name. */
  choice: (kind: z.output<typeof partyKind>) =>
    queryOptions({
      queryKey: [...partyQueries.all(), 'choice', kind] as const,
      queryFn: ({ signal }) => http.get<PageOf<Party>>(`/parties${queryString({ kind, limit: 200 })}`, { signal }),
      select: (page) => page.items,
      staleTime: 60_000,
    }),
  one: (id: string) =>
    queryOptions({
      queryKey: [...partyQueries.all(), id] as const,
      queryFn: ({ signal }) => http.get<Party>(`/parties/${id}`, { signal }),
      staleTime: 60_000,
    }),
};

export function useCreateParty() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createPartyRequest>) => http.post<Party>('/parties', body),
    onSuccess: () => client.invalidateQueries({ queryKey: partyQueries.all() }),
  });
}

export function useUpdateParty({ id, version }: { id: string; version: number }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof updatePartyRequest>) => http.patch<Party>(`/parties/${id}`, body, { version }),
    onSuccess: () => client.invalidateQueries({ queryKey: partyQueries.all() }),
    onError: (error) => (isStale(error) ? client.invalidateQueries({ queryKey: partyQueries.all() }) : undefined),
  });
}
