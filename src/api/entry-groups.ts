import { queryOptions } from '@tanstack/react-query';
import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { http } from './http.ts';

export const entryGroupQueries = {
  /** What a posting of this body would do at this moment; nothing is kept. Asked anew for each body. */
  preview: (body: EntryGroupRequest | null) =>
    queryOptions({
      queryKey: ['entry-preview', body] as const,
      queryFn: ({ signal }) => http.post<EntryPreviewResponse>('/entry-groups/preview', body, { signal }),
      enabled: body !== null,
      // Without signal, or refused, the page says what it knows by itself; the posting will be judged anyway.
      retry: false,
      gcTime: 60_000,
    }),
};
