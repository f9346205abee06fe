import {
  journalState,
  newKeyRequest,
  sealKeysResponse,
  sealListQuery,
  sealPage,
  sealRow,
} from '../../shared/proof/proof.schema.ts';
import { type ApiRoutes, apiRoutes, created, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { changeKey, getState, listKeys, listSeals, sealNow } from './seal.service.ts';

export function sealRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Journal');
  const reads = { method: 'get', access: 'records:read' } as const;
  routes.add(
    {
      ...reads,
      path: '/journal/state',
      summary: 'Where the chain stands: head, last seal, what it does not cover yet',
      responses: { 200: journalState },
    },
    async ({ actor }) => ok(await getState(parts, actor)),
  );
  routes.add(
    {
      ...reads,
      path: '/journal/seals',
      summary: 'Seals, newest first',
      query: sealListQuery,
      responses: { 200: sealPage },
    },
    async ({ actor, query }) => ok(await listSeals(parts, actor, query)),
  );
  routes.add(
    {
      method: 'post',
      path: '/journal/seals',
      summary: 'Seals the log now',
      description:
        'Signs the head, chains the seal, and mails the head to the owners. Without anything new since the last seal, 200 with that one.',
      access: 'seals:make',
      responses: { 201: sealRow, 200: sealRow },
      problems: ['sealKeyLost', 'busy'],
    },
    async ({ actor }) => {
      const { seal, isNew } = await sealNow(parts, actor);
      return isNew ? created(seal) : ok(seal);
    },
  );
  routes.add(
    {
      ...reads,
      path: '/journal/keys',
      summary: 'Public keys that signed seals, newest first, each with its fingerprint',
      responses: { 200: sealKeysResponse },
    },
    async ({ actor }) => ok(await listKeys(parts, actor)),
  );
  routes.add(
    {
      method: 'post',
      path: '/journal/keys',
      summary: 'Replaces the signing key',
      description:
        'The new key is signed by the one before, sealed, and mailed. currentKeyId is the key to be replaced: another one is a 412.',
      access: 'seals:make',
      body: newKeyRequest,
      responses: { 201: sealKeysResponse },
      problems: ['sealKeyLost', 'stale', 'busy'],
    },
    async ({ actor, body }) => created(await changeKey(parts, actor, body)),
  );
  return routes;
}
