import type { Request } from 'express';
import type { z } from 'zod';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { refusalsOfIssues } from '../../shared/problems/refusals-of-issues.ts';
import { problemOfRefusals } from './problem.ts';
import { unstorableTexts } from './storable-text.ts';

/** The body as its schema makes it, or a 422 that names every field, value and limit. */
export function parseBody<S extends z.ZodType>(schema: S, req: Request): z.output<S> {
  const unstorable = req.mayHoldUnstorableText ? unstorableTexts(req.body) : [];
  return parse(schema, req.body, unstorable);
}

/** The query string likewise. A parameter given twice arrives as a list and is refused by its schema. */
export function parseQuery<S extends z.ZodType>(schema: S, req: Request): z.output<S> {
  return parse(schema, req.query, unstorableTexts(req.query));
}

function parse<S extends z.ZodType>(schema: S, value: unknown, unstorable: readonly Refusal[]): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success && unstorable.length === 0) return parsed.data;
  const refusals = parsed.success ? [] : refusalsOfIssues(parsed.error.issues, value);
  throw problemOfRefusals([...unstorable, ...refusals]);
}
