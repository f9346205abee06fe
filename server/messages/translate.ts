import i18next from 'i18next';
import { catalogueEn } from '../../shared/messages/catalogue-en.ts';
import { catalogueEs } from '../../shared/messages/catalogue-es.ts';
import { cutSentence, numberFormatOf, type Sentence, sayPieces } from '../../shared/messages/sentence-pieces.ts';
import type { Locale } from '../../shared/session/session.schema.ts';

/** Values of a sentence; lists are joined in the language's way, numbers follow the locale (`{{limit, number}}`). */
export type MessageValues = Record<string, string | number | boolean | null | undefined | readonly (string | number)[]>;

const translator = i18next.createInstance();
void translator.init({
  initAsync: false,
  resources: { en: { translation: catalogueEn }, es: { translation: catalogueEs } },
  supportedLngs: ['en', 'es'],
  nonExplicitSupportedLngs: true,
  fallbackLng: 'en',
  keySeparator: false,
  nsSeparator: false,
  interpolation: { escapeValue: false },
});
// Its own takes a value of the sentence that is called `unit` for an option of Intl.NumberFormat, and gives up.
translator.services.formatter?.add('number', (value, lng) => numberFormatOf(lng ?? 'en').format(value));

/** Sentences cut at their placeholders, by locale and key: null where only the translator can say it. */
const cut = new Map<Locale, Map<string, Sentence | null>>();

/** Cut once: a charge has a dozen sentences, and the translator takes three times as long as the calculation. */
function sentenceOf(key: string, locale: Locale): Sentence | null {
  let sentences = cut.get(locale);
  if (!sentences) {
    sentences = new Map();
    cut.set(locale, sentences);
  }
  const known = sentences.get(key);
  if (known !== undefined) return known;
  if (!translator.exists(key, { lng: locale })) return null; // not remembered: the catalogue's keys are few, others are not
  const sentence = cutSentence(translator.t(key, { lng: locale, skipInterpolation: true }));
  sentences.set(key, sentence);
  return sentence;
}

/** The sentence of this key in the caller's language, or null when the catalogue has none. */
export function findMessage(key: string, locale: Locale, values: MessageValues = {}): string | null {
  // A count chooses the plural form.
  const sentence = 'count' in values ? null : sentenceOf(key, locale);
  if (sentence) return sayPieces(sentence, locale, plain(values, locale));
  if (!translator.exists(key, { lng: locale, ...plain(values, locale) })) return null;
  return translator.t(key, { lng: locale, ...plain(values, locale) });
}

/** As `findMessage`; a missing sentence shows its key, and a test keeps that from happening. */
export function messageFor(key: string, locale: Locale, values: MessageValues = {}): string {
  return findMessage(key, locale, values) ?? key;
}

type PlainValues = Record<string, string | number | boolean | null | undefined>;

function plain(values: MessageValues, locale: Locale): PlainValues {
  const all: PlainValues = {};
  for (const name in values) {
    const value = values[name];
    all[name] = typeof value === 'object' && value !== null ? listed(value, locale) : value;
  }
  return all;
}

function listed(values: readonly (string | number)[], locale: Locale): string {
  return new Intl.ListFormat(locale, { type: 'disjunction' }).format(values.map(String));
}
