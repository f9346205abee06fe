import { createRequire } from 'node:module';
import path from 'node:path';
import express, { type Router } from 'express';

const PAGE = `<!doctype html>
<html lang="en">
  <head>
    <meta charset="utf-8" />
    <meta name="viewport" content="width=device-width, initial-scale=1" />
    <title>Tarewright API</title>
    <link rel="icon" href="data:," />
    <link rel="stylesheet" href="/api/docs/swagger-ui.css" />
  </head>
  <body>
    <div id="reference"></div>
    <script src="/api/docs/swagger-ui-bundle.js"></script>
    <script src="/api/docs/start.js"></script>
  </body>
</html>
`;

const START = `window.SwaggerUIBundle({
  url: '/api/v1/openapi.json',
  dom_id: '#reference',
  deepLinking: true,
  validatorUrl: null,
  defaultModelsExpandDepth: 0,
  docExpansion: 'list',
});
`;

/** The readable API reference, from files of our own server alone: it works without a network and under our policy. */
export function referencePage(): Router {
  const router = express.Router();
  const folder = path.dirname(createRequire(import.meta.url).resolve('swagger-ui-dist/package.json'));
  router.get('/', (_req, res) => void res.type('html').send(PAGE));
  router.get('/start.js', (_req, res) => void res.type('js').send(START));
  for (const file of ['swagger-ui.css', 'swagger-ui-bundle.js']) {
    router.get(`/${file}`, (_req, res) => res.sendFile(path.join(folder, file), { maxAge: 3_600_000 }));
  }
  return router;
}
