import { describe, expect, it } from 'vitest';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import { preferencesFor } from '../../lib/preferences.ts';
import { inOwnUnits } from './in-own-units.ts';

const pounds: Preferences = { ...preferencesFor('en-US'), mass: 'lbOz' };
const own = (sentence: string, preferences = pounds) => inOwnUnits(sentence, preferences).replaceAll('\u00a0', ' ');

describe('A sentence of the engine', () => {
  it('speaks of feet, ounces and inch pipe to who reads those', () => {
    expect(own('The line set is 30 m long (29 m pipe, 1 m for bends); the manual allows 25 m.')).toBe(
      'The line set is 98 ft 5 in long (95 ft 1.5 in pipe, 3 ft 3.5 in for bends); the manual allows 82 ft 0.5 in.',
    );
    expect(own('1.9 g/m is low for 6.35 mm pipe with R-32: plausible is 6.3 to 26.9 g/m.')).toBe(
      '0.02 oz/ft is low for 1/4 in pipe with R-32: plausible is 0.068 oz/ft to 0.289 oz/ft.',
    );
    expect(own('No room check up to 1,842 g (m1, IEC 60335-2-40:2018).')).toBe(
      'No room check up to 4 lb 1 oz (m1, IEC 60335-2-40:2018).',
    );
    expect(own('La línea mide 30,5 m.', { ...pounds, locale: 'es-ES' })).toBe('La línea mide 100 ft 1 in.');
  });

  it('stays in metres where a run a hair over its limit would read as the limit', () => {
    const sentence = 'The line set is 25.002 m long; the manual allows 25 m.';
    expect(own(sentence)).toBe(sentence);
  });

  it('stays as it is for who reads metres and grams, and leaves areas and densities alone', () => {
    const sentence = 'The line set is 30 m long.';
    expect(own(sentence, preferencesFor('en-GB'))).toBe(sentence);
    expect(own('The smallest room is 12 m² and 893 kg/m³.')).toBe('The smallest room is 12 m² and 893 kg/m³.');
  });
});
