import { queryOptions } from '@tanstack/react-query';
import type { z } from 'zod';
import type { Cylinder } from '../../shared/cylinders/cylinder.schema.ts';
import type { entryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { cylinderQueries } from './cylinders.ts';
import { http, queryString } from './http.ts';
import type { PageOf } from './page.ts';

/** Stands for the shop where a person's id would stand. */
export const IN_THE_SHOP = 'nobody';

export const stockTakeQueries = {
  /** Every cylinder that this person holds, or nobody, by tag: all pages, because a sheet that ends early misleads. */
  heldBy: (holder: string) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), 'held', holder] as const,
      queryFn: async ({ signal }) => {
        const heldBy = holder === IN_THE_SHOP ? undefined : holder;
        const held: Cylinder[] = [];
        let cursor: string | null = null;
        do {
          const page: PageOf<Cylinder> = await http.get(`/cylinders${queryString({ heldBy, limit: 200, cursor })}`, {
            signal,
          });
          held.push(...page.items.filter((cylinder) => heldBy !== undefined || cylinder.heldBy === null));
          cursor = page.nextCursor;
        } while (cursor !== null);
        return held;
      },
    }),
  /** What the QR code on a tag holds. */
  tagAddress: (cylinderId: string) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), cylinderId, 'tag'] as const,
      queryFn: ({ signal }) => http.get<{ address: string }>(`/cylinders/${cylinderId}/tag`, { signal }),
      staleTime: Number.POSITIVE_INFINITY,
    }),
};

/** One weighing of a sheet. The same ids again answer what was posted. */
export const postWeighing = (body: z.input<typeof entryGroupRequest>) =>
  http.post<EntryGroupResponse>('/entry-groups', body);
