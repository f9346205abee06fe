import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { http } from './http.ts';

const LOOK_AGAIN_MS = 700;
export const isAtWork = ({ state }: ImportView): boolean => state === 'checking' || state === 'running';

export const importQueries = {
  /** Asked again while the server is at work on it. */
  one: (id: string) =>
    queryOptions({
      queryKey: ['imports', id] as const,
      queryFn: ({ signal }) => http.get<ImportView>(`/imports/${id}`, { signal }),
      refetchInterval: ({ state }) => (state.data && isAtWork(state.data) ? LOOK_AGAIN_MS : false),
      retry: false,
      // What the server says of a file is never old news, and a file that it forgot is gone.
      staleTime: 0,
    }),
};

/** `kind` stands before the file: the server reads a form in its order. */
export function useReadFile() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ kind, file }: { kind: ImportKind; file: File }) => {
      const form = new FormData();
      form.set('kind', kind);
      form.set('file', file, file.name);
      return http.post<ImportView>('/imports', form);
    },
    onSuccess: (view) => client.setQueryData(importQueries.one(view.id).queryKey, view),
  });
}

export function useCheckImport(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: CheckImportRequest) => http.post<ImportView>(`/imports/${id}/check`, body),
    onSuccess: (view) => client.setQueryData(importQueries.one(id).queryKey, view),
  });
}

export function useRunImport(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => http.post<ImportView>(`/imports/${id}/run`),
    onSuccess: (view) => client.setQueryData(importQueries.one(id).queryKey, view),
  });
}

export function useCancelImport(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => http.post<ImportView>(`/imports/${id}/cancel`),
    onSuccess: (view) => client.setQueryData(importQueries.one(id).queryKey, view),
  });
}

/** What was brought in shows everywhere. */
export function useRefreshAfterImport() {
  const client = useQueryClient();
  return () =>
    client.invalidateQueries({ predicate: ({ queryKey }) => queryKey[0] !== 'imports' && queryKey[0] !== 'session' });
}

export const importErrorsHref = (id: string): string => `/api/v1/imports/${id}/errors.csv`;
