import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { createChargeSheetRequest } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './unit-charge.route.tsx';

const UNIT = '0195f0c4-0000-7000-8000-000000000412';

/** The server's answers by path; posted bodies are kept. */
let posted: unknown[] = [];
let answerToPost = () => new Response('{}', { status: 201 });
function answer(path: string, method: string, body: string | null): Response {
  if (method === 'POST') {
    posted.push(JSON.parse(body ?? '{}'));
    return answerToPost();
  }
  const json = (value: unknown) => new Response(JSON.stringify(value), { status: 200 });
  if (path === '/session')
    return json({
      person: { id: 'p', name: 'M. Oduya', email: 'm@example.org', preferences: preferencesFor('en-GB') },
      firm: { id: 'f', name: 'Harrow & Tansy Climate', gwpSet: 'AR4' },
      firms: [],
      permissions: ['charge-sheets:make'],
    });
  if (path.startsWith('/cylinders'))
    return json({
      items: [
        {
          id: 'c1',
          tag: '7741',
          kind: 'refillable',
          mixed: false,
          contentG: 905,
          heldBy: 'p',
          tareG: 7600,
          lastReadingGrossG: 8505,
        },
        {
          id: 'c2',
          tag: 'R-09',
          kind: 'recovery',
          mixed: false,
          contentG: 900,
          heldBy: 'p',
          tareG: 7600,
          lastReadingGrossG: 8500,
        },
      ],
      nextCursor: null,
    });
  if (path === `/units/${UNIT}/charge-bases`)
    return json({
      items: [
        {
          id: 'b1',
          manual: { document: 'Installation manual', page: '14' },
          basis: {
            refrigerant: 'R-32',
            factoryChargeG: 1200,
            precharge: { scope: 'system', lengthM: 7.5 },
            rate: { kind: 'flat', gPerM: 20 },
            rounding: { toG: 1, direction: 'nearest' },
          },
        },
      ],
      nextCursor: null,
    });
  if (path === `/units/${UNIT}/line-sets`)
    return json({
      items: [
        {
          id: 'l1',
          branches: [
            {
              name: 'A',
              parent: null,
              liquidOdMm: 6.35,
              gasOdMm: 9.52,
              lengthM: 12,
              riseM: 3,
              bends: 0,
              equivalentMPerBend: 0,
            },
          ],
        },
      ],
      nextCursor: null,
    });
  if (path === `/units/${UNIT}`)
    return json({ id: UNIT, tag: '0412', name: 'back bedroom', siteName: 'Millrace', refrigerant: 'R-32' });
  return new Response('{}', { status: 404 });
}

beforeAll(startMessages);
beforeEach(() => {
  posted = [];
  answerToPost = () => new Response('{}', { status: 201 });
  vi.stubGlobal('fetch', (url: string, init: RequestInit) =>
    Promise.resolve(answer(url.replace('/api/v1', ''), init.method ?? 'GET', (init.body as string) ?? null)),
  );
  changePreferences(preferencesFor('en-GB'));
  forgetAllDrafts();
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openUnitCharge() {
  const router = createMemoryRouter(
    [
      { path: '/units/:unitId/charge', element: <Component />, loader, hydrateFallbackElement: <p /> },
      { path: '/units/:unitId/weigh-in', element: <p>weighing in</p> },
    ],
    { initialEntries: [`/units/${UNIT}/charge`] },
  );
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByText('weigh in 90 g');
  return { router, person: userEvent.setup() };
}

describe('The charge of a unit on record', () => {
  it('is worked out at once from its charge basis and line set, with the manual’s page at each line', async () => {
    await openUnitCharge();
    expect(screen.getByRole('textbox', { name: 'factory charge' })).toHaveValue('1200');
    expect(screen.getByRole('textbox', { name: 'pipe run, one way' })).toHaveValue('12');
    expect(screen.getAllByText('manual: rate, p. 14')).toHaveLength(1);
  });

  it('is kept as one charge sheet under an id of its own, and goes on to the scale', async () => {
    const { router, person } = await openUnitCharge();
    await person.click(screen.getByRole('button', { name: 'Start weighing in' }));
    await screen.findByText('weighing in');
    expect(posted).toHaveLength(1);
    const sheet = createChargeSheetRequest.parse(posted[0]);
    expect(sheet.id).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7/);
    expect(sheet.request.basis.factoryChargeG).toBe(1200);
    expect(sheet.manual).toEqual({ document: 'Installation manual', page: '14' });
    expect(router.state.location).toMatchObject({ pathname: `/units/${UNIT}/weigh-in`, search: `?sheet=${sheet.id}` });
  });

  it('sends the same id again after a failure, so that nothing is kept twice, and loses nothing typed', async () => {
    const { person } = await openUnitCharge();
    const run = screen.getByRole('textbox', { name: 'pipe run, one way' });
    await person.clear(run);
    await person.type(run, '13');
    answerToPost = () => new Response('{}', { status: 503, headers: { 'content-type': 'application/problem+json' } });
    await person.click(screen.getByRole('button', { name: 'Start weighing in' }));
    await screen.findByText('The charge sheet was not kept.');
    expect(run).toHaveValue('13');

    answerToPost = () => new Response('{}', { status: 201 });
    await person.click(screen.getByRole('button', { name: 'Start weighing in' }));
    await screen.findByText('weighing in');
    expect(new Set(posted.map((body) => (body as { id: string }).id)).size).toBe(1);
  });

  it('says where the scale must stand once a cylinder is chosen, and offers none that is nothing to charge from', async () => {
    const { person } = await openUnitCharge();
    const cylinder = screen.getByRole('combobox', { name: 'cylinder' });
    await waitFor(() => expect(cylinder).toHaveTextContent('7741'));
    expect(cylinder).not.toHaveTextContent('R-09');
    await person.selectOptions(cylinder, 'c1');
    expect(screen.getByText('weigh in 90 g, close the cylinder at 8,415 g')).toBeVisible();
  });
});
