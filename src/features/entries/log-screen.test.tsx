import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { reversalRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component as EntrySheet } from './entry.route.tsx';
import { cylinder, entryRow, groupView, idOf, nowhere } from './entry-row.fixture.ts';
import { Component as Log, loader } from './log.route.tsx';

const MANAGER = ['entries:post', 'entries:reverse', 'registers:correct', 'exports:make', 'people:read'];
let rows: EntryRow[] = [];
let groups: GroupView[] = [];
let permissions = MANAGER;
let asked: string[] = [];
let posted: { path: string; body: Record<string, unknown> }[] = [];
let answerToPost = (): Response => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);

const json = (body: unknown, status = 200) =>
  new Response(JSON.stringify(body), {
    status,
    headers: { 'content-type': status < 400 ? 'application/json' : 'application/problem+json' },
  });

function answer(path: string, method: string, body: string | null): Response {
  if (method === 'POST') {
    posted.push({ path, body: JSON.parse(body ?? '{}') });
    return answerToPost();
  }
  asked.push(path);
  if (path === '/session') {
    return json({
      person: {
        id: 'person-oduya',
        name: 'M. Oduya',
        email: 'm@example.test',
        preferences: preferencesFor('en-GB'),
        version: 1,
      },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', timeZone: 'America/New_York' },
      firms: [],
      roles: [],
      permissions,
    });
  }
  if (path.startsWith('/entries')) return json({ items: rows, nextCursor: null });
  if (path.startsWith('/entry-groups/')) {
    const group = groups.find(({ id }) => path.endsWith(id));
    return group ? json(group) : json({ code: 'notFound', detail: 'Not there' }, 404);
  }
  if (path.startsWith('/cylinders?'))
    return json({ items: [{ id: idOf('cylinder', '7741'), tag: '7741', refrigerant: 'R-32' }], nextCursor: null });
  return json({ items: [], nextCursor: null });
}

