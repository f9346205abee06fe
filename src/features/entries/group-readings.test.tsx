import { cleanup, render, screen } from '@testing-library/react';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, beforeAll, describe, expect, it } from 'vitest';
import type { Scale } from '../../../shared/ledger/scale.ts';
import { loadMessages, startMessages } from '../../lib/messages.ts';
import { changePreferences } from '../../lib/preferences.ts';
import { groupView } from './entry-row.fixture.ts';
import { GroupReadings } from './group-readings.tsx';

beforeAll(async () => {
  changePreferences({ locale: 'en-GB', mass: 'g' });
  await startMessages();
  await loadMessages('log-screen');
});
afterEach(cleanup);

const show = (grossG: [number, number], scale: Scale, tools = ['1', '1']) => {
  const readings = groupView().readings.map((reading, index) => {
    const massG = grossG[index] ?? 0;
    return { ...reading, value: String(massG), massG, ...scale, toolId: tools[index] ?? null };
  });
  render(
    <MemoryRouter>
      <GroupReadings readings={readings} main={undefined} />
    </MemoryRouter>,
  );
};

/** Source: `formulas.md` j 2 (JCGM 100, Type B): 2 sqrt(2 (25/12 + 4) + 2.35^2/3) = 7.485 g. */
describe('The readings of a group', () => {
  it('are as uncertain as resolution, repeatability and span of their scale make them; its zero cancels', () => {
    show([20_000, 17_650], { resolutionG: 5, repeatabilityG: 2, spanErrorRelative: 0.001, offsetG: 10 });
    expect(screen.getByText(/± 7\.5\sg \(two readings, k = 2\)/)).toBeVisible();
  });

  it('of two scales carry the span and the zero of both', () => {
    // 2 sqrt(50/12 + (20^2 + 17.65^2 + 10^2 + 10^2)/3)
    show([20_000, 17_650], { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0.001, offsetG: 10 }, ['1', '2']);
    expect(screen.getByText(/± 35\.1\sg \(two readings, k = 2\)/)).toBeVisible();
  });
});
