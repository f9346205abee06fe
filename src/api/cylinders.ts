import {
  infiniteQueryOptions,
  type QueryClient,
  queryOptions,
  useMutation,
  useQueryClient,
} from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  addTareRequest,
  CYLINDER_SORTS,
  Cylinder,
  createCylinderRequest,
  cylinderKind,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import type { FlagRow, ReadingRow } from '../../shared/entries/entry.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { http, isStale, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface CylinderFilters {
  search?: string | undefined;
  refrigerant?: string | undefined;
  heldBy?: string | undefined;
  kind?: z.output<typeof cylinderKind> | undefined;
  sort?: (typeof CYLINDER_SORTS)[number] | undefined;
}

export const cylinderQueries = {
  all: () => ['cylinders'] as const,
  list: (filters: CylinderFilters = {}) =>
    infiniteQueryOptions({
      queryKey: [...cylinderQueries.all(), 'list', filters] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Cylinder>>(`/cylinders${queryString({ ...filters, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** For a choice: the first 200 by their tags. */
  choice: (filters: CylinderFilters = {}) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), 'choice', filters] as const,
      queryFn: ({ signal }) =>
        http.get<PageOf<Cylinder>>(`/cylinders${queryString({ ...filters, limit: 200 })}`, { signal }),
    }),
  openFlags: (id: string) =>
    queryOptions({
      queryKey: ['flags', 'cylinder', id] as const,
      queryFn: ({ signal }) =>
        http.get<PageOf<FlagRow>>(`/flags${queryString({ cylinderId: id, open: true })}`, { signal }),
      select: (page) => page.items,
    }),
  one: (id: string) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), id] as const,
      queryFn: ({ signal }) => http.get<Cylinder>(`/cylinders/${id}`, { signal }),
    }),
  /** Its scale readings, newest first. */
  readings: (id: string, limit = 200) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), id, 'readings', limit] as const,
      queryFn: ({ signal }) =>
        http.get<PageOf<ReadingRow>>(`/readings${queryString({ cylinderId: id, limit })}`, { signal }),
      select: (page) => page.items,
    }),
};

/** What shows a cylinder or its mass is read again. */
export const refreshCylinders = (client: QueryClient) =>
  Promise.all([
    client.invalidateQueries({ queryKey: cylinderQueries.all() }),
    client.invalidateQueries({ queryKey: ['flags'] }),
    client.invalidateQueries({ queryKey: ['today'] }),
  ]);

export function useCreateCylinder() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createCylinderRequest>) => http.post<Cylinder>('/cylinders', body),
    onSuccess: () => refreshCylinders(client),
  });
}

export function useUpdateCylinder({ id, version }: { id: string; version: number }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof updateCylinderRequest>) =>
      http.patch<Cylinder>(`/cylinders/${id}`, body, { version }),
    onSuccess: (cylinder) => {
      client.setQueryData(cylinderQueries.one(id).queryKey, cylinder);
      return refreshCylinders(client);
    },
    // Somebody was quicker: the next try starts from what stands now, and what was typed stays in its form.
    onError: (error) => (isStale(error) ? refreshCylinders(client) : undefined),
  });
}

/** A revised tare: later statements of this cylinder are judged again, and the answer holds what that added. */
export function useReviseTare(cylinderId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof addTareRequest>) =>
      http.post<EntryGroupResponse>(`/cylinders/${cylinderId}/tares`, body),
    onSuccess: () => Promise.all([refreshCylinders(client), client.invalidateQueries({ queryKey: ['entries'] })]),
  });
}
