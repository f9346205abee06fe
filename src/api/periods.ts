import { type QueryClient, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  Checklist,
  CloseResponse,
  carryRequest,
  closeRequest,
  PeriodsResponse,
  settleRequest,
} from '../../shared/periods/periods.schema.ts';
import { bookQueries } from './books.ts';
import { refreshBooks } from './entries.ts';
import { http, queryString } from './http.ts';

export const periodQueries = {
  all: () => ['periods'] as const,
  list: () =>
    queryOptions({
      queryKey: [...periodQueries.all(), 'list'] as const,
      queryFn: ({ signal }) => http.get<PeriodsResponse>('/periods', { signal }),
    }),
  /** What is open at the end of a month, and what became of it. */
  checklist: (month: string) =>
    queryOptions({
      queryKey: [...periodQueries.all(), 'checklist', month] as const,
      queryFn: ({ signal }) => http.get<Checklist>(`/periods/checklist${queryString({ month })}`, { signal }),
    }),
};

/** Month close posts and closes: books, months and the log are read again. */
const refreshPeriods = (client: QueryClient) =>
  Promise.all([
    client.invalidateQueries({ queryKey: periodQueries.all() }),
    client.invalidateQueries({ queryKey: bookQueries.all() }),
    refreshBooks(client),
  ]);

export function useSettleDifference() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof settleRequest>) => http.post<unknown>('/periods/settlements', body),
    onSuccess: () => refreshPeriods(client),
  });
}

export function useCarryItems() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof carryRequest>) => http.post<unknown>('/periods/carried', body),
    onSuccess: () => refreshPeriods(client),
  });
}

/** Signs a month off. The id is made when the page opens, so that a second try cannot close twice. */
export function useCloseMonth() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof closeRequest>) => http.post<CloseResponse>('/periods', body),
    onSuccess: () => refreshPeriods(client),
  });
}
