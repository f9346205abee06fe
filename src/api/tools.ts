import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { createToolRequest, Tool, toolKind, updateToolRequest } from '../../shared/tools/tools.schema.ts';
import { http, isStale, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface ToolFilters {
  kind?: z.output<typeof toolKind> | undefined;
  heldBy?: string | undefined;
  search?: string | undefined;
  sort?: 'name' | '-name' | undefined;
}

export const toolQueries = {
  all: () => ['tools'] as const,
  list: (filters: ToolFilters = {}) =>
    infiniteQueryOptions({
      queryKey: [...toolQueries.all(), 'list', filters] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Tool>>(`/tools${queryString({ ...filters, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
  /** For a choice: the first 200 of a kind, by name. */
  choice: (kind: z.output<typeof toolKind>) =>
    queryOptions({
      queryKey: [...toolQueries.all(), 'choice', kind] as const,
      queryFn: ({ signal }) => http.get<PageOf<Tool>>(`/tools${queryString({ kind, limit: 200 })}`, { signal }),
      select: (page) => page.items,
      staleTime: 60_000,
    }),
};

export function useCreateTool() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createToolRequest>) => http.post<Tool>('/tools', body),
    onSuccess: () => client.invalidateQueries({ queryKey: toolQueries.all() }),
  });
}

export function useUpdateTool({ id, version }: { id: string; version: number }) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof updateToolRequest>) => http.patch<Tool>(`/tools/${id}`, body, { version }),
    onSuccess: () => client.invalidateQueries({ queryKey: toolQueries.all() }),
    onError: (error) => (isStale(error) ? client.invalidateQueries({ queryKey: toolQueries.all() }) : undefined),
  });
}
