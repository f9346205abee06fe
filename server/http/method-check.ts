import type { RequestHandler } from 'express';
import type { Operation } from './api-routes.ts';
import { Problem } from './problem.ts';

/** A known path asked with another method: 405 with `Allow`, not a 404 that makes people doubt the path. */
export function methodCheck(operations: readonly Operation[]): RequestHandler {
  const methodsByPath = new Map<string, Set<string>>();
  for (const { path, method } of operations) {
    const methods = methodsByPath.get(path) ?? new Set();
    methodsByPath.set(path, methods.add(method.toUpperCase()));
  }
  const known = [...methodsByPath].map(([path, methods]) => ({
    pattern: new RegExp(`^${path.replaceAll(/\{\w+\}/g, '[^/]+')}/?$`),
    methods,
  }));
  return (req, _res, next) => {
    const methods = known.find(({ pattern }) => pattern.test(req.path))?.methods;
    if (!methods || methods.has(req.method)) return next();
    throw new Problem('methodNotAllowed', {
      params: { method: req.method },
      headers: { Allow: [...methods].join(', ') },
    });
  };
}
