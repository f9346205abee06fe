import { LOCALES, type Locale } from '../session/session.schema.ts';

export const LANGUAGES = ['en', 'es'] as const;
export type Language = (typeof LANGUAGES)[number];

export function languageOf(locale: Locale): Language {
  return locale.startsWith('es') ? 'es' : 'en';
}

/** Who names only a language gets this regional form, unless their own settings say otherwise. */
const USUAL_LOCALE: Record<Language, Locale> = { en: 'en-US', es: 'es-US' };

/**
 * The locale to answer in: the first of the wanted tags (best first, as `Accept-Language` sorts them) whose language we
 * have; where it names no region that we have, the person's own region of that language.
 */
export function chooseLocale(wanted: readonly string[], own: Locale | null): Locale {
  for (const tag of wanted) {
    const exact = LOCALES.find((known) => known.toLowerCase() === tag.toLowerCase());
    if (exact) return exact;
    const language = LANGUAGES.find((known) => known === tag.toLowerCase().split('-')[0]);
    if (language) return own && languageOf(own) === language ? own : USUAL_LOCALE[language];
  }
  return own ?? USUAL_LOCALE.en;
}
