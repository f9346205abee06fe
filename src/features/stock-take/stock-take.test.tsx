import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component as Scan, loader as scanLoader } from './scan.route.tsx';
import { Component, loader } from './stock-take.route.tsx';

const id = (number: number) => `0195f0c4-0000-7000-8000-${String(number).padStart(12, '0')}`;
const cylinder = (number: number, tag: string, contentG: number, fields = {}) => ({
  id: id(number),
  tag,
  kind: 'refillable',
  refrigerant: 'R-32',
  tareG: 7600,
  contentG,
  limitG: 9000,
  heldBy: 'p',
  lastWeighedAt: '2026-11-01T12:00:00Z',
  openWeighInGroupId: null,
  ...fields,
});
const CYLINDERS = [cylinder(1, '7741', 905), cylinder(2, '7742', 4000), cylinder(3, '7743', 100)];

let posted: { groupId: string; readings: { cylinderId: string; value: string; unit: string }[] }[] = [];
let answerToPost: (body: (typeof posted)[number]) => Response;
let cylinders: unknown[] = CYLINDERS;
const json = (value: unknown, status = 200) =>
  new Response(JSON.stringify(value), { status, headers: { 'Content-Type': 'application/json' } });

function answer(path: string, method: string, body: string | null): Response {
  if (method === 'POST') {
    const group = JSON.parse(body ?? '{}');
    posted.push(group);
    return answerToPost(group);
  }
  if (path === '/session')
    return json({
      person: { id: 'p', name: 'M. Oduya', email: 'm@example.org', preferences: preferencesFor('en-GB') },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', gwpSet: 'AR4' },
      firms: [],
      roles: ['technician'],
      permissions: ['entries:post'],
    });
  if (path.startsWith('/tools'))
    return json({
      items: [
        {
          id: id(90),
          name: 'Scale 2',
          scale: { resolutionG: 50, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 },
        },
      ],
      nextCursor: null,
    });
  if (path.startsWith('/cylinders')) return json({ items: cylinders, nextCursor: null });
  return json({ items: [], nextCursor: null });
}

