import { proofPackageQuery } from '../../shared/proof/proof.schema.ts';
import { JOURNALLED_GET_PROBLEMS, refuseUnasked } from '../exports/send-csv.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { sendProofPackage } from './package.service.ts';

export function proofPackageRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Journal');
  routes.add(
    {
      method: 'get',
      path: '/proof-packages',
      summary: 'A package that a stranger can check offline, for one unit, customer or period',
      description:
        'A zip: the records that it is about whole, all others as hashes, seals, public keys, the verifier (verify.mjs, plain ' +
        'Node.js), and a readable PDF. Who takes it out is recorded, and the log sealed with that. words adds notes and names ' +
        'that stand beside the records. Days are the firm’s, both included.',
      access: 'exports:make',
      query: proofPackageQuery,
      responses: { 200: { mediaType: 'application/zip', description: 'The package' } },
      problems: ['sealKeyLost', ...JOURNALLED_GET_PROBLEMS],
    },
    async ({ req, actor, query, res }) => {
      refuseUnasked(req);
      await sendProofPackage(parts, actor, query, res);
      return undefined;
    },
  );
  return routes;
}
