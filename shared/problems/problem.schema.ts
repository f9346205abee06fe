import { z } from 'zod';

const named = z.union([z.string(), z.number(), z.boolean(), z.null()]);

export const problemError = z.strictObject({
  path: z.string().describe('JSON Pointer into the request (RFC 6901)'),
  code: z.string(),
  message: z.string(),
  given: named.optional().describe('the value that was sent; never a secret'),
  allowed: z
    .union([named, z.array(z.union([z.string(), z.number()]))])
    .optional()
    .describe('the limit or the list of allowed values'),
});

/** Every answer that is not a success (RFC 9457, media type application/problem+json). */
export const problemResponse = z.strictObject({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string(),
  code: z.string(),
  requestId: z.string(),
  errors: z.array(problemError),
});
export type ProblemResponse = z.output<typeof problemResponse>;
