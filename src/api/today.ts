import { queryOptions } from '@tanstack/react-query';
import type { Today } from '../../shared/today/today.schema.ts';
import { http } from './http.ts';

export const todayQueries = {
  /** Shares its answer with the band's mass on hand. */
  today: () =>
    queryOptions({
      queryKey: ['today'] as const,
      queryFn: ({ signal }) => http.get<Today>('/today', { signal }),
      staleTime: 30_000,
    }),
};
