import { infiniteQueryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { createExportRequest, ExportFormat, ExportView, ExportWhat } from '../../shared/exports/export.schema.ts';
import { isExportOfRoles } from '../../shared/permissions/export-rights.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';
import { useSession } from './session.ts';

const LOOK_AGAIN_MS = 1_000;
const isUnderWay = ({ state }: ExportView): boolean => state === 'queued' || state === 'running';

export const exportQueries = {
  all: () => ['exports'] as const,
  /** Newest first; asked again every second while one is under way. */
  list: () =>
    infiniteQueryOptions({
      queryKey: [...exportQueries.all(), 'list'] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<ExportView>>(`/exports${queryString({ cursor: pageParam })}`, { signal }),
      ...keysetPages,
      refetchInterval: ({ state }) =>
        state.data?.pages.some(({ items }) => items.some(isUnderWay)) ? LOOK_AGAIN_MS : false,
    }),
};

/** The same id again asks for nothing new: what was begun is answered. */
export function useStartExport() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createExportRequest>) => http.post<ExportView>('/exports', body),
    onSuccess: () => client.invalidateQueries({ queryKey: exportQueries.all() }),
  });
}

export function useCancelExport() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => http.post<ExportView>(`/exports/${id}/cancel`),
    onSettled: () => client.invalidateQueries({ queryKey: exportQueries.all() }),
  });
}

export const exportFileHref = (id: string): string => `/api/v1/exports/${id}/file`;

/**
 * Where a screen leads to take out what it shows, as filtered: a link on it is all that it takes. Filters are those of
 * its list; the page of the exports shows them before anything is begun.
 */
export function exportPath(what: ExportWhat, filters: object = {}, format?: ExportFormat): string {
  const set = Object.fromEntries(
    Object.entries(filters).map(([name, value]) => [`filter.${name}`, value as string | undefined]),
  );
  return `/exports${queryString({ what, format, ...set })}`;
}

/** `exportPath` for who may take this out; null for everybody else, who is not led there. */
export function useExportPath(...[what, filters, format]: Parameters<typeof exportPath>): string | null {
  const session = useSession();
  if (!session) return null;
  const { permissions, roles } = session;
  const may = permissions.includes('exports:make') || isExportOfRoles(roles, what);
  return may ? exportPath(what, filters, format) : null;
}

/** What a link of `exportPath` asks for; null where it asks for nothing. */
export function exportAskedFor(
  search: URLSearchParams,
): { what: string; format: string | null; filters: Record<string, string> } | null {
  const what = search.get('what');
  if (what === null) return null;
  const filters = [...search].filter(([name]) => name.startsWith('filter.'));
  return {
    what,
    format: search.get('format'),
    filters: Object.fromEntries(filters.map(([name, value]) => [name.slice('filter.'.length), value])),
  };
}
