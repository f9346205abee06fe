import { journalPage, journalQuery, verificationQuery } from '../../shared/proof/proof.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { listRecords, sendVerification } from './journal.service.ts';

export function journalRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Journal');
  routes.add(
    {
      method: 'get',
      path: '/journal',
      summary: 'The records of the chain, newest first, each with its text as it is hashed',
      access: 'exports:make',
      query: journalQuery,
      responses: { 200: journalPage },
    },
    async ({ actor, query }) => ok(await listRecords(parts, actor, query)),
  );
  routes.add(
    {
      method: 'get',
      path: '/journal/verification',
      summary: 'Checks the whole log: chain, seals, and that the tables say what the records say',
      description:
        'Streams a JSON line { checked, of } again and again, and as the last line the result: intact, or the first record ' +
        'that is not and how. keyFingerprint and knownHead (SEQUENCE:HASH) come from an earlier mail or print.',
      access: 'exports:make',
      query: verificationQuery,
      responses: { 200: { mediaType: 'application/x-ndjson', description: 'Progress, then the result' } },
    },
    async ({ actor, query, res }) => {
      await sendVerification(parts, actor, query, res);
      return undefined;
    },
  );
  return routes;
}
