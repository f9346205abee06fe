import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  createdToken,
  createTokenRequest,
  Invitation,
  inviteRequest,
  Person,
  PersonalToken,
  SentInvitation,
  updatePersonRequest,
} from '../../shared/people/people.schema.ts';
import { http, isStale } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export const peopleQueries = {
  all: () => ['people'] as const,
  /** Everybody, for lists and choices: a firm has tens of people, not thousands. */
  everybody: () =>
    queryOptions({
      queryKey: [...peopleQueries.all(), 'everybody'] as const,
      queryFn: ({ signal }) => http.get<PageOf<Person>>('/people?limit=200', { signal }),
      select: (page) => page.items,
      staleTime: 60_000,
    }),
  invitations: () =>
    infiniteQueryOptions({
      queryKey: ['invitations'] as const,
      queryFn: ({ pageParam, signal }) =>
        http.get<PageOf<Invitation>>(
          `/invitations${pageParam === null ? '' : `?cursor=${encodeURIComponent(pageParam)}`}`,
          { signal },
        ),
      ...keysetPages,
    }),
  tokens: () =>
    queryOptions({
      queryKey: ['tokens'] as const,
      queryFn: ({ signal }) => http.get<PageOf<PersonalToken>>('/tokens', { signal }),
      select: (page) => page.items,
    }),
};

export function useUpdatePerson() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({
      id,
      version,
      change,
    }: {
      id: string;
      version: number;
      change: z.input<typeof updatePersonRequest>;
    }) => http.patch<Person>(`/people/${id}`, change, { version }),
    onSuccess: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: peopleQueries.all() }),
        client.invalidateQueries({ queryKey: ['session'] }), // it may have been oneself
      ]),
    onError: (error) => (isStale(error) ? client.invalidateQueries({ queryKey: peopleQueries.all() }) : undefined),
  });
}

export function useInvite() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof inviteRequest>) => http.post<SentInvitation>('/invitations', body),
    onSuccess: () => client.invalidateQueries({ queryKey: peopleQueries.invitations().queryKey }),
  });
}

export function useSendInvitationAgain() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => http.post<SentInvitation>(`/invitations/${id}/mail`),
    onSuccess: () => client.invalidateQueries({ queryKey: peopleQueries.invitations().queryKey }),
  });
}

export function useWithdrawInvitation() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => http.delete<void>(`/invitations/${id}`),
    onSuccess: () => client.invalidateQueries({ queryKey: peopleQueries.invitations().queryKey }),
  });
}

export function useCreateToken() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createTokenRequest>) => http.post<z.output<typeof createdToken>>('/tokens', body),
    onSuccess: () => client.invalidateQueries({ queryKey: peopleQueries.tokens().queryKey }),
  });
}

export function useRevokeToken() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => http.delete<void>(`/tokens/${id}`),
    onSuccess: () => client.invalidateQueries({ queryKey: peopleQueries.tokens().queryKey }),
  });
}
