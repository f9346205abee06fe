import { describe, expect, it } from 'vitest';
import { chooseLocale } from './language.ts';

describe('The language of an answer', () => {
  it.each([
    [['es-ES', 'en'], 'en-US', 'es-ES'],
    [['fr', 'es'], 'en-US', 'es-US'],
    [['es'], 'es-ES', 'es-ES'],
    [['es-MX'], null, 'es-US'],
    [['en'], 'es-ES', 'en-US'],
    [['nl', '*'], 'es-ES', 'es-ES'],
    [[], 'en-GB', 'en-GB'],
    [[], null, 'en-US'],
  ] as const)('asked for %j by a person with %s is %s', (wanted, own, chosen) => {
    expect(chooseLocale(wanted, own)).toBe(chosen);
  });
});
