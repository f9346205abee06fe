import { QueryClientProvider } from '@tanstack/react-query';
import { act, cleanup, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { queryClient } from '../../api/query-client.ts';
import { forgetAllDrafts } from '../../lib/draft.ts';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Component, loader } from './charge.route.tsx';

beforeAll(startMessages);
beforeEach(() => {
  vi.stubGlobal('fetch', () => Promise.resolve(new Response('{}', { status: 401 })));
  changePreferences(preferencesFor('en-GB'));
  forgetAllDrafts();
  queryClient.clear();
});
afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

async function openCharge() {
  const router = createMemoryRouter([{ path: '/', element: <Component />, loader, hydrateFallbackElement: <p /> }]);
  render(
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  await screen.findByRole('combobox', { name: 'refrigerant' });
  return userEvent.setup();
}

type Person = Awaited<ReturnType<typeof openCharge>>;
/** On a phone the rarer figures stand behind one line. */
const openMore = (person: Person) => person.click(screen.getByText('More figures'));
const field = (name: string) => screen.getByRole('textbox', { name });
/** Grouping and no-break spaces are for the eye. */
const total = () => (screen.getAllByRole('status')[0]?.textContent ?? '').replace(/\s/g, ' ');
const line = (text: string) => (_: string, element: Element | null) =>
  element?.tagName === 'P' && (element.textContent ?? '').replace(/\s/g, ' ').startsWith(text);

/** The invented unit of the tests: R-32, 1,200 g, 7.5 m pre-charged, 20 g/m, quarter-inch pipe. */
async function enterUnit(person: Person, runM: string) {
  await person.selectOptions(screen.getByRole('combobox', { name: 'refrigerant' }), 'R-32');
  await person.type(field('factory charge'), '1200');
  await person.selectOptions(screen.getByRole('combobox', { name: 'liquid pipe' }), '6.35');
  await person.type(field('pipe run, one way'), runM);
  await person.type(field('pre-charged by the factory'), '7.5');
  await person.type(field('rate in the manual'), '20');
}

describe('The charge screen', () => {
  it('answers while typing: 12.0 m gives 90 g and 1,290 g, with each line of the arithmetic', async () => {
    const person = await openCharge();
    await enterUnit(person, '12.0');
    expect(total()).toBe('1,290 g');
    expect(screen.getByText('weigh in 90 g')).toBeVisible();
    expect(screen.getByText(line('12.0 m − 7.5 m = 4.5 m'))).toBeInTheDocument();
    expect(screen.getByText(line('4.5 m × 20 g/m = 90 g'))).toBeInTheDocument();
    expect(screen.getByText(line('1,200 g + 90 g = 1,290 g'))).toBeInTheDocument();
    const beam = screen.getByRole('img', { name: /factory 1,200\sg, extra 90\sg, total 1,290\sg/ });
    expect(within(beam).getByText(/no room check up to 1,842\sg/)).toBeInTheDocument();
  });

  it('says that the rate is plausible for this pipe, with the band: 6.3 to 26.9 g/m', async () => {
    const person = await openCharge();
    await enterUnit(person, '12');
    await waitFor(() => expect(screen.getByText('20 g/m is plausible for 6.35 mm pipe')).toBeVisible());
    expect(screen.getByText('6.3 to 26.9 g/m')).toBeVisible();
  });

  it.each(['7.5', '3'])('has nothing to add at %s m, which the factory charge serves', async (runM) => {
    const person = await openCharge();
    await enterUnit(person, runM);
    expect(total()).toBe('1,200 g');
    expect(screen.getByText('nothing to add')).toBeVisible();
  });

  it('names limit and value beside the field when the run is out of limits, and shows no figure', async () => {
    const person = await openCharge();
    await enterUnit(person, '26');
    expect(total()).toBe('1,570 g');
    await openMore(person);
    await person.type(field('longest'), '25');
    expect(total()).toBe('–');
    const run = field('pipe run, one way');
    expect(run).toBeInvalid();
    expect(run).toHaveAccessibleDescription(/The line set is 26 m long .* the manual allows 25 m/);
    expect(run).toHaveValue('26');
    expect(screen.queryByText(/weigh in/)).toBeNull();
  });

  it('takes nothing as zero: it names what is still needed and leads there', async () => {
    const person = await openCharge();
    await person.selectOptions(screen.getByRole('combobox', { name: 'refrigerant' }), 'R-32');
    expect(total()).toBe('–');
    await person.click(
      screen.getByRole('button', { name: /^Still needed: factory charge, liquid pipe, .*rate in the manual$/ }),
    );
    expect(field('factory charge')).toHaveFocus();
  });

  it('says where the scale must stand when the cylinder has been weighed', async () => {
    const person = await openCharge();
    await enterUnit(person, '12');
    await person.type(field('scale reads now'), '8505');
    expect(screen.getByText('weigh in 90 g, close the cylinder at 8,415 g')).toBeVisible();
  });

  it('keeps everything typed over a reload', async () => {
    const person = await openCharge();
    await enterUnit(person, '12');
    cleanup();
    await openCharge();
    expect(field('pipe run, one way')).toHaveValue('12');
    expect(total()).toBe('1,290 g');
  });

  it('charges by pipe size over several pipes: each size at its own rate', async () => {
    const person = await openCharge();
    await enterUnit(person, '10');
    await openMore(person);
    await person.selectOptions(screen.getByRole('combobox', { name: 'kind of rate' }), 'byLiquidPipe');
    await person.clear(field('pre-charged by the factory'));
    await person.type(field('pre-charged by the factory'), '0');
    await person.click(screen.getByRole('button', { name: 'More than one pipe' }));
    for (const [index, od] of ['6.35', '9.52'].entries()) {
      await person.click(screen.getByRole('button', { name: 'Add a size' }));
      const group = screen.getByRole('group', { name: 'Rates by liquid pipe' });
      await person.selectOptions(within(group).getAllByRole('combobox', { name: 'liquid pipe' })[index] as Element, od);
      await person.type(
        within(group).getAllByRole('textbox', { name: 'rate for this size' })[index] as Element,
        od === '6.35' ? '15' : '30',
      );
    }
    const pipes = screen.getByRole('group', { name: 'Pipes of the line set' });
    await person.selectOptions(within(pipes).getAllByRole('combobox', { name: 'liquid pipe' })[1] as Element, '9.52');
    await person.type(within(pipes).getAllByRole('textbox', { name: 'pipe run, one way' })[1] as Element, '4');
    // 10 m x 15 g/m + 4 m x 30 g/m = 270 g, worked by hand.
    expect(total()).toBe('1,470 g');
  });

  it('calculates the manual’s formula once its parser is there, and points at a fault in it', async () => {
    const person = await openCharge();
    await enterUnit(person, '12');
    await openMore(person);
    await person.selectOptions(screen.getByRole('combobox', { name: 'kind of rate' }), 'formula');
    const formula = field('The manual\u2019s formula, in grams'.replace('\u2019', "'"));
    await person.type(formula, 'max(0, L - Lp) * 20');
    await waitFor(() => expect(total()).toBe('1,290 g'));
    await person.type(formula, ' + Q');
    await waitFor(() => expect(formula).toHaveAccessibleDescription(/“Q” is no name of a formula/));
    expect(total()).toBe('–');
  });

  it('stops at a room that is too small, with the danger word', async () => {
    const person = await openCharge();
    await enterUnit(person, '50');
    await openMore(person);
    await person.type(field('floor area'), '3');
    // 1,200 + 42.5 x 20 = 2,050 g; 3 m2 at 1.8 m: cap 0.75 x 0.307 x 1.8 x 3 = 1.243 kg, so m1 = 1,842 g (formulas, e).
    await waitFor(() => expect(screen.getByText('DANGER')).toBeInTheDocument());
    expect(
      screen.getByText(/Too much for this room: it takes 1,842\sg, the circuit would hold 2,050\sg/),
    ).toBeVisible();
  });

  it('works in feet and ounces for who types feet and ounces, and in m and g when asked', async () => {
    changePreferences({ ...preferencesFor('en-US'), mass: 'lbOz' });
    const person = await openCharge();
    await person.selectOptions(screen.getByRole('combobox', { name: 'refrigerant' }), 'R-32');
    await person.type(field('factory charge'), '2 lb 12 oz');
    await person.selectOptions(screen.getByRole('combobox', { name: 'liquid pipe' }), '6.35');
    await person.type(field('pipe run, one way'), '41');
    await person.type(field('pre-charged by the factory'), '25');
    await person.type(field('rate in the manual'), '0.21');
    expect(screen.getByText(line('41 ft − 25 ft = 16 ft'))).toBeVisible();
    expect(screen.getByText(line('16 ft × 0.21 oz/ft = 3.36 oz'))).toBeVisible();
    expect(screen.getByText(line('3.36 oz = 95.25 g to the nearest 1 g = 95 g = 3.35 oz'))).toBeVisible();
    await person.click(screen.getByRole('button', { name: 'The same in m and g' }));
    expect(screen.getByText(line('12.5 m − 7.62 m = 4.88 m'))).toBeVisible();
    expect(screen.queryByText(line('41 ft'))).toBeNull();
  });

  it('takes on the units of whoever signs in while nothing is typed, and leaves what was begun alone', async () => {
    const person = await openCharge();
    const unit = () => screen.getByRole('combobox', { name: 'Unit for: factory charge' });
    expect(unit()).toHaveDisplayValue('g');
    act(() => changePreferences({ ...preferencesFor('en-US'), mass: 'lbOz' }));
    await waitFor(() => expect(unit()).toHaveDisplayValue('lb'));
    await person.type(field('factory charge'), '2');
    act(() => changePreferences(preferencesFor('en-GB')));
    expect(unit()).toHaveDisplayValue('lb');
    expect(field('factory charge')).toHaveValue('2');
  });

  it('speaks Spanish with its decimals', async () => {
    changePreferences(preferencesFor('es-ES'));
    const person = await openCharge().catch(() => userEvent.setup());
    await person.selectOptions(await screen.findByRole('combobox', { name: 'refrigerante' }), 'R-32');
    await person.type(field('carga de fábrica'), '1200');
    await person.selectOptions(screen.getByRole('combobox', { name: 'tubo de líquido' }), '6.35');
    await person.type(field('recorrido del tubo, solo ida'), '12,0');
    await person.type(field('precargado de fábrica'), '7,5');
    await person.type(field('carga por longitud, manual'), '20');
    expect(total()).toBe('1290 g');
    expect(screen.getByText(line('12,0 m − 7,5 m = 4,5 m'))).toBeInTheDocument();
  });
});
