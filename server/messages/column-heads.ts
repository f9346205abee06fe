import type { Locale } from '../../shared/session/session.schema.ts';
import { findMessage, messageFor } from './translate.ts';

/** What a column of a file is called for who takes it out, with its unit: `massG` is `mass (g)`. */
export const columnHead = (name: string, locale: Locale): string => findMessage(`column.${name}`, locale) ?? name;

export const yesOrNo = (locale: Locale): { yes: string; no: string } => ({
  yes: messageFor('column.value.yes', locale),
  no: messageFor('column.value.no', locale),
});
