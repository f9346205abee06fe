import { z } from 'zod';
import { catalogueEn } from '../../shared/messages/catalogue-en.ts';
import { statusOfCode } from '../../shared/problems/problem-codes.ts';
import { messageFor } from '../messages/translate.ts';
import { type ApiRoutes, apiRoutes, ok } from './api-routes.ts';
import type { Parts } from './parts.ts';
import { localeOf } from './request-locale.ts';

const problemKinds = z.strictObject({
  items: z.array(z.strictObject({ code: z.string(), status: z.int(), message: z.string() })),
});

/** Where a problem's `type` leads: every code that a refusal may carry, with its status and its sentence. */
export function problemListRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Service');
  const codes = Object.keys(catalogueEn).flatMap((key) =>
    key.startsWith('problem.') ? [key.slice('problem.'.length)] : [],
  );
  routes.add(
    {
      method: 'get',
      path: '/problems',
      summary: 'Every refusal code, with its status and its sentence',
      access: 'public',
      responses: { 200: problemKinds },
    },
    ({ req }) => {
      const locale = localeOf(req);
      const items = [...codes]
        .sort()
        .map((code) => ({ code, status: statusOfCode(code), message: messageFor(`problem.${code}`, locale) }));
      return ok({ items });
    },
  );
  return routes;
}
