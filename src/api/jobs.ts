import { queryOptions } from '@tanstack/react-query';
import type { Job } from '../../shared/jobs/jobs.schema.ts';
import { http, queryString } from './http.ts';
import type { PageOf } from './page.ts';

export const jobQueries = {
  all: () => ['jobs'] as const,
  /** A unit's jobs that are not closed, newest first. */
  openOf: (unitId: string) =>
    queryOptions({
      queryKey: [...jobQueries.all(), 'open', unitId] as const,
      queryFn: ({ signal }) =>
        http.get<PageOf<Job>>(`/jobs${queryString({ unitId, open: 'true', limit: 50 })}`, { signal }),
      select: (page) => page.items,
      enabled: unitId !== '',
    }),
};
