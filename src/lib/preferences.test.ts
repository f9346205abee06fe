import { describe, expect, it } from 'vitest';
import { localeFor, preferencesFor } from './preferences.ts';

describe('The locale of someone who has not chosen one', () => {
  it.each([
    [['en-US'], 'en-US'],
    [['en-GB', 'en'], 'en-GB'],
    [['en-IE'], 'en-GB'],
    [['en'], 'en-US'],
    [['es-MX', 'en-US'], 'es-US'],
    [['es'], 'es-ES'],
    [['nl-NL', 'es-ES'], 'es-ES'],
    [['nl-NL'], 'en-US'],
    [[], 'en-US'],
  ] as const)('for %j is %s', (languages, locale) => {
    expect(localeFor(languages)).toBe(locale);
  });

  it('brings the units of its region: feet and a gram scale in the US, metres elsewhere', () => {
    expect(preferencesFor('es-US')).toMatchObject({ length: 'ft', mass: 'g', pressure: 'psig', temperature: 'F' });
    expect(preferencesFor('es-ES')).toMatchObject({ length: 'm', mass: 'g', pressure: 'bar', temperature: 'C' });
  });
});
