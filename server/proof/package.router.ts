import { proofPackageQuery } from '../../shared/proof/proof.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
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
      problems: ['sealKeyLost', 'busy', 'otherOrigin', 'methodNotAllowed'],
    },
    async ({ req, actor, query, res }) => {
      // It writes a record, so that neither a preview nor another site's link may set it off.
      if (req.method !== 'GET')
        throw new Problem('methodNotAllowed', { params: { method: req.method }, headers: { Allow: 'GET' } });
      if (req.get('sec-fetch-site') === 'cross-site') throw new Problem('otherOrigin');
      await sendProofPackage(parts, actor, query, res);
      return undefined;
    },
  );
  return routes;
}
