import type { Locale } from '../../shared/session/session.schema.ts';
import { findMessage, messageFor } from './translate.ts';

/** What a column of a file is called for who takes it out, with its unit: `massG` is `mass (g)`. */
export const columnHead = (name: string, locale: Locale): string => findMessage(`column.${name}`, locale) ?? name;

export const yesOrNo = (locale: Locale): { yes: string; no: string } => ({
  yes: messageFor('column.value.yes', locale),
  no: messageFor('column.value.no', locale),
});

/** A CSV text whose first line holds bare names: the same with their words. Those hold neither comma nor quote. */
export function withHeads(text: string, locale: Locale): string {
  const end = text.indexOf('\r\n');
  const names = text.slice(0, end).split(',');
  return names.map((name) => columnHead(name, locale)).join(',') + text.slice(end);
}
