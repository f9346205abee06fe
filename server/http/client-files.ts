import { existsSync } from 'node:fs';
import path from 'node:path';
import express, { type RequestHandler, type Router } from 'express';
import { Problem } from './problem.ts';

const A_YEAR_MS = 365 * 24 * 3600 * 1000;

/**
 * The built client: files named by their content are kept for a year, everything else is asked for again each time.
 * Any other address that a browser opens gets the page itself, which knows the routes.
 */
export function clientFiles(folder: string): Router {
  const router = express.Router();
  const page = path.join(folder, 'index.html');
  router.use(
    '/assets',
    express.static(path.join(folder, 'assets'), { maxAge: A_YEAR_MS, immutable: true, index: false }),
  );
  router.use('/assets', () => {
    throw new Problem('notFound'); // never the page in place of a script of an older build
  });
  router.use(express.static(folder, { index: false, setHeaders: (res) => void res.set('Cache-Control', 'no-cache') }));
  router.get('/{*path}', pageFallback(page));
  return router;
}

function pageFallback(page: string): RequestHandler {
  return (req, res) => {
    if (req.path.startsWith('/api/') || !req.accepts('html') || !existsSync(page)) throw new Problem('notFound');
    res.set('Cache-Control', 'no-cache').sendFile(page);
  };
}
