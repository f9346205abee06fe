import { queryOptions } from '@tanstack/react-query';
import type { z } from 'zod';
import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import { http } from './http.ts';

/** A group to post, or a group that is withdrawn with what takes its place. */
export type ToPreview =
  | { is: 'group'; body: z.input<typeof entryGroupRequest> }
  | { is: 'reversal'; groupId: string; body: z.input<typeof reversalRequest> };

export const previewQueries = {
  /** What posting this would do. Nothing is stored; another body is another question. */
  of: (asked: ToPreview | null) =>
    queryOptions({
      queryKey: ['entry-preview', asked] as const,
      queryFn: ({ signal }) =>
        asked === null
          ? Promise.reject(new Error('nothing to ask'))
          : http.post<EntryPreviewResponse>(
              asked.is === 'group' ? '/entry-groups/preview' : `/entry-groups/${asked.groupId}/reversal/preview`,
              asked.body,
              { signal },
            ),
      enabled: asked !== null,
      retry: false,
      gcTime: 0,
      staleTime: 0,
    }),
};
