import express, { type Request, type RequestHandler, type Response, type Router } from 'express';
import type { z } from 'zod';
import { id } from '../../shared/lists/list.schema.ts';
import type { Permission } from '../../shared/permissions/roles.ts';
import type { ProblemCode } from '../../shared/problems/problem-codes.ts';
import { type Actor, actorOf, requirePermission, requireSession } from './actor.ts';
import { checkAnswer } from './check-answer.ts';
import { readJsonBody } from './json-body.ts';
import { parseBody, parseQuery } from './parse.ts';
import type { Parts } from './parts.ts';
import { Problem } from './problem.ts';

/**
 * `public`: nobody need be signed in. `signedIn`: everybody who is. `session`: likewise, but not with a token. Else the
 * permission that it takes.
 */
export type Access = 'public' | 'signedIn' | 'session' | Permission;

/** A schema, or the media type of an answer that is no JSON; null: no content. */
export type AnswerShape = z.ZodType | { mediaType: string; description: string } | null;

/** One method on one path. The same object mounts the route and documents it, so neither exists without the other. */
export interface Operation<
  A extends Access = Access,
  B extends z.ZodType = z.ZodType,
  Q extends z.ZodType = z.ZodType,
  R extends Record<number, AnswerShape> = Record<number, AnswerShape>,
  P extends `/${string}` = `/${string}`,
> {
  method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  /** Below `/api/v1`, parameters in braces: `/customers/{id}`. Parameters are UUIDs; anything else is a 404. */
  path: P;
  summary: string;
  description?: string;
  access: A;
  body?: B;
  query?: Q;
  responses: R;
  /** Refusals besides those that follow from access, body and query. */
  problems?: readonly ProblemCode[];
  /** Largest body in bytes; 256 KiB unless said otherwise. */
  bodyLimit?: number;
  /** Runs before the body is read: rate limits. */
  before?: readonly RequestHandler[];
  /** The caller has to name the version it has seen: `If-Match`. */
  needsVersion?: boolean;
}

/** The names in braces of a path: `/units/{id}` has `id`. */
type BracesOf<P extends string> = P extends `${string}{${infer Name}}${infer Rest}` ? Name | BracesOf<Rest> : never;

export interface Call<A extends Access, B extends z.ZodType, Q extends z.ZodType, P extends string> {
  req: Request;
  res: Response;
  actor: A extends 'public' ? Actor | undefined : Actor;
  body: z.output<B>;
  query: z.output<Q>;
  /** Values of the braces, each a UUID. */
  params: { [name in BracesOf<P>]: string };
}

type BodyOf<S extends AnswerShape> = S extends z.ZodType ? z.input<S> : undefined;
export type Answer<R extends Record<number, AnswerShape>> = {
  [S in keyof R & number]: BodyOf<R[S]> extends undefined
    ? { status: S; body?: undefined; headers?: Record<string, string> }
    : { status: S; body: BodyOf<R[S]>; headers?: Record<string, string> };
}[keyof R & number];

/** Answers of a handler; one that writes to `res` itself (a download) returns nothing. */
export const ok = <T>(body: T, headers: Record<string, string> = {}) => ({ status: 200 as const, body, headers });
export const created = <T>(body: T, headers: Record<string, string> = {}) => ({ status: 201 as const, body, headers });
/** Taken on; what comes of it is not part of the answer. */
export const accepted = () => ({ status: 202 as const });
export const noContent = () => ({ status: 204 as const });
/** With the version that a later `If-Match` has to name. */
export const versioned = <T extends { version: number }>(body: T) => ok(body, { ETag: `"${body.version}"` });

/** The routes of one noun: its Express router and the operations that describe it. */
export interface ApiRoutes {
  tag: string;
  router: Router;
  operations: readonly Operation[];
}

/** Makes the routes of one resource. `tag` groups them in the API reference. */
export function apiRoutes(parts: Parts, tag: string) {
  const router = express.Router({ caseSensitive: true });
  const operations: Operation[] = [];
  return {
    tag,
    router,
    operations: operations as readonly Operation[],
    /**
     * Adds one operation. Access is checked first, then the body is read and parsed, then `handle` runs; what it throws
     * becomes the answer in one place.
     */
    add<
      A extends Access,
      R extends Record<number, AnswerShape>,
      const P extends `/${string}`,
      B extends z.ZodType = z.ZodUndefined,
      Q extends z.ZodType = z.ZodUndefined,
    >(
      operation: Operation<A, B, Q, R, P>,
      handle: (call: Call<A, B, Q, P>) => Promise<Answer<R> | undefined> | Answer<R> | undefined,
    ): void {
      operations.push(operation as unknown as Operation);
      const expressPath = (operation.path as string).replaceAll(/\{(\w+)\}/g, ':$1');
      router[operation.method](expressPath, ...(operation.before ?? []), async (req, res) => {
        const actor = actorFor(operation.access, req);
        const params = idsOf(req.params as Record<string, string>);
        if (operation.body) await readJsonBody(req, res, operation.bodyLimit);
        const answer = await handle({
          req,
          res,
          actor: actor as Call<A, B, Q, P>['actor'],
          body: operation.body ? parseBody(operation.body, req) : undefined,
          query: operation.query ? parseQuery(operation.query, req) : undefined,
          params,
        } as Call<A, B, Q, P>);
        if (answer === undefined) return;
        if (parts.checkAnswers) checkAnswer(operation as unknown as Operation, answer);
        res.status(answer.status).set(answer.headers ?? {});
        if (answer.body === undefined) res.end();
        else res.json(answer.body);
      });
    },
  };
}

/** Capitals are the same id (RFC 9562, section 4). @throws Problem 404 */
function idsOf(params: Record<string, string>): Record<string, string> {
  const read = Object.entries(params).map(([name, value]) => {
    const parsed = id.safeParse(value);
    if (!parsed.success) throw new Problem('notFound');
    return [name, parsed.data];
  });
  return Object.fromEntries(read);
}

function actorFor(access: Access, req: Request): Actor | undefined {
  if (access === 'public') return req.actor;
  if (access === 'signedIn') return actorOf(req);
  return access === 'session' ? requireSession(req) : requirePermission(req, access);
}
