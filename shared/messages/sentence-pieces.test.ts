import i18next from 'i18next';
import { describe, expect, it } from 'vitest';
import { catalogueEn } from './catalogue-en.ts';
import { catalogueEs } from './catalogue-es.ts';
import { cutSentence, sayPieces } from './sentence-pieces.ts';

const SAMPLES = [1234.5, '1234', '$t(x) {{y}}', ''];

describe('A sentence cut at its placeholders', () => {
  it.each([
    ['en-US', catalogueEn],
    ['en-GB', catalogueEn],
    ['es-ES', catalogueEs],
    ['es-US', catalogueEs],
  ])('says in %s what the translator would say, for every sentence of the server', async (locale, catalogue) => {
    const translator = i18next.createInstance();
    await translator.init({
      lng: locale,
      resources: { [locale]: { translation: catalogue } },
      keySeparator: false,
      nsSeparator: false,
      interpolation: { escapeValue: false },
    });
    translator.services.formatter?.add('number', (value) => new Intl.NumberFormat(locale).format(value));
    let said = 0;
    for (const [key, text] of Object.entries(catalogue)) {
      const names = [...text.matchAll(/\{\{\s*(\w+)/g)].map((match) => String(match[1]));
      for (const sample of SAMPLES) {
        const values = Object.fromEntries(names.map((name) => [name, sample]));
        const pieces = cutSentence(text);
        const own = pieces && sayPieces(pieces, locale, values);
        if (own === null || 'count' in values) continue;
        said += 1;
        expect(own, key).toBe(translator.t(key, { lng: locale, ...values }));
      }
    }
    expect(said).toBeGreaterThan(Object.keys(catalogue).length);
  });

  it('is left to the translator where it holds anything else', () => {
    expect(cutSentence('{{when, datetime}}')).toBeNull();
    expect(cutSentence('see $t(other)')).toBeNull();
    expect(sayPieces(cutSentence('{{a}} m') ?? [], 'en-US', { a: undefined })).toBeNull();
    expect(sayPieces(cutSentence('{{a, number}} m') ?? [], 'en-US', { a: '12' })).toBeNull();
    expect(sayPieces(cutSentence('{{a}} m') ?? [], 'en-US', { a: ['x', 'y'] })).toBeNull();
  });
});
