import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import type { ImportView } from '../../../shared/imports/import.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './imports.route.tsx';

const ID = '0195f0c4-0000-7000-8000-000000000001';
const view = (change: Partial<ImportView> = {}): ImportView => ({
  id: ID,
  kind: 'cylinders',
  fileName: 'stock.csv',
  sha256: 'ab'.repeat(32),
  read: {
    format: 'csv',
    encoding: 'windows-1252',
    delimiter: ';',
    sheet: null,
    rows: 2,
    formulas: 1,
    decimal: 'comma',
  },
  columns: [
    { head: 'Tag', samples: ['B1', 'B2'] },
    { head: 'Art', samples: ['recovery'] },
    { head: 'Gas', samples: ['R-32'] },
    { head: 'Tara', samples: ['7,6'] },
  ],
  fields: [
    { name: 'tag', required: true, guess: 0 },
    { name: 'kind', required: true, guess: null },
    { name: 'refrigerant', required: true, guess: 2 },
    { name: 'tare', required: true, guess: 3 },
    { name: 'batch', required: false, guess: null },
  ],
  state: 'read',
  rowsDone: 0,
  wrongRows: 0,
  errorCount: 0,
  errors: [],
  made: 0,
  already: 0,
  recordSequence: null,
  problem: null,
  ...change,
});

let permissions: string[] = [];
let sent: { path: string; body: unknown }[] = [];
let stands = view();
let afterCheck = view({ state: 'checked', made: 2 });

