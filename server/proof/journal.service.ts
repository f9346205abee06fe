import type { Response } from 'express';
import type { JournalQuery, VerificationProgress, VerificationQuery } from '../../shared/proof/proof.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { listRecords as readRecords } from './journal.repository.ts';
import { verifyLog } from './verification.service.ts';

export function listRecords(parts: Parts, actor: Actor, query: JournalQuery) {
  return inFirm(parts.dataSource, actor, (manager) => readRecords(manager, query));
}

/** Writes one line for how far the check is, again and again, and the result as the last. */
export async function sendVerification(
  parts: Parts,
  actor: Actor,
  query: VerificationQuery,
  res: Response,
): Promise<void> {
  const line = (value: object) => res.write(`${JSON.stringify(value)}\n`);
  // Not compressed: each line has to arrive when it is written.
  res.status(200).set('Cache-Control', 'no-store, no-transform').type('application/x-ndjson');
  const result = await verifyLog(parts, actor, {
    keyFingerprint: query.keyFingerprint,
    knownHead: query.knownHead,
    onProgress: (checked, of) => line({ checked, of } satisfies VerificationProgress),
    isGone: () => res.closed,
  });
  line(result);
  res.end();
}
