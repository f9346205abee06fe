import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { carryRequest, closeRequest, settleRequest } from '../../../shared/periods/periods.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import {
  CYLINDER_ID,
  checklist,
  decided,
  differenceItem,
  HOLDER_ID,
  OWNER_ID,
  periods,
  SUMS_HASH,
  SUPPLIER_ID,
} from './books-answers.fixture.ts';
import { Component, loader } from './close.route.tsx';

const OWNER = ['books:read', 'books:settle', 'periods:close', 'people:read'];
let sent: { path: string; body: unknown }[] = [];
let permissions = OWNER;
let answers: Record<string, unknown> = {};
let answerToPost = (): Response => json({}, 201);

const json = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json' },
  });

vi.setConfig({ testTimeout: 20_000 });
beforeAll(startMessages);
beforeEach(() => {
  [sent, permissions] = [[], OWNER];
  answerToPost = () => json({}, 201);
  const person = (id: string, name: string, van: string | null) => ({ id, name, van, active: true });
  answers = {
    '/periods': periods,
    '/periods/checklist': checklist,
    '/people': {
      items: [person(OWNER_ID, 'Ines Harrow', null), person(HOLDER_ID, 'S. Brandt', 'van 3')],
      nextCursor: null,
    },
    '/parties': { items: [{ id: SUPPLIER_ID, kind: 'supplier', name: 'Wren Gases' }], nextCursor: null },
  };
  vi.stubGlobal('fetch', (url: string, init: RequestInit) => {
    const path = url.replace('/api/v1', '');
    if (init.method && init.method !== 'GET') {
      sent.push({ path, body: JSON.parse(String(init.body)) });
      return Promise.resolve(answerToPost());
    }
    if (path === '/session') return Promise.resolve(json(session()));
    return Promise.resolve(json(answers[path.split('?')[0] as string] ?? { items: [], nextCursor: null }));
  });
  HTMLDialogElement.prototype.showModal ??= function showModal(this: HTMLDialogElement) {
    this.open = true;
  };
  HTMLDialogElement.prototype.close ??= function close(this: HTMLDialogElement) {
    this.open = false;
    this.dispatchEvent(new Event('close'));
  };
  changePreferences({ ...preferencesFor('en-GB'), mass: 'g' });
  queryClient.clear();
  forgetAllDrafts();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

function session() {
  return {
    person: {
      id: OWNER_ID,
      name: 'Ines Harrow',
      email: 'i@example.test',
      preferences: preferencesFor('en-GB'),
      version: 1,
    },
    firm: { id: 'f', name: 'Harrow Climate', timeZone: 'Europe/Madrid' },
    firms: [],
    roles: ['owner'],
    permissions,
  };
}

async function openMonth() {
  const router = createMemoryRouter(
    [
      { path: '/books/close/:month', element: <Component />, loader, hydrateFallbackElement: <p /> },
      { path: '*', element: <p>elsewhere</p> },
    ],
    { initialEntries: ['/books/close/2026-11'] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('heading', { name: /November 2026/ });
  return userEvent.setup();
}

describe('The close of a month', () => {
  it('cannot be signed while something waits for a decision, and says how much does', async () => {
    await openMonth();
    expect(await screen.findByText('2 items still wait for a decision.')).toBeVisible();
    expect(screen.getByRole('button', { name: 'Close November 2026 for good' })).toBeDisabled();
  });

  it('asks what a difference turned out to be before it posts anything, and why', async () => {
    const user = await openMonth();
    await user.click(await screen.findByRole('button', { name: /^Settle/ }));
    const dialog = await screen.findByRole('dialog');
    await user.click(within(dialog).getByRole('button', { name: 'Post it' }));
    expect(within(dialog).getByText('Choose one.')).toBeVisible();
    await user.click(within(dialog).getByRole('radio', { name: /Missing/ }));
    await user.click(within(dialog).getByRole('button', { name: /^Post 130.g as missing$/ }));
    expect(within(dialog).getByText('Say why, in a few words.')).toBeVisible();
    expect(sent).toEqual([]);
    await user.type(within(dialog).getByLabelText('reason'), 'looked for it in all vans');
    await user.click(within(dialog).getByRole('button', { name: /^Post 130.g as missing$/ }));
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(settleRequest.parse(sent[0]?.body)).toMatchObject({
      month: '2026-11',
      key: differenceItem.key,
      to: { place: 'missing' },
      reason: 'looked for it in all vans',
    });
  });

  it('shows what the server says of an answer beside its field: which supplier it is', async () => {
    answerToPost = () =>
      json(
        {
          type: 'about:blank',
          title: 'Refused',
          status: 422,
          code: 'refused',
          errors: [{ path: '/to/id', code: 'supplierRequired', message: 'Say which supplier.' }],
        },
        422,
      );
    const user = await openMonth();
    await user.click(await screen.findByRole('button', { name: /^Settle/ }));
    const dialog = await screen.findByRole('dialog');
    await user.click(within(dialog).getByRole('radio', { name: /The supplier’s/ }));
    await user.type(within(dialog).getByLabelText('reason'), 'short on the invoice');
    await user.click(within(dialog).getByRole('button', { name: /^Post 130.g as the supplier’s$/ }));
    expect(await within(dialog).findByText('Say which supplier.')).toBeVisible();
    expect(within(dialog).getByLabelText('supplier')).toHaveAttribute('aria-invalid', 'true');
    answerToPost = () => json({}, 201);
    await within(dialog).findByRole('option', { name: 'Wren Gases' });
    await user.selectOptions(within(dialog).getByLabelText('supplier'), SUPPLIER_ID);
    await user.click(within(dialog).getByRole('button', { name: /^Post 130.g as the supplier’s$/ }));
    await waitFor(() => expect(sent).toHaveLength(2));
    const [first, second] = sent.map(({ body }) => settleRequest.parse(body));
    // The same request again: a second try cannot post twice.
    expect(second?.id).toBe(first?.id);
    expect(second?.to).toEqual({ place: 'supplier', id: SUPPLIER_ID });
  });

  it('posts nothing for a wrong tare: it leads to the cylinder, whose readings are judged again', async () => {
    const user = await openMonth();
    await user.click(await screen.findByRole('button', { name: /^Settle/ }));
    const dialog = await screen.findByRole('dialog');
    await user.click(within(dialog).getByRole('radio', { name: /The tare is wrong/ }));
    expect(within(dialog).getByRole('link', { name: 'To the tare of cylinder 7702' })).toHaveAttribute(
      'href',
      `/cylinders/${CYLINDER_ID}`,
    );
    expect(within(dialog).queryByRole('button', { name: /^Post/ })).toBeNull();
  });

  it('does not offer a surplus as lost', async () => {
    const surplus = { ...differenceItem, differenceG: 90, standsG: 90 };
    answers['/periods/checklist'] = { ...checklist, items: [{ ...checklist.items[0], difference: surplus }] };
    const user = await openMonth();
    await user.click(await screen.findByRole('button', { name: /^Settle/ }));
    const dialog = await screen.findByRole('dialog');
    expect(within(dialog).getByRole('radio', { name: /Missing/ })).toBeVisible();
    expect(within(dialog).queryByRole('radio', { name: /Lost to the atmosphere/ })).toBeNull();
  });

  it('carries a difference under the name of whoever had it last, unless another is chosen', async () => {
    const user = await openMonth();
    await user.click((await screen.findAllByRole('button', { name: /^Carry / }))[0] as HTMLElement);
    const dialog = await screen.findByRole('dialog');
    await user.type(within(dialog).getByLabelText('reason'), 'weighs it on Monday');
    await user.click(await within(dialog).findByRole('button', { name: 'Carry by S. Brandt' }));
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(carryRequest.parse(sent[0]?.body)).toMatchObject({
      month: '2026-11',
      carriedBy: HOLDER_ID,
      reason: 'weighs it on Monday',
      items: [{ key: differenceItem.key }],
    });
  });

  it('lets a manager settle and leaves the sign-off to the owner', async () => {
    permissions = ['books:read', 'books:settle'];
    await openMonth();
    expect(await screen.findByText('The owner signs off.')).toBeVisible();
    expect(screen.queryByRole('button', { name: /for good/ })).toBeNull();
  });

  it('lets a reader look and decide nothing', async () => {
    permissions = ['books:read'];
    await openMonth();
    expect(await screen.findByText('1 difference beyond the scales')).toBeVisible();
    expect(screen.queryByRole('button', { name: /^(Settle|Carry)/ })).toBeNull();
  });

  it('signs the very sums that were read, and says that something was posted since where it was', async () => {
    answers['/periods/checklist'] = decided;
    const said = 'Something was posted since you looked. Look again, then sign off.';
    answerToPost = () =>
      json({ type: 'about:blank', title: said, status: 412, code: 'seenChanged', detail: said }, 412);
    const user = await openMonth();
    await user.click(await screen.findByRole('button', { name: 'Close November 2026 for good' }));
    expect(await screen.findByText(said)).toBeVisible();
    expect(closeRequest.parse(sent[0]?.body)).toMatchObject({ month: '2026-11', sumsHash: SUMS_HASH });
  });

  it('shows of a closed month who signed, and offers nothing to change', async () => {
    answers['/periods/checklist'] = {
      ...decided,
      state: 'closed',
      signedOff: { at: '2026-12-02T09:00:00.000Z', byName: 'Ines Harrow', note: 'all looked at', carried: [] },
    };
    await openMonth();
    expect(await screen.findByText('all looked at')).toBeVisible();
    expect(screen.queryByRole('button', { name: /Settle|Carry|for good/ })).toBeNull();
  });
});
