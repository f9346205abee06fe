import { describe, expect, it } from 'vitest';
import { formatsFor } from './format.ts';
import { preferencesFor } from './preferences.ts';

const plain = (text: string) => text.replace(/\u00a0/g, ' ');
const us = formatsFor(preferencesFor('en-US'));
const pounds = formatsFor({ ...preferencesFor('en-US'), mass: 'lbOz' });
const spain = formatsFor({ ...preferencesFor('es-ES'), mass: 'kg' });

describe('Figures as a person reads them', () => {
  it('carry their unit and the separators of the locale', () => {
    expect(plain(us.mass(1290))).toBe('1,290 g');
    expect(plain(spain.mass(12_900))).toBe('12,900 kg');
    expect(plain(spain.length(7.5))).toBe('7,5 m');
    expect(plain(us.mass(-130))).toBe('\u2212130 g');
  });

  it('carry a part that rounds up to a whole: 15.96 oz are 1 lb', () => {
    // 28.349523125 g to the ounce (international pound, 1959).
    expect(plain(pounds.mass(15.96 * 28.349523125))).toBe('1 lb 0 oz');
    expect(plain(pounds.mass(5117.0889240625))).toBe('11 lb 4.5 oz');
    expect(plain(us.length(3.047))).toBe('10 ft');
    expect(plain(us.length(3.81))).toBe('12 ft 6 in');
    expect(plain(us.length(-0.1))).toBe('\u22124 in');
  });

  it('show a rate in the unit that the person’s manuals print', () => {
    expect(plain(us.rate(20))).toBe('20 g/m');
    expect(plain(pounds.rate(55.80614788))).toBe('0.6 oz/ft');
  });

  it('show a day as it stands and an instant on the clock of its place', () => {
    expect(us.day('2026-11-30')).toBe('Nov 30, 2026');
    expect(plain(us.month('2026-11'))).toBe('Nov 2026');
    expect(us.longDateTime('2026-11-30T21:12:00Z', 'America/New_York')).toMatch(/^Nov 30, 2026, 4:12.PM$/);
  });
});
