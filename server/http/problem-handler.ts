import type { ErrorRequestHandler, Request, Response } from 'express';
import type { Refusal } from '../../shared/problems/outcome.ts';
import type { ProblemResponse } from '../../shared/problems/problem.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { messageFor } from '../messages/translate.ts';
import type { Parts } from './parts.ts';
import type { Problem } from './problem.ts';
import { problemOfError } from './problem-of-error.ts';
import { localeOf } from './request-locale.ts';

/** Answers everything that was thrown, as RFC 9457 describes, in the caller's language. */
export function problemHandler(parts: Parts): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    const problem = problemOfError(error);
    if (problem.status >= 500) req.log.error({ err: problem.cause ?? problem }, 'request failed');
    // What the database refuses, a schema or a rule should have refused first: somebody has to see it.
    else if (problem.cause instanceof Error && problem.errors.length > 0) {
      req.log.error({ err: problem.cause, code: problem.code }, 'refused by the database alone');
    }
    if (res.headersSent) {
      next(error); // half an answer is on its way: Express closes the connection, so that it cannot pass for a whole one
      return;
    }
    sendProblem(parts, req, res, problem);
  };
}

export function sendProblem(parts: Parts, req: Request, res: Response, problem: Problem): void {
  res
    .status(problem.status)
    .set(problem.status === 401 ? { 'WWW-Authenticate': 'Bearer realm="tarewright"' } : {})
    .set(problem.headers)
    .set('Cache-Control', 'no-store')
    .type('application/problem+json')
    .send(JSON.stringify(presentProblem(parts, problem, localeOf(req), String(req.id))));
}

function presentProblem(parts: Parts, problem: Problem, locale: Locale, requestId: string): ProblemResponse {
  const first = problem.errors[0];
  const values = problem.errors.length > 0 && first ? valuesOf(first) : {};
  return {
    type: `${parts.settings.publicUrl}/api/v1/problems#${problem.code}`,
    title: messageFor(`problemTitle.${problem.status}`, locale),
    status: problem.status,
    detail: messageFor(`problem.${problem.code}`, locale, { ...values, ...problem.params }),
    code: problem.code,
    requestId,
    errors: problem.errors.map((refusal) => presentRefusal(refusal, locale)),
  };
}

function presentRefusal(refusal: Refusal, locale: Locale): ProblemResponse['errors'][number] {
  return {
    path: refusal.path,
    code: refusal.code,
    message: messageFor(`problem.${refusal.code}`, locale, valuesOf(refusal)),
    ...(refusal.given === undefined ? {} : { given: refusal.given }),
    ...(refusal.allowed === undefined
      ? {}
      : {
          allowed: Array.isArray(refusal.allowed) ? [...refusal.allowed] : (refusal.allowed as string | number | null),
        }),
  };
}

/** A sentence may use what was given, what is allowed, the last part of the path, and the refusal's own values. */
function valuesOf(refusal: Refusal) {
  return {
    given: refusal.given,
    allowed: refusal.allowed,
    field: refusal.path.split('/').at(-1) ?? '',
    ...refusal.params,
  };
}
