import { useSyncExternalStore } from 'react';
import { cutSentence, type Sentence, sayPieces } from '../../shared/messages/sentence-pieces.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { readPreferences, subscribeToPreferences } from './preferences.ts';

/**
 * The message catalogue in the browser: one file per part and language in `shared/messages`, flat keys. A route loads
 * the parts that it needs, in the one language that is shown; the charge screen does not carry the words of the log,
 * nor a translator: the catalogue's sentences need no more than their values and a plural form.
 */
const FILES = import.meta.glob<Record<string, string>>('../../shared/messages/*.json', { import: 'default' });

export type Language = 'en' | 'es';
export type Params = Record<string, string | number>;
export type Translate = (key: string, params?: Params) => string;

export const languageOf = (locale: Locale): Language => (locale.startsWith('es') ? 'es' : 'en');

const texts: Record<Language, Map<string, string>> = { en: new Map(), es: new Map() };
const wanted = new Set<string>();
const loaded = new Set<string>();
/** What is on the screen; follows the preferences once the words have come. */
let shown: Locale = readPreferences().locale;
const listeners = new Set<() => void>();

async function loadPart(part: string, language: Language): Promise<void> {
  const name = `${part}.${language}`;
  if (loaded.has(name)) return;
  const load = FILES[`../../shared/messages/${name}.json`];
  if (!load) throw new Error(`There is no message file ${name}.json`);
  for (const [key, text] of Object.entries(await load())) texts[language].set(key, text);
  loaded.add(name);
}

async function loadWanted(): Promise<void> {
  const language = languageOf(readPreferences().locale);
  await Promise.all([...wanted].map((part) => loadPart(part, language)));
  if (languageOf(readPreferences().locale) !== language) await loadWanted(); // it was switched while they came
}

/** Makes the messages of these parts available; await it in a route's loader, before its page is drawn. */
export async function loadMessages(...parts: string[]): Promise<void> {
  for (const part of parts) wanted.add(part);
  await loadWanted();
}

async function followLocale(): Promise<void> {
  await loadWanted();
  const { locale } = readPreferences();
  document.documentElement.lang = locale;
  if (locale === shown) return;
  shown = locale;
  for (const listener of listeners) listener();
}

/** Starts the catalogue with the frame's messages and keeps it in the language of the preferences. */
export async function startMessages(): Promise<void> {
  await loadMessages('frame');
  await followLocale();
  subscribeToPreferences(() => void followLocale());
}

/** `t(key, params)` in the language shown; the component draws again when the language changes. */
export function useMessages(): Translate {
  return translateIn(useSyncExternalStore(subscribe, () => shown));
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

const translators = new Map<Locale, Translate>();

/** One function for each locale: the words by the language, the figures in them by the region too. */
function translateIn(locale: Locale): Translate {
  const known = translators.get(locale);
  if (known) return known;
  const sentences = new Map<string, Sentence>();
  const plurals = new Intl.PluralRules(locale);
  /** Cut once: a form asks for hundreds at a keystroke. What has not been loaded yet is not remembered. */
  const sentenceOf = (key: string): Sentence | undefined => {
    const text = texts[languageOf(locale)].get(key);
    const sentence = sentences.get(key) ?? (text === undefined ? undefined : cutSentence(text));
    if (sentence) sentences.set(key, sentence);
    return sentence ?? undefined;
  };
  const translator: Translate = (key, params = {}) => {
    const form = typeof params.count === 'number' ? `${key}_${plurals.select(params.count)}` : key;
    const sentence = sentenceOf(form) ?? (form === key ? undefined : (sentenceOf(`${key}_other`) ?? sentenceOf(key)));
    return sentence ? sayPieces(sentence, locale, params) : key;
  };
  translators.set(locale, translator);
  return translator;
}

/** For code outside components (a loader's refusal, a page title). */
export const translate: Translate = (key, params) => translateIn(shown)(key, params);
export const hasMessage = (key: string): boolean => texts[languageOf(shown)].has(key);
