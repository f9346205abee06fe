import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { NetworkError, Problem } from '../api/http.ts';
import { forgetAllDrafts, useDraft } from '../lib/draft.ts';
import { startMessages } from '../lib/messages.ts';
import { changePreferences, preferencesFor } from '../lib/preferences.ts';
import { RouteProblem } from './route-problem.tsx';

const reports: { message: string; where: string }[] = [];

beforeAll(async () => {
  await startMessages();
  changePreferences(preferencesFor('en-GB'));
});
beforeEach(() => {
  reports.length = 0;
  vi.stubGlobal('fetch', (_url: string, init: RequestInit) => {
    reports.push(JSON.parse(init.body as string));
    return Promise.resolve(new Response(null, { status: 204 }));
  });
  vi.spyOn(console, 'error').mockImplementation(() => {}); // React repeats what the boundary has caught
  forgetAllDrafts();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

function Fragile() {
  const [text, setText] = useDraft('fragile', () => '');
  if (text === 'boom') throw new Error('planted');
  return <input aria-label="note" value={text} onChange={(event) => setText(event.target.value)} />;
}

function Mended() {
  const [text] = useDraft('fragile', () => '');
  return <p>{text}</p>;
}

const open = (element: React.ReactNode, loader: () => unknown = () => null) =>
  render(
    <RouterProvider
      router={createMemoryRouter(
        [{ path: '/', element, loader, errorElement: <RouteProblem />, hydrateFallbackElement: <p /> }],
        { initialEntries: ['/'] },
      )}
    />,
  );

describe('An error in a page', () => {
  it('stays inside the page, says that what was typed is kept, and reports itself', async () => {
    open(<Fragile />);
    await userEvent.type(await screen.findByRole('textbox', { name: 'note' }), 'boom');
    expect(await screen.findByRole('heading', { name: 'This page broke' })).toBeVisible();
    expect(screen.getByText(/What you typed is kept/)).toBeVisible();
    expect(reports).toEqual([expect.objectContaining({ message: 'planted', where: '/' })]);
  });

  it('leaves what was typed before it for the next try', async () => {
    open(<Fragile />);
    await userEvent.type(await screen.findByRole('textbox', { name: 'note' }), 'boo');
    await userEvent.type(screen.getByRole('textbox', { name: 'note' }), 'm');
    await screen.findByRole('heading', { name: 'This page broke' });
    cleanup();
    open(<Mended />);
    expect(await screen.findByText('boo')).toBeVisible();
  });

  it.each([
    [new NetworkError('x'), 'No connection'],
    [new Problem(503, 'notReady', 'Not now.', [], 'r-1'), 'The server failed'],
    [new Problem(404, 'notFound', 'No.', [], null), 'Nothing here'],
    [new Response(null, { status: 404 }), 'Nothing here'],
  ])('tells %s apart', async (thrown, title) => {
    open(<p />, () => {
      throw thrown;
    });
    expect(await screen.findByRole('heading', { name: title })).toBeVisible();
    expect(reports).toEqual([]);
  });

  it('shows the sentence of a refusal and the number to pass on', async () => {
    open(<p />, () => {
      throw new Problem(403, 'notPermitted', 'Your role does not allow this.', [], 'r-77');
    });
    expect(await screen.findByText('Your role does not allow this.')).toBeVisible();
    expect(screen.getByText('request r-77')).toBeVisible();
  });
});
