import type { FlagRow } from '../../shared/entries/entry.schema.ts';
import { useFormat } from './format.ts';
import { useMessages } from './messages.ts';

/** Says a flag with its masses in the person's unit; the route loads the message part `flags`. */
export function useFlagSentence(): (flag: Pick<FlagRow, 'code' | 'subject' | 'refrigerant' | 'massesG'>) => string {
  const t = useMessages();
  const format = useFormat();
  return ({ code, subject, refrigerant, massesG }) =>
    t(`flag.${code}`, {
      place: subject.label,
      refrigerant: refrigerant ?? '',
      ...Object.fromEntries(Object.entries(massesG).map(([name, massG]) => [name, format.mass(massG)])),
    });
}
