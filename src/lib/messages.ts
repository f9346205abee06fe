import i18next from 'i18next';
import { useSyncExternalStore } from 'react';
import { cutSentence, numberFormatOf, type Sentence, sayPieces } from '../../shared/messages/sentence-pieces.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { readPreferences, subscribeToPreferences } from './preferences.ts';

/**
 * The message catalogue in the browser: one file per part and language in `shared/messages`, flat keys. A route loads
 * the parts that it needs, in the one language that is shown; the charge screen does not carry the words of the log.
 */
const FILES = import.meta.glob<Record<string, string>>('../../shared/messages/*.json', { import: 'default' });

export type Language = 'en' | 'es';
export type Params = Record<string, string | number>;
export type Translate = (key: string, params?: Params) => string;

export const languageOf = (locale: Locale): Language => (locale.startsWith('es') ? 'es' : 'en');

const wanted = new Set<string>();

async function loadPart(part: string, language: Language): Promise<void> {
  const load = FILES[`../../shared/messages/${part}.${language}.json`];
  if (!load) throw new Error(`There is no message file ${part}.${language}.json`);
  i18next.addResourceBundle(language, 'translation', await load(), false, true);
}

/** Makes the messages of these parts available; await it in a route's loader, before its page is drawn. */
export async function loadMessages(...parts: string[]): Promise<void> {
  const language = languageOf(readPreferences().locale);
  const missing = parts.filter((part) => !wanted.has(part));
  await Promise.all(missing.map((part) => loadPart(part, language)));
  for (const part of missing) wanted.add(part);
}

async function followLocale(): Promise<void> {
  const language = languageOf(readPreferences().locale);
  document.documentElement.lang = readPreferences().locale;
  if (i18next.language === readPreferences().locale) return;
  if (!i18next.language.startsWith(language)) await Promise.all([...wanted].map((part) => loadPart(part, language)));
  await i18next.changeLanguage(readPreferences().locale);
}

/** Starts the catalogue with the frame's messages and keeps it in the language of the preferences. */
export async function startMessages(): Promise<void> {
  await i18next.init({
    // The words by the language alone, the figures inside them by the region too.
    lng: readPreferences().locale,
    load: 'languageOnly',
    fallbackLng: false,
    resources: {},
    keySeparator: false,
    nsSeparator: false,
    interpolation: { escapeValue: false }, // React escapes
    partialBundledLanguages: true,
  });
  // Its own takes a value of the sentence that is called `unit` for an option of Intl.NumberFormat, and gives up.
  i18next.services.formatter?.add('number', (value, lng) => numberFormatOf(lng ?? 'en').format(value));
  document.documentElement.lang = readPreferences().locale;
  await loadMessages('frame');
  subscribeToPreferences(() => void followLocale());
}

/** `t(key, params)` in the language shown; the component draws again when the language changes. */
export function useMessages(): Translate {
  const language = useSyncExternalStore(subscribe, () => i18next.language);
  return translateIn(language);
}

const translators = new Map<string, Translate>();

/** One function for each locale. A sentence is looked up and cut once: a form asks for hundreds at a keystroke. */
function translateIn(language: string): Translate {
  const known = translators.get(language);
  if (known) return known;
  const sentences = new Map<string, Sentence | null>();
  const sentenceOf = (key: string): Sentence | null => {
    const remembered = sentences.get(key);
    if (remembered !== undefined) return remembered;
    // A part that is not loaded yet has no such key; that is not to be remembered.
    if (!i18next.exists(key, { lng: language })) return null;
    const sentence = cutSentence(i18next.t(key, { lng: language, skipInterpolation: true }));
    sentences.set(key, sentence);
    return sentence;
  };
  const translator: Translate = (key, params = {}) => {
    // A count chooses the plural form.
    const sentence = 'count' in params ? null : sentenceOf(key);
    const said = sentence && sayPieces(sentence, language, params);
    return said ?? i18next.t(key, { lng: language, ...params });
  };
  translators.set(language, translator);
  return translator;
}

function subscribe(listener: () => void): () => void {
  i18next.on('languageChanged', listener);
  return () => i18next.off('languageChanged', listener);
}

/** For code outside components (a loader's refusal, a page title). */
export const translate: Translate = (key, params) => i18next.t(key, params ?? {});
export const hasMessage = (key: string): boolean => i18next.exists(key);
