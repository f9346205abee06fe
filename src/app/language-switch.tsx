import type { Locale } from '../../shared/session/session.schema.ts';
import { languageOf } from '../lib/messages.ts';
import { changePreferences, usePreferences } from '../lib/preferences.ts';

const OTHER: Record<'en' | 'es', { name: string; locale: (now: Locale) => Locale }> = {
  en: { name: 'English', locale: (now) => (now.endsWith('US') ? 'en-US' : 'en-GB') },
  es: { name: 'Español', locale: (now) => (now.endsWith('US') ? 'es-US' : 'es-ES') },
};

/** Names the other language in that language, and switches to it with the region kept. */
export function LanguageSwitch() {
  const { locale } = usePreferences();
  const other = languageOf(locale) === 'en' ? 'es' : 'en';
  return (
    <button
      type="button"
      lang={other}
      className="type-narrow min-h-12 px-1 text-ink-soft hover:text-ink"
      onClick={() => changePreferences({ locale: OTHER[other].locale(locale) })}
    >
      {OTHER[other].name}
    </button>
  );
}
