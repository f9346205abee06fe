import {
  infiniteQueryOptions,
  type QueryClient,
  queryOptions,
  useMutation,
  useQueryClient,
} from '@tanstack/react-query';
import type { z } from 'zod';
import type { FlagRow } from '../../shared/entries/entry.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import type {
  addFullChargeRequest,
  addLineSetRequest,
  createUnitRequest,
  fullCharge,
  LineSet,
  UNIT_SORTS,
  Unit,
  updateUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { refreshBooks } from './entries.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface UnitFilters {
  search?: string | undefined;
  siteId?: string | undefined;
  customerId?: string | undefined;
  refrigerant?: string | undefined;
  sort?: (typeof UNIT_SORTS)[number] | undefined;
}

export const unitQueries = {
  all: () => ['units'] as const,
  list: (filters: UnitFilters = {}, limit = 50) =>
    infiniteQueryOptions({
      queryKey: [...unitQueries.all(), 'list', filters, limit] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Unit>>(`/units${queryString({ ...filters, limit, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  one: (id: string) =>
    queryOptions({
      queryKey: [...unitQueries.all(), id] as const,
      queryFn: ({ signal }) => http.get<Unit>(`/units/${id}`, { signal }),
    }),
  /** Newest first: the first is how it is piped now. */
  lineSets: (id: string) =>
    queryOptions({
      queryKey: [...unitQueries.all(), id, 'line-sets'] as const,
      queryFn: ({ signal }) => http.get<PageOf<LineSet>>(`/units/${id}/line-sets`, { signal }),
      select: (page) => page.items,
    }),
  fullCharges: (id: string) =>
    queryOptions({
      queryKey: [...unitQueries.all(), id, 'full-charges'] as const,
      queryFn: ({ signal }) => http.get<PageOf<z.output<typeof fullCharge>>>(`/units/${id}/full-charges`, { signal }),
      select: (page) => page.items,
    }),
  openFlags: (id: string) =>
    queryOptions({
      queryKey: ['flags', 'unit', id] as const,
      queryFn: ({ signal }) =>
        http.get<PageOf<FlagRow>>(`/flags${queryString({ unitId: id, open: true })}`, { signal }),
      select: (page) => page.items,
    }),
};

const refreshUnit = (client: QueryClient) =>
  Promise.all([
    client.invalidateQueries({ queryKey: unitQueries.all() }),
    client.invalidateQueries({ queryKey: ['flags'] }),
    client.invalidateQueries({ queryKey: ['today'] }),
  ]);

/** A unit, its full charge where it is known, and the entry with which its book begins: all or nothing. */
export function useCreateUnit() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createUnitRequest>) => http.post<Unit>('/units', body),
    onSuccess: () => Promise.all([refreshBooks(client), client.invalidateQueries({ queryKey: ['sites'] })]),
  });
}

export function useUpdateUnit({ id, version }: { id: string; version: number }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof updateUnitRequest>) => http.patch<Unit>(`/units/${id}`, body, { version }),
    onSuccess: (unit) => {
      client.setQueryData(unitQueries.one(id).queryKey, unit);
      return refreshUnit(client);
    },
  });
}

const CHANGE_PATHS = { site: 'sites', refrigerant: 'refrigerants', fullCharge: 'full-charges' } as const;

/**
 * What holds of the unit from a moment on; the same change again records nothing twice. What is on the screen is read
 * again by `useRefreshUnits`, once all changes of a form are recorded: until then a second try has to look the same.
 */
export function useChangeUnit(unitId: string) {
  return useMutation({
    mutationFn: ({ is, body }: { is: keyof typeof CHANGE_PATHS; body: object }) =>
      http.post<object>(`/units/${unitId}/${CHANGE_PATHS[is]}`, body),
  });
}

export function useRefreshUnits(): () => Promise<unknown> {
  const client = useQueryClient();
  return () => Promise.all([refreshBooks(client), client.invalidateQueries({ queryKey: ['sites'] })]);
}

/** A change of the line set is a new dated one; earlier ones stay. */
export function useAddLineSet(unitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof addLineSetRequest>) => http.post<LineSet>(`/units/${unitId}/line-sets`, body),
    onSuccess: () => refreshUnit(client),
  });
}

/** Later statements of this unit are judged again by it; the answer holds what that added. */
export function useAddFullCharge(unitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof addFullChargeRequest>) =>
      http.post<EntryGroupResponse>(`/units/${unitId}/full-charges`, body),
    onSuccess: () => refreshBooks(client),
  });
}
