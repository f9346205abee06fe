import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { addRentalTermsRequest, type RentalView } from '../../../shared/rental-terms/rental-terms.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './rental.route.tsx';

const CYLINDER_ID = '0195f0c4-0000-7000-8000-000000000001';
let sent: unknown[] = [];
let view: RentalView;
const json = (value: unknown, status = 200) =>
  new Response(JSON.stringify(value), { status, headers: { 'Content-Type': 'application/json' } });

function answer(path: string, method: string, body: string | null): Response {
  if (method === 'POST') {
    sent.push(JSON.parse(body ?? '{}'));
    return json(view, 201);
  }
  if (path === '/session')
    return json({
      person: { id: 'p', name: 'M. Oduya', email: 'm@example.org', preferences: preferencesFor('en-US') },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', jurisdiction: 'US' },
      firms: [],
      roles: ['manager'],
      permissions: ['cylinders:write'],
    });
  if (path.endsWith('/rental-terms')) return json(view);
  return json({ id: CYLINDER_ID, tag: '7741', owner: { kind: 'party', id: 'x', name: 'Fallow Gas' } });
}

beforeAll(async () => {
  changePreferences({ locale: 'en-US' });
  await startMessages();
});
beforeEach(() => {
  sent = [];
  view = { items: [], rental: null };
  queryClient.clear();
  forgetAllDrafts();
  vi.stubGlobal('fetch', (url: string, options: RequestInit) =>
    Promise.resolve(answer(url.replace('/api/v1', ''), options.method ?? 'GET', options.body as string | null)),
  );
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function open() {
  const router = createMemoryRouter([{ path: '/cylinders/:cylinderId/rental', Component, loader }], {
    initialEntries: [`/cylinders/${CYLINDER_ID}/rental`],
  });
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByLabelText('deposit');
  return userEvent.setup();
}
const record = () => screen.getByRole('button', { name: 'Record the terms' });

describe('The terms of a rental', () => {
  it('ask which amount 1,250 is, record nothing until that is said, and then what was said', async () => {
    const user = await open();
    await user.type(screen.getByLabelText('deposit'), '1,250');
    expect(screen.getByRole('group', { name: '1,250: which one is it?' })).toBeVisible();
    await user.click(record());
    expect(sent).toEqual([]);
    await user.click(screen.getByRole('button', { name: '1250' }));
    await user.click(record());
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(addRentalTermsRequest.parse(sent[0]).conditions).toMatchObject({ deposit: '1250', dailyRate: null });
  });

  it('take an amount that can be read in one way as it is typed', async () => {
    const user = await open();
    await user.type(screen.getByLabelText('deposit'), '1,250.50');
    await user.type(screen.getByLabelText('rate for a day'), '0,35');
    expect(screen.queryByRole('group', { name: /which one/ })).toBeNull();
    await user.click(record());
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(sent[0]).toMatchObject({ conditions: { deposit: '1250.50', dailyRate: '0.35' } });
  });

  it('keep a rate of thousandths that was recorded before: it is shown, and not asked about again', async () => {
    const conditions = { deposit: '80', dailyRate: '1.255', currency: 'USD' };
    const id = '0195f0c4-0000-7000-8000-000000000002';
    view = {
      items: [{ id, since: '2026-11-01', conditions }],
      rental: { since: '2026-11-01', days: 3, conditions, costs: [] },
    };
    const user = await open();
    expect(screen.getByLabelText('rate for a day')).toHaveValue('1.255');
    expect(screen.queryByRole('group', { name: /which one/ })).toBeNull();
    await user.click(record());
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(sent[0]).toMatchObject({ conditions });
  });
});
