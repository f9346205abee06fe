import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { createCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './new-cylinder.route.tsx';

const SUPPLIER = '0195f0c4-b000-7000-8000-000000000001';
const json = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json' },
  });

let posted: { path: string; body: Record<string, unknown> }[] = [];
let answerToGroup = (): Response => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);

function answer(path: string, method: string, body: string | null): Response {
  if (path === '/calculations/cylinder-fill')
    return json({
      liquidDensityKgM3: 961,
      maxNetG: 9137,
      maxGrossG: 9137,
      contentG: null,
      roomLeftG: null,
      cautions: [],
    });
  if (path === '/calculations/saturation')
    return json({ bubbleKPaAbs: 3521, dewKPaAbs: 3521, liquidDensityKgM3: 840, vapourDensityKgM3: 42, cautions: [] });
  if (method === 'POST') {
    posted.push({ path, body: JSON.parse(body ?? '{}') });
    return path === '/cylinders' ? json({ id: 'made' }, 201) : answerToGroup();
  }
  if (path === '/session') {
    return json({
      person: { id: 'p', name: 'S. Brandt', email: 's@example.test', preferences: preferencesFor('en-GB'), version: 1 },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', timeZone: 'America/New_York' },
      firms: [],
      roles: [],
      permissions: ['cylinders:write', 'entries:post', 'people:read'],
    });
  }
  if (path.startsWith('/parties?kind=supplier')) {
    return json({
      items: [{ id: SUPPLIER, kind: 'supplier', name: 'Tolland Supply', note: null, version: 1 }],
      nextCursor: null,
    });
  }
  return json({ items: [], nextCursor: null });
}

vi.setConfig({ testTimeout: 20_000 });
beforeAll(startMessages);
beforeEach(() => {
  posted = [];
  answerToGroup = () => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);
  vi.stubGlobal('fetch', (url: string, init: RequestInit) =>
    Promise.resolve(answer(url.replace('/api/v1', ''), init.method ?? 'GET', init.body as string | null)),
  );
  changePreferences(preferencesFor('en-GB'));
  forgetAllDrafts();
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openForm() {
  const router = createMemoryRouter(
    [
      { path: '/cylinders/new', element: <Component />, loader, hydrateFallbackElement: <p /> },
      { path: '/cylinders/:id', element: <p>its page</p> },
    ],
    { initialEntries: ['/cylinders/new'] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('heading', { name: 'Register a cylinder' });
  return userEvent.setup();
}

type Person = Awaited<ReturnType<typeof openForm>>;
const field = (name: string) => screen.getByRole('textbox', { name });

/** At once, as a paste is: a form of this size is drawn anew at every key. */
async function fill(person: Person, name: string, text: string) {
  await person.click(field(name));
  await person.paste(text);
}

async function typeCylinder(person: Person, { bought }: { bought: string }) {
  await fill(person, 'number on its collar', '7741');
  await screen.findByRole('option', { name: 'R-32, A2L' });
  await person.selectOptions(screen.getByRole('combobox', { name: 'refrigerant' }), 'R-32');
  await fill(person, 'tare', '6105');
  await fill(person, 'water capacity', '11884');
  await screen.findAllByRole('option', { name: 'Tolland Supply' });
  await person.selectOptions(screen.getByRole('combobox', { name: 'supplier' }), 'Tolland Supply');
  await fill(person, 'mass bought', bought);
}

describe('Registering a cylinder', () => {
  it('posts the cylinder, then how its content begins, and leads to its page', async () => {
    const person = await openForm();
    await typeCylinder(person, { bought: '9000' });
    await person.click(screen.getByRole('button', { name: 'Register 7741' }));
    expect(await screen.findByText('its page')).toBeVisible();
    expect(posted.map(({ path }) => path)).toEqual(['/cylinders', '/entry-groups']);
    expect(createCylinderRequest.safeParse(posted[0]?.body).error).toBeUndefined();
    expect(entryGroupRequest.safeParse(posted[1]?.body).error).toBeUndefined();
  });

  it('stops what would fill it past its limit, naming both masses, and takes it with its reason once it has happened', async () => {
    const person = await openForm();
    await typeCylinder(person, { bought: '11340' });
    expect(await screen.findByText(/^11,340\sg would be past its fill limit of 9,137\sg/)).toBeVisible();
    expect(screen.getByRole('button', { name: 'Register 7741' })).toBeDisabled();
    await person.click(screen.getByRole('radio', { name: 'it has happened' }));
    await person.click(screen.getByRole('button', { name: 'Register 7741' }));
    expect(field('Reason')).toHaveAccessibleDescription('This can be recorded, with its reason. Say why.');
    expect(posted).toEqual([]);
    await fill(person, 'Reason', 'Filled so by the supplier');
    await person.click(screen.getByRole('button', { name: 'Register 7741' }));
    await screen.findByText('its page');
    expect(posted[1]?.body.reason).toBe('Filled so by the supplier');
  });

  it('does not make a second cylinder when only the content was refused, and keeps what was typed', async () => {
    answerToGroup = () =>
      json(
        {
          code: 'inFuture',
          detail: 'Not valid',
          errors: [{ path: '/occurredAt', code: 'inFuture', message: 'This lies in the future.' }],
        },
        422,
      );
    const person = await openForm();
    await typeCylinder(person, { bought: '9000' });
    await person.click(screen.getByRole('button', { name: 'Register 7741' }));
    expect(await screen.findByText('This lies in the future.')).toBeVisible();
    expect(screen.getByText('7741 is in the register. Only its content is still to be recorded.')).toBeVisible();
    expect(field('mass bought')).toHaveValue('9000');
    answerToGroup = () => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);
    await person.click(screen.getByRole('button', { name: 'Register 7741' }));
    await screen.findByText('its page');
    expect(posted.map(({ path }) => path)).toEqual(['/cylinders', '/entry-groups', '/entry-groups']);
    expect(posted[2]?.body.groupId).toBe(posted[1]?.body.groupId);
  });

  it('says beside each field what is missing, goes to the first, and sends nothing', async () => {
    const person = await openForm();
    await person.click(screen.getByRole('button', { name: 'Register it' }));
    expect(field('number on its collar')).toHaveAccessibleDescription('This is missing.');
    await waitFor(() => expect(field('number on its collar')).toHaveFocus());
    expect(screen.getByRole('combobox', { name: 'refrigerant' })).toBeInvalid();
    expect(field('tare')).toBeInvalid();
    expect(posted).toEqual([]);
  });
});
