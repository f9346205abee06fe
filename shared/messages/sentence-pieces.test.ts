import i18next from 'i18next';
import { describe, expect, it } from 'vitest';
import { catalogueEn } from './catalogue-en.ts';
import { catalogueEs } from './catalogue-es.ts';
import { cutSentence, type Sentence, sayPieces } from './sentence-pieces.ts';

const SAMPLES = [1234.5, '1234', '$t(x) {{y}}', ''];
const cut = (text: string): Sentence => cutSentence(text) ?? [];

describe('A sentence cut at its placeholders', () => {
  it.each([
    ['en-US', catalogueEn],
    ['en-GB', catalogueEn],
    ['es-ES', catalogueEs],
    ['es-US', catalogueEs],
  ])('says in %s what a full translator says, for every sentence of the server', async (locale, catalogue) => {
    const translator = i18next.createInstance();
    await translator.init({
      lng: locale,
      resources: { [locale]: { translation: catalogue } },
      keySeparator: false,
      nsSeparator: false,
      interpolation: { escapeValue: false },
    });
    // Its own gives up where a value is called `unit`, which it takes for an option of the format.
    translator.services.formatter?.add('number', (value) =>
      Number.isNaN(Number.parseFloat(value)) ? value : new Intl.NumberFormat(locale).format(value),
    );
    for (const [key, text] of Object.entries(catalogue)) {
      const names = [...text.matchAll(/\{\{\s*(\w+)/g)].map((match) => String(match[1]));
      if (names.includes('count')) continue; // chooses between sentences
      for (const sample of SAMPLES) {
        const values = Object.fromEntries(names.map((name) => [name, sample]));
        expect(sayPieces(cut(text), locale, values), key).toBe(translator.t(key, values));
      }
    }
  });

  it('leaves the place of a missing value empty, and what was typed in place of a figure as it was typed', () => {
    expect(sayPieces(cut('{{a}} m'), 'en-US', { a: undefined })).toBe(' m');
    expect(sayPieces(cut('{{a, number}} m'), 'es-ES', { a: '12345.5' })).toBe('12.345,5 m');
    expect(sayPieces(cut('{{a, number}} m'), 'es-ES', { a: '12,5x' })).toBe('12,5x m');
  });

  it('ends with one full stop where a value brings its own', () => {
    expect(sayPieces(cut('Visto el {{when}}. Fin.'), 'es-US', { when: '25 nov, 5:30 p.m.' })).toBe(
      'Visto el 25 nov, 5:30 p.m. Fin.',
    );
    expect(sayPieces(cut('{{hash}} ...'), 'en-US', { hash: 'ab.' })).toBe('ab. ...');
    expect(sayPieces(cut('{{hash}}...'), 'en-US', { hash: 'ab.' })).toBe('ab....');
  });

  it('holds nothing else in braces and no other sentence', () => {
    expect(cutSentence('{{when, datetime}}')).toBeNull();
    expect(cutSentence('see $t(other)')).toBeNull();
  });
});
