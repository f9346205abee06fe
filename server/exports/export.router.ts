import { createExportRequest, exportListQuery, exportPage, exportView } from '../../shared/exports/export.schema.ts';
import { type ApiRoutes, apiRoutes, created, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { REPEATABLE } from '../registers/register-routes.ts';
import { cancelExport, getExport, listExports, requestExport, sendExportFile } from './export.service.ts';

export function exportRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Exports');
  const reads = { method: 'get', access: 'records:read' } as const;
  routes.add(
    {
      method: 'post',
      path: '/exports',
      summary: 'Asks for a file: a table as CSV or XLSX, a document as PDF, a proof package as zip',
      description:
        `${REPEATABLE} The file is made in the background; finished, it can be downloaded for 24 hours by who asked for ` +
        'it. Filters are those of the list of the same name. XLSX up to 100,000 rows, CSV without a limit. Each file ' +
        'is a record of the journal, with its SHA-256.',
      access: 'records:read',
      body: createExportRequest,
      responses: { 201: exportView, 200: exportView },
      problems: ['idReused', 'tooManyExports'],
    },
    async ({ actor, body }) => {
      const { isNew, view } = await requestExport(parts, actor, body);
      return isNew ? created(view) : ok(view);
    },
  );
  routes.add(
    {
      ...reads,
      path: '/exports',
      summary: 'Who took out what, newest first; technicians and readers see their own',
      query: exportListQuery,
      responses: { 200: exportPage },
    },
    async ({ actor, query }) => ok(await listExports(parts, actor, query)),
  );
  routes.add(
    { ...reads, path: '/exports/{id}', summary: 'How far an export is', responses: { 200: exportView } },
    async ({ actor, params }) => ok(await getExport(parts, actor, params.id)),
  );
  routes.add(
    {
      method: 'post',
      path: '/exports/{id}/cancel',
      summary: 'Stops an export; one that is finished stays',
      access: 'records:read',
      responses: { 200: exportView },
    },
    async ({ actor, params }) => ok(await cancelExport(parts, actor, params.id)),
  );
  routes.add(
    {
      ...reads,
      path: '/exports/{id}/file',
      summary: 'The file',
      responses: { 200: { mediaType: 'application/octet-stream', description: 'The file as it was journalled' } },
      problems: ['exportExpired', 'exportNotDone'],
    },
    async ({ actor, params, res }) => {
      await sendExportFile(parts, actor, params.id, res);
      return undefined;
    },
  );
  return routes;
}
