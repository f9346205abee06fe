import { cleanup, render, screen, within } from '@testing-library/react';
import { afterEach, beforeAll, describe, expect, it } from 'vitest';
import { startMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { Beam } from './beam.tsx';
import { chargeBeam } from './presets.ts';

beforeAll(async () => {
  await startMessages();
  changePreferences(preferencesFor('en-GB'));
});
afterEach(cleanup);

const spec = chargeBeam(
  {
    factory: { massG: 1200, label: 'factory 1,200 g' },
    extra: { massG: 90, label: 'extra 90 g' },
    total: { massG: 1290, label: 'total 1,290 g' },
    noCheckUpTo: { massG: 1842, label: 'no room check up to 1,842 g' },
  },
  { gramsPer: 1, unit: 'g' },
);

describe('The beam', () => {
  it('is one picture with its figures in words, and a list of them beside it', () => {
    render(<Beam spec={spec} summary="Factory 1,200 g, extra 90 g, total 1,290 g." />);
    const picture = screen.getByRole('img', { name: 'Factory 1,200 g, extra 90 g, total 1,290 g.' });
    for (const label of ['factory 1,200 g', 'extra 90 g', 'total 1,290 g', 'no room check up to 1,842 g']) {
      expect(within(picture).getByText(label)).toBeInTheDocument();
    }
    const terms = screen.getAllByRole('term').map((term) => term.textContent);
    expect(terms).toEqual(['factory 1,200 g', 'extra 90 g', 'no room check up to 1,842 g', 'total 1,290 g']);
    const values = screen.getAllByRole('definition').map((value) => value.textContent);
    expect(values).toEqual(['0 - 1,200 g', '1,200 - 1,290 g', '1,842 g', '1,290 g']);
  });

  it('does not move when it is first drawn', () => {
    const { container } = render(<Beam spec={spec} summary="a" />);
    expect(container.querySelector('svg')?.getAttribute('class')).not.toContain('transition');
  });

  it('inside a button says one short thing, or nothing, and never a list', () => {
    const { rerender } = render(
      <button type="button">
        5012 <Beam spec={spec} summary="limit 9,620 g" inControl />
      </button>,
    );
    expect(screen.getByRole('button')).toHaveAccessibleName('5012 limit 9,620 g');
    rerender(
      <button type="button">
        5012 <Beam spec={spec} summary="" inControl />
      </button>,
    );
    expect(screen.getByRole('button')).toHaveAccessibleName('5012');
    expect(screen.queryByRole('term')).toBeNull();
  });

  it('that counts ounces is read in pounds and ounces, at ticks that are round in them', () => {
    changePreferences({ ...preferencesFor('en-US'), mass: 'lbOz' });
    // From 21 lb 8 oz down to 21 lb 2 oz and a little on: 344 to 337 oz.
    const { container } = render(
      <Beam
        spec={{
          domain: [344, 337],
          unit: 'lbOz',
          segments: [{ from: 344, to: 341, kind: 'move', label: '3 oz out' }],
          marks: [{ at: 338, label: 'stop 21 lb 2 oz', kind: 'target' }],
        }}
        summary="charging"
      />,
    );
    const plain = (text: string | null) => (text ?? '').replaceAll('\u00a0', ' ');
    const texts = [...container.querySelectorAll('text')].map((text) => plain(text.textContent));
    expect(texts).toEqual(expect.arrayContaining(['21 lb 8 oz', '21 lb 4 oz']));
    expect(texts.filter((text) => /^[\d.,]+( oz)?$/.test(text))).toEqual([]);
    const values = screen.getAllByRole('definition').map((value) => plain(value.textContent).trim());
    expect(values).toEqual(['21 lb 8 oz - 21 lb 5 oz', '21 lb 2 oz']);
    changePreferences(preferencesFor('en-GB'));
  });
});
