import type { Request, Response } from 'express';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { sha256Hex } from '../journal/canonical-text.ts';
import { journalExport } from '../journal/journal-export.ts';

export const JOURNALLED = 'That it was taken out, by whom and with which filters, is a record of the journal.';
/** What a route may answer that writes a record although it is asked by GET. */
export const JOURNALLED_GET_PROBLEMS = ['busy', 'otherOrigin', 'methodNotAllowed'] as const;

/**
 * For a GET that writes a record: neither a look ahead nor another site's link may set it off.
 * @throws Problem 405, 403
 */
export function refuseUnasked(req: Request): void {
  if (req.method !== 'GET')
    throw new Problem('methodNotAllowed', { params: { method: req.method }, headers: { Allow: 'GET' } });
  if (req.get('sec-fetch-site') === 'cross-site') throw new Problem('otherOrigin');
}

interface Taken {
  document: string;
  /** The query, as the record names it. */
  filters: object;
}

/** Records that a table leaves as CSV, in a transaction of its own, before its first byte. */
export function journalCsv(
  parts: Pick<Parts, 'dataSource' | 'now' | 'newId'>,
  actor: Actor,
  { document, filters }: Taken,
  file: { sha256: string; sizeBytes: string } | null,
): Promise<number> {
  // A reader's sites limit what is in the file, not that it is recorded.
  return inFirm(parts.dataSource, { ...actor, siteIds: null }, (manager) =>
    journalExport(parts, manager, actor, {
      document,
      format: 'csv',
      about: { filters: JSON.parse(JSON.stringify(filters)), ...file },
    }),
  );
}

/** Sends a small table whole, recorded with its SHA-256. */
export async function sendJournalledCsv(
  parts: Pick<Parts, 'dataSource' | 'now' | 'newId'>,
  actor: Actor,
  res: Response,
  taken: Taken & { fileName: string; text: string },
): Promise<void> {
  const bytes = Buffer.from(taken.text, 'utf8');
  await journalCsv(parts, actor, taken, { sha256: sha256Hex(bytes), sizeBytes: String(bytes.length) });
  res.type('text/csv; charset=utf-8').attachment(taken.fileName).send(bytes);
}
