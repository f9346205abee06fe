import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { redirect } from 'react-router-dom';
import type { z } from 'zod';
import type { invitationPreview } from '../../shared/people/people.schema.ts';
import type { Preferences, Session } from '../../shared/session/session.schema.ts';
import type { Today } from '../../shared/today/today.schema.ts';
import { forgetAllDrafts } from '../lib/draft.ts';
import { changePreferences } from '../lib/preferences.ts';
import { http, Problem } from './http.ts';
import { queryClient } from './query-client.ts';
import { todayQueries } from './today.ts';

type InvitationPreview = z.output<typeof invitationPreview>;

export const sessionQueries = {
  /** The session, or null for someone who is not signed in. */
  current: () =>
    queryOptions({
      queryKey: ['session'] as const,
      queryFn: async ({ signal }): Promise<Session | null> => {
        try {
          const session = await http.get<Session | undefined>('/session', { signal, allowSignedOut: true });
          if (session) changePreferences(session.person.preferences);
          return session ?? null;
        } catch (error) {
          if (error instanceof Problem && error.status === 401) return null;
          throw error;
        }
      },
      staleTime: 5 * 60_000,
      retry: false,
    }),
};

/** Undefined while it is not known yet (or the server cannot be asked), null when signed out. */
export function useSession(): Session | null | undefined {
  return useQuery(sessionQueries.current()).data;
}

export function usePermission(permission: string): boolean {
  return useSession()?.permissions.includes(permission) ?? false;
}

/** For loaders of pages that need a person: the session, else a detour through sign-in that comes back here. */
export async function requireSession(request: Request): Promise<Session> {
  const session = await queryClient.ensureQueryData(sessionQueries.current());
  if (!session) throw redirect(signInPath(new URL(request.url)));
  return session;
}

export function signInPath(from: { pathname: string; search: string }): string {
  const place = from.pathname + from.search;
  return place === '/' ? '/sign-in' : `/sign-in?to=${encodeURIComponent(place)}`;
}

/** Only a path of our own is followed after sign-in: `//elsewhere` and `/\elsewhere` are addresses of other sites. */
export function placeAfterSignIn(to: string | null): string {
  return to && /^\/(?![/\\])/.test(to) ? to : '/';
}

/** The firm's mass on hand for the band; shares its answer with the Today page. */
export function useOnHand(): Today['onHand'] | undefined {
  const signedIn = useSession() != null;
  return useQuery({ ...todayQueries.today(), select: (today) => today.onHand, enabled: signedIn }).data;
}

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { email: string; password: string }) =>
      http.post<Session>('/session', body, { allowSignedOut: true }),
    onSuccess: (session) => {
      client.clear(); // nothing of an earlier person on this phone is shown to the next
      client.setQueryData(sessionQueries.current().queryKey, session);
      changePreferences(session.person.preferences);
    },
  });
}

export function useSignOut() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ everywhere }: { everywhere: boolean }) =>
      http.delete<void>(everywhere ? '/session/everywhere' : '/session', { allowSignedOut: true }),
    onSuccess: () => {
      client.clear();
      client.setQueryData(sessionQueries.current().queryKey, null);
      forgetAllDrafts();
    },
  });
}

export function useChooseFirm() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (firmId: string) => http.put<Session>('/session/firm', { firmId }),
    onSuccess: (session) => {
      client.clear();
      client.setQueryData(sessionQueries.current().queryKey, session);
    },
  });
}

export function useAskForPasswordReset() {
  return useMutation({ mutationFn: (email: string) => http.post<void>('/session/password-reset', { email }) });
}

export function useCompletePasswordReset() {
  return useMutation({
    mutationFn: (body: { token: string; newPassword: string }) =>
      http.put<void>('/session/password-reset', body, { allowSignedOut: true }),
  });
}

export function useAcceptInvitation() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { token: string; name: string; password: string }) =>
      http.post<Session | undefined>('/invitations/accept', body, { allowSignedOut: true }),
    onSuccess: (session) => {
      client.clear();
      if (session) client.setQueryData(sessionQueries.current().queryKey, session);
    },
  });
}

/** What a mailed invitation invites to; asked once, since the link may be used up at any time. */
export const invitationQuery = (token: string) =>
  queryOptions({
    queryKey: ['invitation', token] as const,
    queryFn: () => http.post<InvitationPreview>('/invitations/preview', { token }, { allowSignedOut: true }),
    enabled: token !== '',
    retry: false,
    staleTime: Number.POSITIVE_INFINITY,
  });

export function useUpdateMe() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { name?: string; preferences?: Partial<Preferences> }) => http.patch<unknown>('/me', body),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionQueries.current().queryKey }),
  });
}

export function useChangePassword() {
  return useMutation({
    mutationFn: (body: { currentPassword: string; newPassword: string }) => http.put<void>('/me/password', body),
  });
}
