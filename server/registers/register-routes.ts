import type { z } from 'zod';
import type { Permission } from '../../shared/permissions/roles.ts';
import type { Actor } from '../http/actor.ts';
import { type apiRoutes, created, ok, versioned } from '../http/api-routes.ts';
import { versionOfIfMatch } from '../http/if-match.ts';
import type { Made } from './register-rows.ts';

export interface Register<C extends z.ZodType, U extends z.ZodType, V extends z.ZodType, Q extends z.ZodType, P> {
  path: `/${string}`;
  /** For the API reference: `a customer`, `Customers, by name`. */
  words: { one: string; many: string };
  write: Permission;
  create: C;
  update: U;
  view: V;
  query: Q;
  page: z.ZodType<P>;
  list(actor: Actor, query: z.output<Q>): Promise<P>;
  get(actor: Actor, id: string): Promise<z.output<V> & { version: number }>;
  make(actor: Actor, request: z.output<C>): Promise<Made<z.output<V> & { version: number }>>;
  change(actor: Actor, id: string, version: number, request: z.output<U>): Promise<z.output<V> & { version: number }>;
}

/** The four operations that every register has: list, make, read, change. */
export function addRegister<C extends z.ZodType, U extends z.ZodType, V extends z.ZodType, Q extends z.ZodType, P>(
  routes: ReturnType<typeof apiRoutes>,
  { path, words, write, create, update, view, query, page, ...service }: Register<C, U, V, Q, P>,
): void {
  routes.add(
    { method: 'get', path, summary: words.many, access: 'records:read', query, responses: { 200: page } },
    async ({ actor, query: asked }) => ok(await service.list(actor as Actor, asked as z.output<Q>)) as never,
  );
  routes.add(
    {
      method: 'post',
      path,
      summary: `Makes ${words.one}`,
      description: REPEATABLE,
      access: write,
      body: create,
      responses: { 201: view, 200: view },
      problems: ['idReused'],
    },
    async ({ actor, body }) => madeOrFound(await service.make(actor as Actor, body as z.output<C>)) as never,
  );
  routes.add(
    {
      method: 'get',
      path: `${path}/{id}`,
      summary: `Reads ${words.one}`,
      access: 'records:read',
      responses: { 200: view },
    },
    async ({ actor, params }) => versioned(await service.get(actor as Actor, idOf(params))) as never,
  );
  routes.add(
    {
      method: 'patch',
      path: `${path}/{id}`,
      summary: `Changes ${words.one}`,
      access: write,
      body: update,
      needsVersion: true,
      responses: { 200: view },
    },
    async ({ actor, params, body, req }) =>
      versioned(
        await service.change(actor as Actor, idOf(params), versionOfIfMatch(req), body as z.output<U>),
      ) as never,
  );
}

export const REPEATABLE =
  'The id is made by the client. The same request again answers 200 with what was made; the same id with other content is refused.';

const idOf = (params: object): string => (params as { id: string }).id;

/** 201 for what is new, 200 for an earlier try of the same request. */
export function madeOrFound<T>({ isNew, value }: Made<T>) {
  const version = (value as { version?: number }).version;
  const headers: Record<string, string> = version === undefined ? {} : { ETag: `"${version}"` };
  return isNew ? created(value, headers) : ok(value, headers);
}
