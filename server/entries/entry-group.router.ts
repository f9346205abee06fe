import { answerRequest, entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import { entryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { madeOrFound } from '../registers/register-routes.ts';
import { answerGroup } from './answer-group.service.ts';
import { postEntryGroup } from './entry-group.service.ts';
import { reverseGroup } from './reverse-group.service.ts';

const RESEND =
  'Ids are made by the client. A resend of the same content answers 200 with the same body; other content under the same id is refused. The time at which the device sends is outside that comparison.';

export function entryGroupRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Entry groups');
  routes.add(
    {
      method: 'post',
      path: '/entry-groups',
      summary: 'Posts a group of entries, readings, statements and documents, whole or not at all',
      description: RESEND,
      access: 'entries:post',
      body: entryGroupRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
      problems: ['idReused', 'busy'],
    },
    async ({ actor, body }) => madeOrFound(await postEntryGroup(parts, actor, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/entry-groups/{id}/reversal',
      summary: 'Withdraws a group and, with a replacement, posts the right one with it',
      description: `${RESEND} Technicians reverse their own groups for a day, managers at any time.`,
      access: 'entries:reverse',
      body: reversalRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
      problems: ['idReused', 'busy'],
    },
    async ({ actor, params, body }) => madeOrFound(await reverseGroup(parts, actor, params.id, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/entry-groups/{id}/answer',
      summary: 'Answers later whether the unit was full',
      description: RESEND,
      access: 'entries:post',
      body: answerRequest,
      responses: { 201: entryGroupResponse, 200: entryGroupResponse },
      problems: ['idReused', 'busy'],
    },
    async ({ actor, params, body }) => madeOrFound(await answerGroup(parts, actor, params.id, body)),
  );
  return routes;
}