beforeAll(async () => {
  changePreferences({ locale: 'en-GB', mass: 'kg' });
  await startMessages();
});
beforeEach(() => {
  permissions = ['registers:correct'];
  sent = [];
  stands = view();
  afterCheck = view({ state: 'checked', made: 2 });
  queryClient.clear();
  forgetAllDrafts();
  vi.stubGlobal('fetch', async (url: string, options: RequestInit) => {
    const path = url.replace('/api/v1', '');
    const json = (value: unknown, status = 200) => new Response(JSON.stringify(value), { status });
    if (path === '/session')
      return json({
        person: { id: 'p', name: 'M. Oduya', email: 'm@example.org', preferences: preferencesFor('en-GB') },
        firm: { id: 'f', name: 'Harrow & Tansy Climate', gwpSet: 'AR4' },
        firms: [],
        permissions,
      });
    if (options.method !== 'POST') return json(stands);
    sent.push({
      path,
      body: options.body instanceof FormData ? options.body : JSON.parse(String(options.body ?? 'null')),
    });
    if (path.endsWith('/check')) stands = afterCheck;
    if (path.endsWith('/run')) stands = view({ state: 'done', made: 2 });
    return json(stands, path === '/imports' ? 201 : 200);
  });
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function open(at = '/imports') {
  const router = createMemoryRouter([{ path: '/imports', Component, loader }], { initialEntries: [at] });
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('heading', { name: 'Bring in a table' });
  return userEvent.setup();
}

describe('Bringing in a table', () => {
  it('sends the kind before the file, and says how the file was understood', async () => {
    const user = await open();
    await user.click(await screen.findByRole('radio', { name: 'cylinders' }));
    await user.upload(screen.getByLabelText('file'), new File(['Tag\nB1'], 'stock.csv', { type: 'text/csv' }));
    await user.click(screen.getByRole('button', { name: 'Read the file' }));
    expect(await screen.findByText('CSV, Windows-1252, columns apart by semicolons, 2 rows.')).toBeVisible();
    expect(screen.getByText(/1 cell holds a formula/)).toBeVisible();
    const form = [...(sent as { body: FormData }[])].flatMap(({ body }) => [...body.entries()]);
    expect(form.map(([name, value]) => [name, typeof value === 'string' ? value : value.name])).toEqual([
      ['kind', 'cylinders'],
      ['file', 'stock.csv'],
    ]);
    expect(screen.getByLabelText('decimals')).toHaveValue('comma');
  });

  it('asks for a column that is needed before it sends anything', async () => {
    const user = await open(`/imports?file=${ID}`);
    await user.click(await screen.findByRole('button', { name: 'Check the rows' }));
    expect(screen.getByText('Say which column holds this.')).toBeVisible();
    expect(sent).toEqual([]);
    await user.selectOptions(screen.getByLabelText('kind (needed)'), 'Art');
    await user.click(screen.getByRole('button', { name: 'Check the rows' }));
    await screen.findByText('2 rows are right and new.');
    expect(sent[0]).toMatchObject({
      path: `/imports/${ID}/check`,
      body: {
        columns: { tag: 0, kind: 1, refrigerant: 2, tare: 3 },

        decimal: 'comma',
        dateOrder: 'dmy',
      },
    });
    await user.click(screen.getByRole('button', { name: 'Bring in 2 rows' }));
    expect(await screen.findByText('2 rows were brought in.')).toBeVisible();
    expect(screen.queryByRole('button', { name: /Check/ })).not.toBeInTheDocument();
  });

  it('lists what is wrong by row and column, offers all of it as a file, and does not go on', async () => {
    afterCheck = view({
      state: 'checked',
      wrongRows: 1,
      errorCount: 1,
      errors: [
        { row: 3, column: 'Art', given: 'bucket', code: 'importWord', message: '“bucket” is not a word known here.' },
      ],
    });
    const user = await open(`/imports?file=${ID}`);
    await user.selectOptions(await screen.findByLabelText('kind (needed)'), 'Art');
    await user.click(screen.getByRole('button', { name: 'Check the rows' }));
    const table = await screen.findByRole('table');
    expect(within(table).getAllByRole('row')[1]).toHaveTextContent('3Artbucket“bucket” is not a word known here.');
    expect(screen.getByRole('link', { name: 'All errors as CSV' })).toHaveAttribute(
      'href',
      `/api/v1/imports/${ID}/errors.csv`,
    );
    expect(screen.queryByRole('button', { name: /Bring in/ })).not.toBeInTheDocument();
  });

  it('does not send a file that is larger than is taken, and says by how much', async () => {
    const user = await open();
    const file = new File([new Uint8Array(8 * 1024 * 1024 + 1)], 'large.csv', { type: 'text/csv' });
    await user.upload(await screen.findByLabelText('file'), file);
    expect(screen.getByText('The file holds 8.1 MB; 8 MB are possible. Cut it into several.')).toBeVisible();
    await user.click(screen.getByRole('button', { name: 'Read the file' }));
    expect(sent).toEqual([]);
  });

  it('can be stopped while it checks, and says that nothing was kept', async () => {
    stands = view({ state: 'checking', rowsDone: 1 });
    const user = await open(`/imports?file=${ID}`);
    expect(await screen.findByText('1 of 2 rows')).toBeVisible();
    stands = view({ state: 'cancelled' });
    await user.click(screen.getByRole('button', { name: 'Stop' }));
    expect(sent[0]).toMatchObject({ path: `/imports/${ID}/cancel` });
    expect(await screen.findByText('Stopped. Nothing was kept.')).toBeVisible();
    expect(screen.getByRole('button', { name: 'Check again' })).toBeVisible();
  });

  it('says why it broke off', async () => {
    stands = view({ state: 'failed', problem: 'The log is busy.' });
    await open(`/imports?file=${ID}`);
    expect(await screen.findByText('It broke off, and nothing was kept.')).toBeVisible();
    expect(screen.getByText('The log is busy.')).toBeVisible();
  });

  it('says that a file is no longer held, that nothing is half done, and takes it again', async () => {
    vi.stubGlobal('fetch', async (url: string) =>
      url.includes('/imports/')
        ? new Response(JSON.stringify({ code: 'notFound', title: 'Not found', status: 404 }), { status: 404 })
        : new Response(JSON.stringify({ person: { preferences: preferencesFor('en-GB') }, firms: [], permissions })),
    );
    await open(`/imports?file=${ID}`);
    expect(await screen.findByText('The server no longer holds this file.')).toBeVisible();
    expect(screen.getByText(/Nothing is half done: all rows came in or none/)).toBeVisible();
    expect(screen.getByLabelText('file')).toBeVisible();
  });

  it('is not offered to who may not do it', async () => {
    permissions = [];
    await open();
    expect(screen.getByText(/brought in by the compliance manager/)).toBeVisible();
    expect(screen.queryByLabelText('file')).not.toBeInTheDocument();
  });
});
