import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { createTokenRequest, inviteRequest } from '../../../shared/people/people.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './people.route.tsx';

const OWNER = ['people:read', 'people:manage', 'tokens:own'];
let permissions = OWNER;
let sent: { method: string; path: string; version?: string; body: Record<string, unknown> }[] = [];
let answerToChange = (): Response => json({});

const json = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json' },
  });
const person = (id: string, name: string, roles: string[], more = {}) => ({
  id,
  name,
  email: `${id}@example.test`,
  roles,
  siteIds: null,
  active: true,
  van: null,
  lastSignInAt: null,
  version: 4,
  ...more,
});

function answer(path: string, method: string, body: string | null, version: string | undefined): Response {
  if (method !== 'GET') {
    sent.push({ method, path, ...(version ? { version } : {}), body: JSON.parse(body ?? '{}') });
    return answerToChange();
  }
  if (path === '/session') {
    return json({
      person: {
        id: 'ines',
        name: 'Ines Harrow',
        email: 'ines@example.test',
        preferences: preferencesFor('en-GB'),
        version: 1,
      },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', timeZone: 'America/New_York' },
      firms: [],
      roles: ['owner'],
      permissions,
    });
  }
  if (path.startsWith('/people')) {
    const items = [
      person('ines', 'Ines Harrow', ['owner']),
      person('oduya', 'M. Oduya', ['technician'], { van: 'van 1' }),
      person('gone', 'K. Voss', ['technician'], { active: false }),
    ];
    return json({ items, nextCursor: null });
  }
  if (path.startsWith('/invitations')) {
    const pending = { id: 'i1', email: 'wren@example.test', name: 'Wren Aldous', roles: ['reader'], siteIds: null };
    const times = { invitedAt: '2026-11-28T10:00:00Z', expiresAt: '2126-12-05T10:00:00Z' };
    return json({
      items: [
        { ...pending, ...times, acceptedAt: null },
        { ...pending, ...times, id: 'i2', name: 'Came Already', acceptedAt: '2026-11-29T10:00:00Z' },
      ],
      nextCursor: null,
    });
  }
  return json({ items: [], nextCursor: null });
}

