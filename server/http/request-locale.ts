import type { Request } from 'express';
import { chooseLocale } from '../../shared/messages/language.ts';
import type { Locale } from '../../shared/session/session.schema.ts';

/**
 * The language of an answer: what the request asks for (`Accept-Language`; our own screens send theirs), else the
 * person's, else English.
 */
export function localeOf(req: Request): Locale {
  const wanted = req.get('accept-language') === undefined ? [] : req.acceptsLanguages();
  return chooseLocale(wanted, req.actor?.locale ?? null);
}
