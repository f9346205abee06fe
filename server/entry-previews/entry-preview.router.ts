import { entryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import { entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { previewEntryGroup } from './entry-preview.service.ts';
import { previewReversal } from './reversal-preview.service.ts';

export function entryPreviewRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Entry groups');
  routes.add(
    {
      method: 'post',
      path: '/entry-groups/preview',
      summary: 'Says what a group would post: entries, balances, flags, the question it asks and the reasons it needs',
      description:
        'Judged exactly as a posting of the same body would be at this moment. Nothing is stored and no number of the log is taken; what is posted in between may change the result.',
      access: 'entries:post',
      body: entryGroupRequest,
      responses: { 200: entryPreviewResponse },
      problems: ['idReused', 'busy'],
    },
    async ({ actor, body }) => ok(await previewEntryGroup(parts, actor, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/entry-groups/{id}/reversal/preview',
      summary: 'Says what withdrawing a group, and posting its replacement, would do',
      description: 'The reversal is carried out and taken back in one transaction: nothing is stored.',
      access: 'entries:reverse',
      body: reversalRequest,
      responses: { 200: entryPreviewResponse },
      problems: ['idReused', 'busy'],
    },
    async ({ actor, params, body }) => ok(await previewReversal(parts, actor, params.id, body)),
  );
  return routes;
}