beforeAll(async () => {
  changePreferences({ locale: 'en-GB', mass: 'g' });
  await startMessages();
});
beforeEach(() => {
  posted = [];
  cylinders = CYLINDERS;
  answerToPost = () => json({ entries: [], balances: [], flags: [], warnings: [] }, 201);
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
  const router = createMemoryRouter(
    [
      { path: '/cylinders/stock-take', Component, loader },
      { path: '/cylinders/scan', Component: Scan, loader: scanLoader },
    ],
    { initialEntries: ['/cylinders/stock-take'] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByLabelText(/cylinder 7741/);
  return userEvent.setup();
}
const blankOf = (tag: string) => screen.getByLabelText(new RegExp(`cylinder ${tag}$`));

describe('A stock-take', () => {
  it('says while typing what differs, and whether the scale explains it', async () => {
    const user = await open();
    await user.type(blankOf('7741'), '8501');
    // 901 g against 905 g; one unnamed scale of 5 g steps tells 4.082 g (`formulas.md` j)
    expect(screen.getByText(/4\sg less/)).toHaveTextContent('Within the scales.');
    expect(screen.getByText(/the scale can tell 4.082\sg/)).toBeVisible();
    await user.type(blankOf('7742'), '11500');
    expect(screen.getByText(/100\sg less/)).toHaveTextContent('Not explained.');
    await user.selectOptions(screen.getByLabelText('scale'), 'Scale 2');
    // d = 50 g: 2 u is 40.8 g, 3 u 61.2 g, so 100 g stay unexplained and 4 g within
    expect(screen.getByText(/100\sg less/)).toHaveTextContent('Not explained.');
    expect(screen.getAllByText(/the scale can tell 40.825\sg/)).toHaveLength(2);
  });

  it('posts one weighing for each cylinder that was read, and leaves out the others', async () => {
    const user = await open();
    await user.type(blankOf('7741'), '8505');
    await user.type(blankOf('7743'), '7700');
    await user.click(screen.getByRole('button', { name: 'Record 2 readings' }));
    await screen.findByText(/2 cylinders weighed/);
    expect(
      posted.map(({ readings }) => readings.map(({ cylinderId, value, unit }) => [cylinderId, value, unit])),
    ).toEqual([[[id(1), '8505', 'g']], [[id(3), '7700', 'g']]]);
    for (const body of posted) expect(entryGroupRequest.safeParse(body).error).toBeUndefined();
    expect(screen.getByRole('status')).toHaveTextContent('2 within the scales and 1 not weighed this time');
    expect(blankOf('7741')).toBeDisabled();
  });

  it('keeps one refused reading from holding the others, and sends it again with a reason', async () => {
    answerToPost = (body) =>
      body.readings[0]?.cylinderId === id(1) && !('reason' in body && body.reason)
        ? json(
            {
              code: 'reasonRequired',
              title: 'no',
              errors: [{ path: '/reason', code: 'reasonRequired', message: 'Say why.' }],
            },
            422,
          )
        : json({ entries: [], balances: [], flags: [], warnings: [] }, 201);
    const user = await open();
    await user.type(blankOf('7741'), '8505');
    await user.type(blankOf('7742'), '11600');
    await user.click(screen.getByRole('button', { name: 'Record 2 readings' }));
    expect(await screen.findByText('Not recorded: Say why.')).toBeVisible();
    expect(screen.getByText(/1 cylinder weighed/)).toBeVisible();
    await user.type(screen.getByLabelText('reason'), 'filled past it on the roof');
    await user.click(screen.getByRole('button', { name: 'Record 1 reading' }));
    await screen.findByText(/2 cylinders weighed/);
    expect(posted[2]?.groupId).toBe(posted[0]?.groupId);
  });

  it('sends what got no answer again, as it was', async () => {
    let reachable = false;
    answerToPost = () => {
      if (!reachable) throw new TypeError('network');
      return json({ entries: [], balances: [], flags: [], warnings: [] }, 200);
    };
    vi.stubGlobal('fetch', async (url: string, options: RequestInit) =>
      answer(url.replace('/api/v1', ''), options.method ?? 'GET', options.body as string | null),
    );
    const user = await open();
    await user.type(blankOf('7741'), '8505');
    await user.click(screen.getByRole('button', { name: 'Record 1 reading' }));
    expect(await screen.findByText(/whether it was recorded is not known/)).toBeVisible();
    expect(blankOf('7741')).toBeDisabled();
    expect(screen.getByLabelText('scale')).toBeDisabled();
    reachable = true;
    await user.click(screen.getByRole('button', { name: 'Record 1 reading' }));
    await screen.findByText(/1 cylinder weighed/);
    const same = posted.map((body) => JSON.stringify({ ...body, deviceSentAt: null }));
    expect(new Set(same).size).toBe(1);
  });

  it('takes no reading of a cylinder whose weigh-in is still open', async () => {
    cylinders = [CYLINDERS[0], cylinder(4, '7744', 500, { openWeighInGroupId: id(80) })];
    await open();
    expect(screen.queryByLabelText(/cylinder 7744$/)).not.toBeInTheDocument();
    expect(screen.getByRole('link', { name: 'Weigh it back' })).toHaveAttribute('href', `/weigh-back/${id(80)}`);
  });

  it('keeps what was typed when the page is opened again', async () => {
    const user = await open();
    await user.type(blankOf('7741'), '8501');
    cleanup();
    await open();
    await waitFor(() => expect(blankOf('7741')).toHaveValue('8501'));
  });
});

describe('The page that scans tags', () => {
  it('says why there is no camera without a secure context, and finds a cylinder by its number', async () => {
    vi.stubGlobal('isSecureContext', false);
    const router = createMemoryRouter([{ path: '/cylinders/scan', Component: Scan, loader: scanLoader }], {
      initialEntries: ['/cylinders/scan'],
    });
    render(
      <QueryClientProvider client={queryClient}>
        <RouterProvider router={router} />
      </QueryClientProvider>,
    );
    expect(await screen.findByText('The camera works over HTTPS only')).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Turn the camera on' })).not.toBeInTheDocument();
    await userEvent.type(screen.getByLabelText('number on the tag or collar'), '7741');
    expect(await screen.findByRole('link', { name: /7741/ })).toHaveAttribute('href', `/cylinders/${id(1)}`);
  });
});
