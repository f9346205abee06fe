import {
  carryRequest,
  carryResponse,
  checklist,
  checklistQuery,
  closeRequest,
  closeResponse,
  periodsResponse,
  settlementResponse,
  settleRequest,
} from '../../shared/periods/periods.schema.ts';
import { requireSession } from '../http/actor.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { carryItems } from './carry.service.ts';
import { getChecklist, listPeriods } from './checklist.service.ts';
import { closeMonth } from './close-month.service.ts';
import { settleDifference } from './settle.service.ts';

export function periodRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Periods');
  routes.add(
    {
      method: 'get',
      path: '/periods',
      summary: 'Booking months: closed, the next to close, open, running',
      access: 'books:read',
      responses: { 200: periodsResponse },
    },
    async ({ actor }) => ok(await listPeriods(parts, actor)),
  );
  routes.add(
    {
      method: 'get',
      path: '/periods/checklist',
      summary: 'What is open at the end of a month: differences, weigh-ins, unweighed cylinders, jobs without posting',
      access: 'books:read',
      query: checklistQuery,
      responses: { 200: checklist },
    },
    async ({ actor, query }) => ok(await getChecklist(parts, actor, query.month)),
  );
  routes.add(
    {
      method: 'post',
      path: '/periods/settlements',
      summary: 'What a difference turned out to be: lost to the atmosphere, the supplier’s, missing',
      description: `${REPEATABLE} Posts a group of kind monthClose at the last moment of the month. Once the difference is explained, it is reversed with it.`,
      access: 'books:settle',
      body: settleRequest,
      responses: { 201: settlementResponse, 200: settlementResponse },
      problems: ['idReused'],
    },
    async ({ actor, body }) => madeOrFound(await settleDifference(parts, actor, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/periods/carried',
      summary: 'Open items that a month is closed with, carried by somebody for a reason',
      description: REPEATABLE,
      access: 'books:settle',
      body: carryRequest,
      responses: { 201: carryResponse, 200: carryResponse },
      problems: ['idReused'],
    },
    async ({ actor, body }) => madeOrFound(await carryItems(parts, actor, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/periods',
      summary: 'Closes the next month. There is no reopening',
      description: `${REPEATABLE} An owner’s, signed in by session. Months are closed in order; what comes late is booked in the first open one.`,
      access: 'periods:close',
      body: closeRequest,
      responses: { 201: closeResponse, 200: closeResponse },
      problems: ['idReused', 'seenChanged'],
    },
    async ({ req, actor, body }) => {
      requireSession(req);
      return madeOrFound(await closeMonth(parts, actor, body));
    },
  );
  return routes;
}
