import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, within } from '@testing-library/react';
import userEvent, { type UserEvent } from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { type EntryGroupRequest, entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { C1, C2, idOf, moves, SHEET, UNIT } from './weigh-in.fixture.ts';
import { Component, loader } from './weigh-in.route.tsx';

const ME = idOf(90);
let posted: { path: string; body: Record<string, unknown> }[] = [];
/** What a post of a group is answered with; null: the answer is lost. */
let answerToPost: () => Response | null = () => null;

const NOTHING = { entries: [], balances: [], flags: [], warnings: [] };
/** What the server says beforehand. */
let previewed: Record<string, unknown> = {};

const json = (value: unknown, status = 200) =>
  new Response(JSON.stringify(value), {
    status,
    headers: { 'Content-Type': status < 400 ? 'application/json' : 'application/problem+json' },
  });

const cylinder = (change: Partial<Cylinder>) => ({
  kind: 'refillable',
  refrigerant: 'R-32',
  contentState: 'virgin',
  owner: { kind: 'ours' },
  tareG: 4680,
  limitG: null,
  pressureRatingHolds: true,
  retestDue: null,
  heldBy: ME,
  contentG: 3853,
  byRefrigerant: [{ refrigerant: 'R-32', massG: 3853 }],
  mixed: false,
  lastWeighedAt: '2026-11-30T10:00:00Z',
  openWeighInGroupId: null,
  ...change,
});

const SHEET_ANSWER = {
  id: SHEET,
  unitId: UNIT,
  madeAt: '2026-11-30T14:00:00Z',
  madeByName: 'M. Oduya',
  request: { job: 'newInstall', basis: { refrigerant: 'R-32', factoryChargeG: 1200 } },
  result: { weighInG: 90, totalG: 1290, extraG: 90 },
  room: null,
  jobId: null,
};

const POSTED = {
  entries: [
    {
      id: idOf(103),
      groupId: idOf(1),
      sequence: 8866,
      refrigerant: 'R-32',
      massG: 90,
      from: { place: 'cylinder', id: C1 },
      to: { place: 'unit', id: UNIT },
      addedByServer: false,
    },
  ],
  balances: [],
  flags: [],
  warnings: [],
};

function answer(path: string, method: string, body: string | null): Response {
  if (path === '/entry-groups/preview') return json({ ...NOTHING, questions: [], reasons: [], ...previewed });
  if (method === 'POST') {
    posted.push({ path, body: JSON.parse(body ?? '{}') });
    if (path.endsWith('/full-charges')) return json(NOTHING, 201);
    const given = answerToPost();
    if (given) return given;
    throw new TypeError('Failed to fetch');
  }
  if (path === '/session') {
    return json({
      person: { id: ME, name: 'M. Oduya', preferences: preferencesFor('en-GB') },
      firm: { id: 'f', name: 'Harrow & Tansy Climate' },
      firms: [],
      permissions: ['entries:post'],
    });
  }
  if (path === `/units/${UNIT}`) {
    return json({
      id: UNIT,
      tag: '0412',
      name: 'back bedroom',
      refrigerant: 'R-32',
      book: { known: true, massG: 1200, byRefrigerant: [{ refrigerant: 'R-32', massG: 1200 }] },
      fullCharge: { id: idOf(70), massG: 1200, validFrom: '2026-01-01T00:00:00Z' },
    });
  }
  if (path === `/charge-sheets/${SHEET}`) return json(SHEET_ANSWER);
  if (path.startsWith('/cylinders')) {
    return json({
      items: [
        cylinder({ id: C1, tag: '7741' }),
        cylinder({
          id: C2,
          tag: '7739',
          refrigerant: 'R-410A',
          byRefrigerant: [{ refrigerant: 'R-410A', massG: 900 }],
        }),
      ],
      nextCursor: null,
    });
  }
  return json({ items: [], nextCursor: null });
}

const Nothing = () => null;

function open() {
  const router = createMemoryRouter(
    [
      { path: '/units/:unitId/weigh-in', loader, Component, HydrateFallback: Nothing },
      { path: '*', element: null },
    ],
    { initialEntries: [`/units/${UNIT}/weigh-in?sheet=${SHEET}`] },
  );
  return render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
}

async function toTheReview(user: UserEvent): Promise<void> {
  await user.click(await screen.findByRole('button', { name: /7741/ }));
  await user.click(await screen.findByRole('button', { name: 'Go on' }));
  await user.type(await screen.findByLabelText('What the hose holds'), '28');
  await user.click(screen.getByRole('button', { name: 'Go on' }));
  await user.click(await screen.findByRole('button', { name: /^Lost/ }));
  await user.type(await screen.findByLabelText(/scale reads/), '8505');
  await user.click(screen.getByRole('button', { name: 'This is the start reading' }));
  await user.type(await screen.findByLabelText(/scale reads now/), '8415');
  await user.click(screen.getByRole('button', { name: 'This is the end reading' }));
  await user.click(await screen.findByRole('button', { name: /^Lost/ }));
  await screen.findByRole('button', { name: /^Post/ });
}

const groups = () => posted.filter(({ path }) => path === '/entry-groups').map(({ body }) => body);
const asSent = (body: unknown): EntryGroupRequest => entryGroupRequest.parse(body);

// A whole weigh-in is some thirty key presses.
vi.setConfig({ testTimeout: 30_000 });

describe('A weigh-in to a charge sheet, on screen', () => {
  beforeAll(async () => {
    vi.stubGlobal('scrollTo', () => undefined);
    changePreferences(preferencesFor('en-GB'));
    await startMessages();
  });
  beforeEach(() => {
    posted = [];
    previewed = {};
    answerToPost = () => json(POSTED, 201);
    localStorage.clear();
    vi.stubGlobal('fetch', async (url: string, init: RequestInit) =>
      answer(url.replace('/api/v1', '').replace(/\?.*/, ''), init.method ?? 'GET', init.body as string | null),
    );
  });
  afterEach(() => {
    cleanup();
    queryClient.clear();
    forgetAllDrafts();
  });

  it('stops a cylinder with another refrigerant with a danger caution and offers the fitting one', async () => {
    open();
    expect(await screen.findByRole('button', { name: /7741/ })).toBeVisible();
    expect(screen.queryByRole('button', { name: /7739/ })).toBeNull();
    expect(screen.getByText(/7739 holds R-410A/).closest('p')).toHaveTextContent('DANGER');
  });

  it('sets the sheet’s full charge, posts what was weighed once however often it is pressed, and says its number', async () => {
    const user = userEvent.setup();
    open();
    await toTheReview(user);
    await user.dblClick(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    expect(await screen.findByRole('heading', { name: 'Posted as no. 8,866' })).toBeVisible();
    expect(posted.map(({ path }) => path)).toEqual([`/units/${UNIT}/full-charges`, '/entry-groups']);
    expect(posted[0]?.body).toMatchObject({ mass: { value: '1290', unit: 'g' }, validFrom: '2026-11-30T14:00:00Z' });
    expect(moves(asSent(groups()[0]))).toEqual(['C1 -> U 90', 'C1 -> atmosphere, hose 28']);
  });

  it('shows before posting what the books will add and which reason is wanted, as the server judges it', async () => {
    const user = userEvent.setup();
    previewed = {
      entries: [
        {
          id: idOf(201),
          massG: 12,
          from: { place: 'cylinder', id: C1, as: null, label: '7741' },
          to: { place: 'cylinderDifference', id: null, as: null, label: '' },
          addedByServer: true,
        },
      ],
      reasons: [{ code: 'reasonForPastLimit', path: '/reason', message: 'R-09 is past its limit: say why.' }],
    };
    open();
    await toTheReview(user);
    expect(await screen.findByText('added by the books')).toBeVisible();
    expect(screen.getByText(/12\sg/)).toBeVisible();
    expect(screen.getByLabelText('Reason')).toHaveAccessibleDescription('R-09 is past its limit: say why.');
  });

  it('sends the same again after a lost answer, and says that nothing is lost', async () => {
    const user = userEvent.setup();
    open();
    await toTheReview(user);
    answerToPost = () => null;
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    expect(await screen.findByText(/Nothing is lost/)).toBeVisible();
    answerToPost = () => json(POSTED, 201);
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    await screen.findByRole('heading', { name: /Posted/ });
    const [first, second] = groups().map(({ deviceSentAt: _sent, ...content }) => content);
    expect(second).toEqual(first);
  });

  it('asks for the reason where the server wants one, and sends it with the same ids', async () => {
    const user = userEvent.setup();
    open();
    await toTheReview(user);
    answerToPost = () =>
      json(
        {
          code: 'reasonRequired',
          detail: 'Say why.',
          errors: [{ path: '/reason', code: 'reasonForPastLimit', message: 'Past its limit: say why.' }],
        },
        422,
      );
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    expect(await screen.findByText('Past its limit: say why.')).toBeVisible();
    answerToPost = () => json(POSTED, 201);
    await user.type(screen.getByLabelText('Reason'), 'nothing else at hand');
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    await screen.findByRole('heading', { name: /Posted/ });
    expect(groups().map(({ groupId, reason }) => [groupId, reason])).toEqual([
      [groups()[0]?.groupId, null],
      [groups()[0]?.groupId, 'nothing else at hand'],
    ]);
  });

  it('asks how full the unit is when the sheet’s full charge is not taken over, and posts only with an answer', async () => {
    const user = userEvent.setup();
    open();
    await toTheReview(user);
    await user.click(screen.getByRole('checkbox', { name: /Full charge of this unit becomes/ }));
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    expect(await screen.findByText(/Say how full it is/)).toBeVisible();
    expect(posted).toEqual([]);
    const question = screen.getByRole('group', { name: 'How full is the unit now?' });
    await user.click(within(question).getByRole('radio', { name: /^More than full/ }));
    await user.click(screen.getByRole('button', { name: /^Post 90\sg$/ }));
    await screen.findByRole('heading', { name: /Posted/ });
    expect(groups()[0]).toMatchObject({ statements: [{ about: 'unit', id: UNIT, is: 'moreThanFull' }] });
  });

  it('refuses an end reading above the start with both figures, and keeps it in the window', async () => {
    const user = userEvent.setup();
    open();
    await user.click(await screen.findByRole('button', { name: /7741/ }));
    await user.click(await screen.findByRole('button', { name: 'Go on' }));
    await user.click(await screen.findByRole('button', { name: 'Too little to count' }));
    await user.type(await screen.findByLabelText(/scale reads/), '8505');
    await user.click(screen.getByRole('button', { name: 'This is the start reading' }));
    await user.type(await screen.findByLabelText(/scale reads now/), '8510');
    await user.click(screen.getByRole('button', { name: 'This is the end reading' }));
    expect(await screen.findByText(/8,510\sg is above the start, 8,505\sg/)).toBeVisible();
    expect(screen.getByLabelText(/scale reads now/)).toHaveValue('8,510');
  });

  it('is found again after a reload, at the same question and with everything keyed in', async () => {
    const user = userEvent.setup();
    const { unmount } = open();
    await toTheReview(user);
    unmount();
    queryClient.clear();
    open();
    expect(await screen.findByRole('button', { name: /^Post 90\sg$/ })).toBeVisible();
    expect(screen.getByText('Exactly the 90 g that were asked for.')).toBeVisible();
  });
});
