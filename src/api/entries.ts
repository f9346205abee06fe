import {
  infiniteQueryOptions,
  type QueryClient,
  queryOptions,
  useMutation,
  useQueryClient,
} from '@tanstack/react-query';
import type { z } from 'zod';
import type { ENTRY_SORTS, EntryRow, entryFilters, GroupView } from '../../shared/entries/entry.schema.ts';
import type { answerRequest, entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { cylinderQueries } from './cylinders.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

type Filters = { [name in keyof z.input<typeof entryFilters>]?: z.input<typeof entryFilters>[name] | undefined };
export interface EntryListQuery extends Filters {
  sort?: (typeof ENTRY_SORTS)[number] | undefined;
}

export const entryQueries = {
  all: () => ['entries'] as const,
  list: (query: EntryListQuery = {}, limit = 50) =>
    infiniteQueryOptions({
      queryKey: [...entryQueries.all(), 'list', query, limit] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<EntryRow>>(`/entries${queryString({ ...query, limit, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** The whole group behind an entry: readings, statements, documents, who, why, hash. */
  group: (groupId: string) =>
    queryOptions({
      queryKey: [...entryQueries.all(), 'group', groupId] as const,
      queryFn: ({ signal }) => http.get<GroupView>(`/entry-groups/${groupId}`, { signal }),
    }),
};

/** Address of the log as CSV, with the same filters as the list. */
export const entriesCsvPath = (query: EntryListQuery): string =>
  `/api/v1/entries.csv${queryString({ ...query } as Record<string, string>)}`;

/** An entry moves mass: the log, every cylinder, unit, flag and the day are read again. */
export const refreshBooks = (client: QueryClient) =>
  Promise.all(
    [entryQueries.all(), cylinderQueries.all(), ['units'], ['flags'], ['today']].map((queryKey) =>
      client.invalidateQueries({ queryKey }),
    ),
  );

/** Posts a group. Its ids are made when the form opens, so that a second try cannot post twice. */
export function usePostGroup() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof entryGroupRequest>) => http.post<EntryGroupResponse>('/entry-groups', body),
    onSuccess: () => refreshBooks(client),
  });
}

/** Reverses a group and, with `replacement`, posts the right one in the same transaction. */
export function useReverseGroup(groupId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof reversalRequest>) =>
      http.post<EntryGroupResponse>(`/entry-groups/${groupId}/reversal`, body),
    onSuccess: () => refreshBooks(client),
  });
}

/** Says later how full a unit was left. A record of its own, no change of the group. */
export function useAnswerGroup(groupId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof answerRequest>) =>
      http.post<EntryGroupResponse>(`/entry-groups/${groupId}/answer`, body),
    onSuccess: () => refreshBooks(client),
  });
}
