import type { Preferences } from '../../../shared/session/session.schema.ts';
import type { Translate } from '../../lib/messages.ts';
import type { Choice } from '../../ui/field.tsx';

export type { Preferences };

/** Every preference with its choices in words; the languages in their own. */
export function preferenceChoices(
  t: Translate,
): { name: keyof Preferences; label: string; choices: readonly Choice[] }[] {
  const choices = (name: string, values: readonly string[]) =>
    values.map((value) => ({ value, label: t(`session.preferences.${name}.${value}`) }));
  return [
    {
      name: 'locale',
      label: t('session.preferences.locale'),
      choices: [
        { value: 'en-US', label: 'English, US' },
        { value: 'en-GB', label: 'English, Europe' },
        { value: 'es-US', label: 'Español, EE. UU.' },
        { value: 'es-ES', label: 'Español, Europa' },
      ],
    },
    { name: 'theme', label: t('session.preferences.theme'), choices: choices('theme', ['system', 'light', 'dark']) },
    { name: 'mass', label: t('session.preferences.mass'), choices: choices('mass', ['g', 'kg', 'oz', 'lbOz']) },
    { name: 'length', label: t('session.preferences.length'), choices: choices('length', ['m', 'ft']) },
    {
      name: 'pressure',
      label: t('session.preferences.pressure'),
      choices: choices('pressure', ['psig', 'bar', 'kPa']),
    },
    { name: 'temperature', label: t('session.preferences.temperature'), choices: choices('temperature', ['C', 'F']) },
    { name: 'vacuum', label: t('session.preferences.vacuum'), choices: choices('vacuum', ['micron', 'Pa']) },
  ];
}
