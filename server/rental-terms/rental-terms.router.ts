import { z } from 'zod';
import { addRentalTermsRequest, rentalView } from '../../shared/rental-terms/rental-terms.schema.ts';
import { getCylinder } from '../cylinders/cylinder.service.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { madeOrFound, REPEATABLE } from '../registers/register-routes.ts';
import { addRentalTerms, getRental } from './rental-terms.service.ts';

export function rentalTermsRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Cylinders');
  routes.add(
    {
      method: 'get',
      path: '/cylinders/{id}/rental-terms',
      summary: 'Deposit and daily rate of a rented cylinder, and the days so far',
      description:
        'The day it came counts and the day it goes back does not; today is the day in the zone of the firm.',
      access: 'records:read',
      responses: { 200: rentalView },
    },
    async ({ actor, params }) => ok(await getRental(parts, actor, params.id)),
  );
  routes.add(
    {
      method: 'post',
      path: '/cylinders/{id}/rental-terms',
      summary: 'New terms from a day on; without conditions: it was given back',
      description: REPEATABLE,
      access: 'cylinders:write',
      body: addRentalTermsRequest,
      responses: { 201: rentalView, 200: rentalView },
      problems: ['idReused'],
    },
    async ({ actor, params, body }) => madeOrFound(await addRentalTerms(parts, actor, params.id, body)),
  );
  routes.add(
    {
      method: 'get',
      path: '/cylinders/{id}/tag',
      summary: 'The address that the QR code on the tag of a cylinder holds',
      access: 'records:read',
      responses: { 200: z.strictObject({ address: z.string() }) },
    },
    async ({ actor, params }) => {
      const { id } = await getCylinder(parts, actor, params.id);
      return ok({ address: `${parts.settings.publicUrl}/cylinders/${id}` });
    },
  );
  return routes;
}
