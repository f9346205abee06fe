import type { ExportWhat } from '../../../shared/exports/export.schema.ts';
import type { Translate } from '../../lib/messages.ts';

const ID = /^[0-9a-f-]{36}$/;
/** Where the words of a closed list stand that a filter takes its value from. */
const WORDS: Readonly<Partial<Record<ExportWhat, Readonly<Record<string, string>>>>> = {
  entries: { kind: 'log.kind', place: 'log.place', without: 'exports.without' },
  cylinders: { kind: 'cylinders.kind' },
  tools: { kind: 'registers.toolKind' },
  parties: { kind: 'registers.partyKind' },
};

/** One filter as the list that led here names it: `site: the chosen one`, `kind: recovery`. The order is no filter. */
export function filterWords(t: Translate, what: ExportWhat, name: string, value: string): string[] {
  if (name === 'sort') return [];
  const key = `exports.filter.${name}`;
  const head = t(key) === key ? name : t(key);
  const list = WORDS[what]?.[name];
  const said = ID.test(value) ? t('exports.thisOne') : list ? t(`${list}.${value}`) : value;
  return [t('exports.filterSaid', { head, value: said })];
}
