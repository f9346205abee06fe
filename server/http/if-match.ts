import type { Request } from 'express';
import { Problem } from './problem.ts';

/**
 * Holds `If-Match: "<version>"` against the row's version (RFC 9110, 13.1.1), so that a form that was opened before
 * another person's change cannot overwrite it.
 * @throws Problem 428 without the header, 412 when the row has changed meanwhile
 */
export function ifMatch(req: Request, version: number): void {
  if (versionOfIfMatch(req) !== version) throw new Problem('stale', { params: { version } });
}

/** The version that the caller has seen. */
export function versionOfIfMatch(req: Request): number {
  const header = req.get('if-match');
  if (header === undefined) throw new Problem('versionRequired');
  const written = /^"?(\d{1,9})"?$/.exec(header.trim())?.[1];
  if (written === undefined) throw new Problem('stale', { params: { version: header.slice(0, 40) } });
  return Number(written);
}
