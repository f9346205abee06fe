import { rateLimit } from 'express-rate-limit';
import type { z } from 'zod';
import { everyCalculation } from '../../shared/calculations/calculations.ts';
import { type MessageParams, sayMessages } from '../../shared/calculations/say-messages.ts';
import { chargeCalculation } from '../../shared/charge/charge-calculation.ts';
import type { Outcome } from '../../shared/problems/outcome.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, valueOrProblem } from '../http/problem.ts';
import { localeOf } from '../http/request-locale.ts';
import { messageFor } from '../messages/translate.ts';

const A_MINUTE_MS = 60_000;
/** Of all calculations together, from one address. */
export const CALCULATIONS_PER_MINUTE = 600;

type Say = (key: string, params: MessageParams) => string;

interface MountedCalculation {
  path: `/${string}`;
  summary: string;
  description?: string;
  request: z.ZodType;
  response: z.ZodType;
  calculate(request: never, reference: ReferenceData): Outcome<unknown>;
  present(result: never, say: Say): unknown;
}

/** What `shared/` calculates, for whoever asks: nobody is signed in, nothing is stored. */
export function calculationRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Calculations');
  const limit = rateLimit({
    windowMs: A_MINUTE_MS,
    limit: CALCULATIONS_PER_MINUTE,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    identifier: 'calculations',
    handler: (_req, _res, next) => next(new Problem('tooManyRequests')),
  });
  const mounted: MountedCalculation[] = [
    chargeCalculation,
    ...everyCalculation().map((call) => ({ ...call, present: sayMessages })),
  ];
  for (const { path, summary, description, request, response, calculate, present } of mounted) {
    routes.add(
      {
        method: 'post',
        path,
        summary,
        ...(description === undefined ? {} : { description }),
        access: 'public',
        body: request,
        responses: { 200: response },
        problems: ['tooManyRequests'],
        before: [limit],
      },
      ({ req, body }) => {
        const locale = localeOf(req);
        const result = valueOrProblem(calculate(body as never, parts.reference));
        return ok(present(result as never, (key, params) => messageFor(key, locale, params)));
      },
    );
  }
  return routes;
}
