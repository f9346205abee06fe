import type { Request } from 'express';
import { Problem } from './problem.ts';

/**
 * The version that the caller has seen: `If-Match: "<version>"` (RFC 9110, 13.1.1), so that a form that was opened before
 * another person's change cannot overwrite it.
 * @throws Problem 428 without the header, 412 where it holds no version
 */
export function versionOfIfMatch(req: Request): number {
  const header = req.get('if-match');
  if (header === undefined) throw new Problem('versionRequired');
  const written = /^"?(\d{1,9})"?$/.exec(header.trim())?.[1];
  if (written === undefined) throw new Problem('stale', { params: { version: header.slice(0, 40) } });
  return Number(written);
}
