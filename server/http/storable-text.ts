import { jsonPointer } from '../../shared/problems/json-pointer.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';

declare module 'http' {
  interface IncomingMessage {
    /** The body holds `\u` escapes: the only way in which NUL and half surrogates get through JSON. */
    mayHoldUnstorableText?: boolean;
  }
}

const UNSTORABLE = /\p{Cs}|\0/u;

/** Texts that PostgreSQL cannot keep and canonical JSON cannot hash: NUL and half surrogates (RFC 8785, 3.2.2.2). */
export function unstorableTexts(value: unknown, path: readonly string[] = []): Refusal[] {
  if (typeof value === 'string') {
    return UNSTORABLE.test(value) ? [{ code: 'textNotStorable', path: jsonPointer(path) }] : [];
  }
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => unstorableTexts(inner, [...path, key]));
}
