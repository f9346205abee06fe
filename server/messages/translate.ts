import i18next from 'i18next';
import { catalogueEn } from '../../shared/messages/catalogue-en.ts';
import { catalogueEs } from '../../shared/messages/catalogue-es.ts';
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

/** The sentence of this key in the caller's language, or null when the catalogue has none. */
export function findMessage(key: string, locale: Locale, values: MessageValues = {}): string | null {
  if (!translator.exists(key, { lng: locale, ...plain(values, locale) })) return null;
  return translator.t(key, { lng: locale, ...plain(values, locale) });
}

/** As `findMessage`; a missing sentence shows its key, and a test keeps that from happening. */
export function messageFor(key: string, locale: Locale, values: MessageValues = {}): string {
  return findMessage(key, locale, values) ?? key;
}

function plain(values: MessageValues, locale: Locale): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(values).map(([name, value]) => [name, Array.isArray(value) ? listed(value, locale) : value]),
  );
}

function listed(values: readonly (string | number)[], locale: Locale): string {
  return new Intl.ListFormat(locale, { type: 'disjunction' }).format(values.map(String));
}
