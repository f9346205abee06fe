import type { z } from 'zod';
import type { jurisdiction, Locale, Preferences } from './session.schema.ts';

/** What a person sees before choosing: the units usual where the firm works, in the firm's language. */
export function defaultPreferences(of: { jurisdiction: z.output<typeof jurisdiction>; locale: Locale }): Preferences {
  const units =
    of.jurisdiction === 'US'
      ? ({ mass: 'lbOz', length: 'ft', pressure: 'psig', temperature: 'F', vacuum: 'micron' } as const)
      : ({ mass: 'g', length: 'm', pressure: 'bar', temperature: 'C', vacuum: 'Pa' } as const);
  return { locale: of.locale, ...units, theme: 'system' };
}