vi.setConfig({ testTimeout: 20_000 });
beforeAll(startMessages);
beforeEach(() => {
  [rows, groups, permissions, asked, posted] = [[], [], MANAGER, [], []];
  answerToPost = () => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);
  vi.stubGlobal('fetch', (url: string, init: RequestInit) =>
    Promise.resolve(answer(url.replace('/api/v1', ''), init.method ?? 'GET', init.body as string | null)),
  );
  // A desk: the sheet stands beside the list.
  vi.stubGlobal('matchMedia', () => ({ matches: true, addEventListener: () => {}, removeEventListener: () => {} }));
  changePreferences(preferencesFor('en-GB'));
  forgetAllDrafts();
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openLog(path = '/log') {
  const router = createMemoryRouter(
    [
      {
        path: '/log',
        element: <Log />,
        loader,
        hydrateFallbackElement: <p />,
        children: [{ path: ':groupId', element: <EntrySheet /> }],
      },
    ],
    { initialEntries: [path] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('heading', { name: 'Log' });
  return { person: userEvent.setup(), router };
}

/** The row of an entry by its number. */
const rowOf = async (number: string) =>
  (await screen.findByRole('link', { name: number })).closest('tr') as HTMLTableRowElement;
const words = (row: HTMLElement) => (row.textContent ?? '').replace(/\s+/g, ' ');

describe('The log', () => {
  it('says in words from where, to where, how much, why and who; the time is the site’s', async () => {
    rows = [entryRow({ sequence: 8866 })];
    await openLog();
    const row = await rowOf('8,866');
    expect(words(row)).toContain('90');
    expect(words(row)).toContain('cyl. 7741');
    expect(words(row)).toContain('unit 0412');
    expect(words(row)).toContain('extra charge');
    expect(words(row)).toContain('M. Oduya');
    expect(words(row)).toMatch(/30 Nov.*16:12/);
    expect(screen.getByRole('columnheader', { name: 'mass, g' })).toBeInTheDocument();
  });

  it('strikes through what was reversed and ties it to its reversal and its correction, by their numbers', async () => {
    const wrong = entryRow({ sequence: 8861, groupId: 'wrong', massG: 540, reversedByGroupId: 'reversal' });
    const reversal = entryRow({
      sequence: 8862,
      groupId: 'reversal',
      massG: 540,
      from: wrong.to,
      to: wrong.from,
      reversesGroupId: 'wrong',
      correctsGroupId: 'wrong',
    });
    const right = entryRow({ sequence: 8863, groupId: 'right', massG: 450 });
    rows = [right, reversal, wrong];
    groups = [groupView({ id: 'wrong', entries: [wrong], replacedByGroupId: 'right' })];
    await openLog();
    const struck = await rowOf('8,861');
    await waitFor(() => expect(words(struck)).toContain('reversed by 8,862'));
    const place = within(struck).getByText('unit 0412').closest('td') as HTMLElement;
    expect(place.className).toContain('line-through');
    // What ties it stays readable: only the reason itself is struck.
    expect(within(struck).getByText('extra charge').tagName).toBe('S');
    expect(within(struck).getByText('reversed by 8,862').closest('td')?.className).not.toContain('line-through');
    expect(words(await rowOf('8,862'))).toContain('reverses 8,861');
    await waitFor(async () => expect(words(await rowOf('8,863'))).toContain('corrects 8,861'));
  });

  it('marks what is late, what the server worked out and what is at least, each by a word', async () => {
    rows = [
      entryRow({ sequence: 3, late: true, bookingMonth: '2026-12' }),
      entryRow({
        sequence: 2,
        kind: 'refill',
        from: entryRow({ sequence: 0 }).to,
        to: nowhere('atmosphere', 'inferred'),
        addedByServer: true,
        atLeast: true,
      }),
      entryRow({ sequence: 1, kind: 'weighing', to: nowhere('cylinderDifference'), addedByServer: true }),
    ];
    await openLog();
    expect(words(await rowOf('3'))).toContain('late, booked Dec 2026');
    const inferred = words(await rowOf('2'));
    expect(inferred).toContain('atmosphere, inferred');
    expect(inferred).toContain('at least');
    expect(inferred).toContain('worked out');
    expect(words(await rowOf('1'))).toContain('weighed, not by the book');
  });

  it('says of an entry that judging again added what it is, not that it reverses', async () => {
    const wrong = entryRow({ sequence: 5, groupId: 'wrong', reversedByGroupId: 'reversal' });
    rows = [
      entryRow({
        sequence: 7,
        groupId: 'reversal',
        kind: 'weighing',
        from: nowhere('cylinderDifference'),
        to: cylinder('7741'),
        addedByServer: true,
        correctsGroupId: 'wrong',
        reversesGroupId: 'wrong',
      }),
      wrong,
    ];
    await openLog();
    expect(words(await rowOf('7'))).toContain('judged again: weighed, not by the book');
  });

  it('names the zone of a site that is not the firm’s', async () => {
    rows = [entryRow({ sequence: 2, timeZone: 'America/Chicago' }), entryRow({ sequence: 1 })];
    await openLog();
    expect(words(await rowOf('2'))).toMatch(/15:12\s*(CST|GMT-6)/);
    expect(words(await rowOf('1'))).not.toMatch(/EST|GMT/);
  });

  it('asks the server for the order and the filters of the address, and takes the same out as CSV', async () => {
    const { person } = await openLog('/log?month=2026-11&refrigerant=R-32');
    await screen.findByText('No entry fits these filters');
    expect(asked.some((path) => path.startsWith('/entries?month=2026-11&refrigerant=R-32&sort=-sequence'))).toBe(true);
    expect(screen.getByRole('link', { name: 'Download as CSV' })).toHaveAttribute(
      'href',
      '/api/v1/entries.csv?month=2026-11&refrigerant=R-32&sort=-sequence',
    );
    await person.selectOptions(screen.getByRole('combobox', { name: 'place' }), 'atmosphere');
    await waitFor(() => expect(asked.some((path) => path.includes('place=atmosphere'))).toBe(true));
  });

  it('is walked by the arrow keys, opened by Enter and closed by Escape, which gives the focus back to the row', async () => {
    rows = [3, 2, 1].map((sequence) => entryRow({ sequence }));
    groups = rows.map((row) => groupView({ id: row.groupId, entries: [row] }));
    const { person, router } = await openLog();
    const links = await screen.findAllByRole('link', { name: /^[123]$/ });
    (links[0] as HTMLElement).focus();
    await person.keyboard('{ArrowDown}{ArrowDown}{ArrowUp}');
    expect(links[1]).toHaveFocus();
    await person.keyboard('{Enter}');
    expect(await screen.findByRole('heading', { name: 'Entry 2' })).toBeVisible();
    expect(router.state.location.pathname).toBe('/log/group-2');
    await person.keyboard('{Escape}');
    await waitFor(() => expect(router.state.location.pathname).toBe('/log'));
    await waitFor(() => expect(screen.getByRole('link', { name: '2' })).toHaveFocus());
  });
});

describe('Reversing an entry', () => {
  async function openReversal() {
    const view = groupView();
    rows = view.entries;
    groups = [view];
    const opened = await openLog(`/log/${view.id}`);
    await opened.person.click(await screen.findByRole('button', { name: 'Reverse and correct' }));
    return opened;
  }

  it('names its consequence on the button, and asks for the reason before anything is sent', async () => {
    const { person } = await openReversal();
    await person.click(screen.getByRole('button', { name: /^Reverse 1 entry, 90\sg$/ }));
    const reason = screen.getByRole('textbox', { name: 'Why is it wrong?' });
    expect(reason).toHaveAccessibleDescription('A reversal needs its reason: what was wrong.');
    expect(reason).toHaveFocus();
    expect(posted).toEqual([]);
  });

  it('posts the reason, and says so where the entry was', async () => {
    const { person } = await openReversal();
    await person.type(screen.getByRole('textbox', { name: 'Why is it wrong?' }), 'Wrong unit');
    await person.click(screen.getByRole('button', { name: /^Reverse 1 entry/ }));
    expect(await screen.findByText(/^Reversed\./)).toBeVisible();
    expect(posted).toEqual([
      {
        path: '/entry-groups/group-82/reversal',
        body: expect.objectContaining({ schema: 1, reason: 'Wrong unit', replacement: null }),
      },
    ]);
  });

  it('sends the right group with it when a reading was mistaken: the mass follows the readings', async () => {
    const { person } = await openReversal();
    await person.type(screen.getByRole('textbox', { name: 'Why is it wrong?' }), 'End reading misread');
    await person.click(screen.getByRole('checkbox', { name: /^Enter it right at once/ }));
    const after = screen.getByRole('textbox', { name: 'Reading after' });
    await person.clear(after);
    await person.type(after, '17310');
    expect(screen.getByText(/^by the readings 110\sg$/)).toBeVisible();
    await person.click(screen.getByRole('button', { name: /^Reverse 90\sg, record 110\sg$/ }));
    expect(await screen.findByText(/^Reversed and corrected\./)).toBeVisible();
    expect(reversalRequest.safeParse(posted[0]?.body).error).toBeUndefined();
    expect(posted[0]?.body.replacement).toMatchObject({
      kind: 'extraCharge',
      occurredAt: '2026-11-30T21:12:00.000Z',
      readings: [
        { moment: 'before', value: '17420' },
        { moment: 'after', value: '17310' },
      ],
      entries: [{ mass: { value: '110', unit: 'g' }, from: { id: idOf('cylinder', '7741') } }],
    });
  });

  it('does not take what changes nothing', async () => {
    const { person } = await openReversal();
    await person.type(screen.getByRole('textbox', { name: 'Why is it wrong?' }), 'No idea');
    await person.click(screen.getByRole('checkbox', { name: /^Enter it right at once/ }));
    await person.click(screen.getByRole('button', { name: /^Reverse 90\sg and record it right$/ }));
    expect(screen.getByText('Nothing is different from what was reversed.')).toBeVisible();
    expect(posted).toEqual([]);
  });

  it('keeps what was typed when the server refuses, and says what it said', async () => {
    answerToPost = () =>
      json(
        { code: 'notPermitted', detail: 'No', errors: [{ path: '', code: 'ownForADay', message: 'Only for a day.' }] },
        403,
      );
    const { person } = await openReversal();
    const reason = screen.getByRole('textbox', { name: 'Why is it wrong?' });
    await person.type(reason, 'Wrong unit');
    await person.click(screen.getByRole('button', { name: /^Reverse 1 entry/ }));
    expect(await screen.findByText('Only for a day.')).toBeVisible();
    expect(reason).toHaveValue('Wrong unit');
    expect(screen.getByRole('button', { name: /^Reverse 1 entry/ })).toBeEnabled();
  });

  it('is not offered to a technician for somebody else’s entry, and says whom to ask', async () => {
    permissions = ['entries:post', 'entries:reverse'];
    const view = groupView({ recordedBy: 'person-frayne' });
    rows = view.entries;
    groups = [view];
    await openLog(`/log/${view.id}`);
    expect(await screen.findByText(/Only who recorded it, within a day/)).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Reverse and correct' })).toBeNull();
  });
});