vi.setConfig({ testTimeout: 20_000 });
beforeAll(startMessages);
beforeEach(() => {
  [permissions, sent] = [OWNER, []];
  answerToChange = () => json({});
  vi.stubGlobal('fetch', (url: string, init: RequestInit) =>
    Promise.resolve(
      answer(
        url.replace('/api/v1', ''),
        init.method ?? 'GET',
        init.body as string | null,
        (init.headers as Record<string, string>)['If-Match'],
      ),
    ),
  );
  // jsdom draws no modal dialogs; open is all that these tests need.
  HTMLDialogElement.prototype.showModal ??= function showModal(this: HTMLDialogElement) {
    this.open = true;
  };
  HTMLDialogElement.prototype.close ??= function close(this: HTMLDialogElement) {
    this.open = false;
    this.dispatchEvent(new Event('close'));
  };
  changePreferences(preferencesFor('en-GB'));
  forgetAllDrafts();
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openPeople() {
  const router = createMemoryRouter(
    [{ path: '/people', element: <Component />, loader, hydrateFallbackElement: <p /> }],
    { initialEntries: ['/people'] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('heading', { name: 'People' });
  return userEvent.setup();
}

describe('People', () => {
  it('shows who works here, as what and in which van, who is no longer active, and who is still expected', async () => {
    await openPeople();
    const oduya = (await screen.findByRole('button', { name: 'M. Oduya' })).closest('tr') as HTMLElement;
    expect(within(oduya).getByText('technician')).toBeVisible();
    expect(within(oduya).getByText('van 1')).toBeVisible();
    expect(screen.getByText('no longer active')).toBeVisible();
    expect(await screen.findByText('Wren Aldous')).toBeVisible();
    expect(screen.queryByText('Came Already')).toBeNull();
  });

  it('lets a technician read and change nobody, and shows no invitations', async () => {
    permissions = ['people:read', 'tokens:own'];
    await openPeople();
    await screen.findByText('M. Oduya');
    expect(screen.queryByRole('button', { name: 'M. Oduya' })).toBeNull();
    expect(screen.queryByRole('button', { name: 'Invite somebody' })).toBeNull();
    expect(screen.getByRole('button', { name: 'Make a token' })).toBeVisible();
  });

  it('shows a reader neither people nor tokens, only the way to end every session', async () => {
    permissions = ['records:read'];
    await openPeople();
    expect(screen.getByRole('button', { name: 'Sign out everywhere' })).toBeVisible();
    expect(screen.queryByRole('heading', { name: 'In the firm' })).toBeNull();
    expect(screen.queryByRole('heading', { name: 'Your tokens' })).toBeNull();
  });
});

describe('Inviting somebody', () => {
  it('sends a whole invitation, and says beside the field what is missing before that', async () => {
    answerToChange = () => json({ id: 'i3', name: 'Tess Marl', mailSent: true }, 201);
    const me = await openPeople();
    await me.click(await screen.findByRole('button', { name: 'Invite somebody' }));
    await me.click(screen.getByRole('button', { name: 'Mail the invitation' }));
    expect(screen.getByRole('textbox', { name: 'name' })).toHaveAccessibleDescription('This is missing.');
    expect(sent).toEqual([]);
    await me.type(screen.getByRole('textbox', { name: 'name' }), 'Tess Marl');
    await me.type(screen.getByRole('textbox', { name: 'e-mail address' }), 'tess@example.test');
    await me.click(screen.getByRole('checkbox', { name: /^owner/ }));
    await me.click(screen.getByRole('button', { name: 'Mail the invitation' }));
    expect(await screen.findByText('The invitation for Tess Marl is on its way.')).toBeVisible();
    expect(inviteRequest.parse(sent[0]?.body)).toMatchObject({
      email: 'tess@example.test',
      roles: ['technician', 'owner'],
    });
  });

  it('says when the mail server did not take the mail', async () => {
    answerToChange = () => json({ id: 'i1', name: 'Wren Aldous', mailSent: false });
    const me = await openPeople();
    await me.click(await screen.findByRole('button', { name: 'Send again' }));
    expect(await screen.findByText(/the mail server did not take the mail/)).toBeVisible();
  });
});

describe('Changing what somebody may do', () => {
  it('names the version it was made on, and puts a refusal beside the roles', async () => {
    answerToChange = () =>
      json(
        {
          code: 'lastOwner',
          detail: 'No',
          errors: [{ path: '/roles', code: 'lastOwner', message: 'The last active owner.' }],
        },
        422,
      );
    const me = await openPeople();
    await me.click(await screen.findByRole('button', { name: /^Ines Harrow/ }));
    await me.click(screen.getByRole('checkbox', { name: /^owner/ }));
    await me.click(screen.getByRole('checkbox', { name: /^technician/ }));
    await me.click(screen.getByRole('button', { name: 'Save for Ines Harrow' }));
    expect(await screen.findByText('The last active owner.')).toBeVisible();
    expect(sent).toEqual([
      {
        method: 'PATCH',
        path: '/people/ines',
        version: '"4"',
        body: { roles: ['technician'], siteIds: null, van: null },
      },
    ]);
    expect(screen.getByRole('checkbox', { name: /^technician/ })).toBeChecked();
  });

  it('names on the button what deactivating does', async () => {
    const me = await openPeople();
    await me.click(await screen.findByRole('button', { name: 'M. Oduya' }));
    await me.click(screen.getByRole('button', { name: 'Deactivate M. Oduya, ending every session' }));
    expect(await screen.findByText('M. Oduya is no longer active.')).toBeVisible();
    expect(sent[0]?.body).toEqual({ active: false });
  });
});

describe('A token', () => {
  it('shows its secret once, can be copied, and is gone from the page when it is closed', async () => {
    answerToChange = () =>
      json(
        {
          id: 't1',
          name: 'Month end',
          scopes: ['read'],
          createdAt: '2026-11-30T10:00:00Z',
          expiresOn: '2027-02-28',
          lastUsedAt: null,
          secret: 'twt_secret',
        },
        201,
      );
    const me = await openPeople();
    await me.click(await screen.findByRole('button', { name: 'Make a token' }));
    await me.type(screen.getByRole('textbox', { name: 'What is it for?' }), 'Month end');
    await me.click(screen.getByRole('button', { name: 'Make it' }));
    expect(await screen.findByDisplayValue('twt_secret')).toBeVisible();
    expect(createTokenRequest.parse(sent[0]?.body)).toMatchObject({ name: 'Month end', scopes: ['read'] });
    await me.click(screen.getByRole('button', { name: 'Copy it' }));
    expect(await screen.findByText('Copied.')).toBeVisible();
    expect(await navigator.clipboard.readText()).toBe('twt_secret');
    await me.click(screen.getByRole('button', { name: 'I have kept it' }));
    await waitFor(() => expect(screen.queryByDisplayValue('twt_secret')).toBeNull());
  });
});
