import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  JournalState,
  newKeyRequest,
  SealRow,
  sealKeysResponse,
  VerificationProgress,
  VerificationResult,
} from '../../shared/proof/proof.schema.ts';
import type { KnownBefore } from '../../shared/proof/verify.mjs';
import { readPreferences } from '../lib/preferences.ts';
import { http, NetworkError, Problem, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export type SealKeys = z.output<typeof sealKeysResponse>;

export const journalQueries = {
  all: () => ['journal'] as const,
  state: () =>
    queryOptions({
      queryKey: [...journalQueries.all(), 'state'] as const,
      queryFn: ({ signal }) => http.get<JournalState>('/journal/state', { signal }),
    }),
  keys: () =>
    queryOptions({
      queryKey: [...journalQueries.all(), 'keys'] as const,
      queryFn: ({ signal }) => http.get<SealKeys>('/journal/keys', { signal }),
    }),
  seals: (limit = 20) =>
    infiniteQueryOptions({
      queryKey: [...journalQueries.all(), 'seals', limit] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<SealRow>>(`/journal/seals${queryString({ limit, cursor: pageParam })}`, { signal }),
      ...keysetPages,
    }),
};

export function useSealNow() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => http.post<SealRow>('/journal/seals'),
    onSuccess: () => client.invalidateQueries({ queryKey: journalQueries.all() }),
  });
}

export function useChangeKey() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof newKeyRequest>) => http.post<SealKeys>('/journal/keys', body),
    onSuccess: () => client.invalidateQueries({ queryKey: journalQueries.all() }),
  });
}

/**
 * Has the server check the whole log; `onProgress` hears how far it is.
 * @throws Problem, NetworkError
 */
export async function verifyLog(
  { keyFingerprint, knownHead }: KnownBefore,
  onProgress: (progress: VerificationProgress) => void,
  signal: AbortSignal,
): Promise<VerificationResult> {
  const head = knownHead ? `${knownHead.sequence}:${knownHead.hash}` : undefined;
  const response = await fetch(`/api/v1/journal/verification${queryString({ keyFingerprint, knownHead: head })}`, {
    headers: { 'Accept-Language': readPreferences().locale },
    credentials: 'same-origin',
    signal,
  });
  if (!response.ok || !response.body) {
    const body = (await response.json().catch(() => ({}))) as { code?: string; detail?: string };
    const message = body.detail ?? `${response.status} ${response.statusText}`;
    throw new Problem(response.status, body.code ?? '', message, [], response.headers.get('x-request-id'));
  }
  const reader = response.body.pipeThrough(new TextDecoderStream()).getReader();
  let rest = '';
  let last: unknown = null;
  for (let part = await reader.read(); !part.done; part = await reader.read()) {
    const lines = (rest + part.value).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) {
      last = JSON.parse(line);
      if (!isResult(last)) onProgress(last as VerificationProgress);
    }
  }
  if (!isResult(last)) throw new NetworkError('The connection broke before the check was finished');
  return last;
}

const isResult = (line: unknown): line is VerificationResult =>
  typeof line === 'object' && line !== null && 'result' in line;
