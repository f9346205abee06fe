import { useSyncExternalStore } from 'react';
import type { Locale, Preferences } from '../../shared/session/session.schema.ts';

/**
 * How this person sees quantities, language and light. It lives in the browser, so that the charge screen works for
 * someone who has not signed in; a session's own preferences are laid over it when it arrives.
 */
const STORAGE_KEY = 'tarewright.preferences';
const LOCALES: readonly Locale[] = ['en-US', 'en-GB', 'es-US', 'es-ES'];

const METRIC: Omit<Preferences, 'locale' | 'theme'> = {
  mass: 'g',
  length: 'm',
  pressure: 'bar',
  temperature: 'C',
  vacuum: 'micron',
};
/** A US technician measures pipe in feet and reads a gram scale. */
const US: Omit<Preferences, 'locale' | 'theme'> = {
  mass: 'g',
  length: 'ft',
  pressure: 'psig',
  temperature: 'F',
  vacuum: 'micron',
};

/** The nearest locale we have a catalogue for: the region decides dates and decimals, the language the words. */
export function localeFor(languages: readonly string[]): Locale {
  for (const tag of languages) {
    const exact = LOCALES.find((known) => known.toLowerCase() === tag.toLowerCase());
    if (exact) return exact;
    const [language, region] = tag.split('-');
    if (language === 'es') return region === undefined || region === 'ES' ? 'es-ES' : 'es-US';
    if (language === 'en') return region === undefined ? 'en-US' : 'en-GB';
  }
  return 'en-US';
}

export function preferencesFor(locale: Locale): Preferences {
  return { locale, theme: 'system', ...(locale.endsWith('-US') ? US : METRIC) };
}

function stored(): Preferences {
  const base = preferencesFor(localeFor(navigator.languages ?? []));
  try {
    const kept = JSON.parse(localStorage.getItem(STORAGE_KEY) ?? '{}') as Partial<Preferences>;
    const locale = LOCALES.find((known) => known === kept.locale);
    return { ...(locale ? preferencesFor(locale) : base), ...kept, locale: locale ?? base.locale };
  } catch {
    return base; // storage may be closed to us; the defaults still work
  }
}

let current = stored();
const listeners = new Set<() => void>();

export const readPreferences = (): Preferences => current;

/** Changes what is shown, at once and on this device; nothing stored changes its value. */
export function changePreferences(change: Partial<Preferences>): void {
  const next = { ...current, ...change };
  if (JSON.stringify(next) === JSON.stringify(current)) return;
  current = next;
  try {
    localStorage.setItem(STORAGE_KEY, JSON.stringify(current));
  } catch {
    // without storage the choice holds until the page is left
  }
  applyTheme(current.theme);
  for (const listener of listeners) listener();
}

export function subscribeToPreferences(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

export function usePreferences(): Preferences {
  return useSyncExternalStore(subscribeToPreferences, readPreferences);
}

/** Pins the theme on the page, or lets the system decide. */
export function applyTheme(theme: Preferences['theme']): void {
  if (theme === 'system') delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = theme;
}
