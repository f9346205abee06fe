import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import {
  addPriceRequest,
  booksResponse,
  differencesResponse,
  type PurchaseRow,
} from '../../../shared/books/books.schema.ts';
import { checklist as checklistSchema, periodsResponse } from '../../../shared/periods/periods.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './books.route.tsx';
import { books, CYLINDER_ID, checklist, differences, GROUP_ID, OWNER_ID, periods } from './books-answers.fixture.ts';

let asked: string[] = [];
let sent: { path: string; body: unknown }[] = [];
let answers: Record<string, unknown> = {};

const json = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } });

const purchase: PurchaseRow = {
  groupId: GROUP_ID,
  refrigerant: 'R-410A',
  massG: 10_000,
  occurredAt: '2026-11-05T09:00:00.000Z',
  bookingMonth: '2026-11',
  supplierName: 'Wren Gases',
  cylinderTags: ['7702'],
  documentNumber: 'INV-7',
  documentDate: null,
  price: null,
  cost: null,
};

vi.setConfig({ testTimeout: 20_000 });
beforeAll(startMessages);
beforeEach(() => {
  [asked, sent] = [[], []];
  answers = {
    '/session': {
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
      permissions: ['books:read', 'books:settle', 'periods:close'],
    },
    '/periods': periods,
    '/books': books,
    '/books/differences': differences,
    '/books/purchases': { items: [purchase], nextCursor: null, currency: 'EUR' },
  };
  vi.stubGlobal('fetch', (url: string, init: RequestInit) => {
    const path = url.replace('/api/v1', '');
    if (init.method && init.method !== 'GET') {
      sent.push({ path, body: JSON.parse(String(init.body)) });
      return Promise.resolve(json({}));
    }
    asked.push(path);
    return Promise.resolve(json(answers[path.split('?')[0] as string] ?? { items: [], nextCursor: null }));
  });
  vi.stubGlobal('matchMedia', () => ({ matches: true, addEventListener() {}, removeEventListener() {} }));
  HTMLDialogElement.prototype.showModal ??= function showModal(this: HTMLDialogElement) {
    this.open = true;
  };
  HTMLDialogElement.prototype.close ??= function close(this: HTMLDialogElement) {
    this.open = false;
    this.dispatchEvent(new Event('close'));
  };
  changePreferences({ ...preferencesFor('en-GB'), mass: 'g' });
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openBooks(address = '/books') {
  const router = createMemoryRouter(
    [
      { path: '/books', element: <Component />, loader, hydrateFallbackElement: <p /> },
      { path: '*', element: <p>elsewhere</p> },
    ],
    { initialEntries: [address] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { router, user: userEvent.setup() };
}

describe('The answers that these tests give', () => {
  it('are such as the server gives', () => {
    expect(booksResponse.safeParse(books).error).toBeUndefined();
    expect(differencesResponse.safeParse(differences).error).toBeUndefined();
    expect(periodsResponse.safeParse(periods).error).toBeUndefined();
    expect(checklistSchema.safeParse(checklist).error).toBeUndefined();
  });
});

describe('The books', () => {
  it('say that there is no entry yet, and where the first comes from', async () => {
    answers['/periods'] = { firstOpenMonth: null, next: null, timeZone: 'Europe/Madrid', items: [] };
    await openBooks();
    expect(await screen.findByText('The books are empty')).toBeVisible();
    expect(screen.getByRole('link', { name: 'Register a cylinder' })).toHaveAttribute('href', '/cylinders/new');
  });

  it('open on the latest month that is over, and begin with what the scales do not explain', async () => {
    await openBooks();
    expect(await screen.findByRole('heading', { name: 'November 2026' })).toBeVisible();
    await screen.findByText(/130 g not explained by the scales/);
    const headings = screen.getAllByRole('heading', { level: 2 }).map(({ textContent }) => textContent);
    expect(headings[0]).toBe('What the scales say otherwise');
    const table = screen.getByRole('table', { name: 'What the scales say otherwise' });
    const cells = within(within(table).getAllByRole('row')[1] as HTMLElement).getAllByRole('cell');
    expect(cells.map(({ textContent }) => textContent).slice(0, 8)).toEqual([
      'cyl. 7702',
      'R-410A',
      '4,310',
      '4,180',
      '−130',
      '12',
      'not explained',
      'S. Brandt, van 3',
    ]);
  });

  it('fold away what the scales explain, so that it does not stand before the books', async () => {
    await openBooks();
    const within4 = await screen.findByText('4 differences that the scales explain', { selector: 'summary *' });
    expect(within4.closest('details')?.open).toBe(false);
  });

  it('lead from a difference to the statement over the two readings, on the days that it says', async () => {
    await openBooks();
    expect(await screen.findByRole('link', { name: 'cyl. 7702' })).toHaveAttribute(
      'href',
      `/cylinders/${CYLINDER_ID}/statement?from=2026-11-03&to=2026-11-20`,
    );
  });

  it('can be read flow by flow with the keyboard, each with its mass, its share and its entries', async () => {
    const { user } = await openBooks();
    const into = await screen.findByRole('button', { name: /^into units: 41.9.kg, 32.1 %/ });
    into.focus();
    await user.keyboard('{Enter}');
    expect(into).toHaveAttribute('aria-pressed', 'true');
    expect(screen.getByText('12 entries.', { exact: false })).toBeVisible();
    expect(screen.getByRole('link', { name: 'In the log' })).toHaveAttribute('href', '/log?month=2026-11&place=unit');
  });

  it('have the picture as a table too, and both sides of it add up to the same', async () => {
    await openBooks();
    const table = (await screen.findByText('As a table')).closest('details')?.querySelector('table') as HTMLElement;
    const masses = [...table.querySelectorAll('tbody tr')].map((row) => {
      const [, side, mass] = [...row.querySelectorAll('td')].map(({ textContent }) => textContent);
      return { side, massG: Number(mass?.replace(',', '')) };
    });
    const sum = (name: string) =>
      masses.filter(({ side }) => side === name).reduce((total, { massG }) => total + massG, 0);
    expect([sum('in'), sum('out')]).toEqual([130_400, 130_400]);
  });

  it('ask for the period and the refrigerant of the address, and for a table only once it is opened', async () => {
    const { user } = await openBooks('/books?from=2026-11&to=2026-12&refrigerant=R-32');
    await screen.findByText('In and out');
    expect(asked).toContain('/books?from=2026-11&to=2026-12&refrigerant=R-32');
    expect(asked.some((path) => path.startsWith('/books/purchases'))).toBe(false);
    await user.click(screen.getByRole('link', { name: 'Purchases' }));
    await waitFor(() => expect(asked.some((path) => path.startsWith('/books/purchases?from=2026-11'))).toBe(true));
  });

  it('take the other month along where a choice would turn the period round', async () => {
    const { router, user } = await openBooks('/books?from=2026-11&to=2026-11');
    await screen.findByText('In and out');
    await user.selectOptions(screen.getByLabelText('from'), '2026-12');
    expect(router.state.location.search).toBe('?from=2026-12&to=2026-12');
  });

  it('tell a purchase by the clock of the firm, wherever it is read', async () => {
    await openBooks('/books?table=purchases');
    // 09:00 UTC in Madrid in November.
    expect(await screen.findByText('5 Nov, 10:00')).toBeVisible();
  });

  it('take a price as it is typed, say what it comes to, and send it exactly', async () => {
    const { user } = await openBooks('/books?table=purchases');
    await user.click(await screen.findByRole('button', { name: /^Give a price/ }));
    const dialog = await screen.findByRole('dialog');
    await user.click(within(dialog).getByRole('button', { name: 'Keep the price' }));
    expect(within(dialog).getByText('A price like 28.50.')).toBeVisible();
    expect(sent).toEqual([]);
    await user.type(within(dialog).getByLabelText('price'), '28.50');
    await user.click(within(dialog).getByRole('button', { name: 'Keep the price: €285.00 in all' }));
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(addPriceRequest.parse(sent[0]?.body)).toMatchObject({
      groupId: GROUP_ID,
      refrigerant: 'R-410A',
      price: { value: '28.50', per: 'kg' },
      currency: 'EUR',
    });
  });

  it('ask of a price which one it is where a separator may mean two things', async () => {
    const { user } = await openBooks('/books?table=purchases');
    await user.click(await screen.findByRole('button', { name: /^Give a price/ }));
    const dialog = await screen.findByRole('dialog');
    await user.type(within(dialog).getByLabelText('price'), '1,250');
    await user.click(within(dialog).getByRole('button', { name: 'Keep the price' }));
    expect(sent).toEqual([]);
    await user.click(within(dialog).getByRole('button', { name: '1250' }));
    await user.click(within(dialog).getByRole('button', { name: /^Keep the price: €12,500/ }));
    await waitFor(() => expect(sent).toHaveLength(1));
    expect(sent[0]?.body).toMatchObject({ price: { value: '1250' } });
  });
});
