import { checkImportRequest, IMPORT_LIMITS, importView } from '../../shared/imports/import.schema.ts';
import { CSV_ANSWER, csvText, sendCsv } from '../books/csv-table.ts';
import { type ApiRoutes, apiRoutes, created, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { cancelImport, checkImport, getImport, importErrors, runImport, takeUpload } from './import.service.ts';
import { importStore } from './import-store.ts';

export function importRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Imports');
  const own = { parts, store: importStore() };
  const access = 'registers:correct' as const;
  routes.add(
    {
      method: 'post',
      path: '/imports',
      summary: 'Reads a table of units, cylinders or past entries: CSV or XLSX',
      description:
        'As multipart/form-data, the field `kind` (units, cylinders, entries) and then one `file`. Nothing is stored: ' +
        'the answer says how the file was understood and which column is probably which. ' +
        `At most ${IMPORT_LIMITS.fileBytes / 1024 / 1024} MiB, ${IMPORT_LIMITS.rows} rows, ${IMPORT_LIMITS.columns} columns. ` +
        'A file that was read is forgotten after two hours and when the server starts again.',
      access,
      responses: { 201: importView },
      problems: ['unsupportedMediaType', 'importTooLarge', 'malformedRequest', 'busy'],
    },
    async ({ actor, req }) => created(await takeUpload(own, actor, req)),
  );
  routes.add(
    { method: 'get', path: '/imports/{id}', summary: 'How far an import is', access, responses: { 200: importView } },
    ({ actor, params }) => ok(getImport(own, actor, params.id)),
  );
  routes.add(
    {
      method: 'post',
      path: '/imports/{id}/check',
      summary: 'Holds every row against everything that will hold it, and keeps nothing',
      description: 'Goes on behind the answer; ask how far it is.',
      access,
      body: checkImportRequest,
      responses: { 200: importView },
    },
    ({ actor, params, body }) => ok(checkImport(own, actor, params.id, body)),
  );
  routes.add(
    {
      method: 'post',
      path: '/imports/{id}/run',
      summary: 'Brings in a table that was checked without an error: all of it or nothing',
      description:
        'The ids of what it makes follow from the content of its rows, so that the same file again changes nothing. ' +
        'That it was brought in is a record of the journal, with the SHA-256 of the file.',
      access,
      responses: { 200: importView },
    },
    ({ actor, params }) => ok(runImport(own, actor, params.id)),
  );
  routes.add(
    {
      method: 'post',
      path: '/imports/{id}/cancel',
      summary: 'Ends a check, or the bringing in before anything is kept; what has ended stays',
      access,
      responses: { 200: importView },
    },
    ({ actor, params }) => ok(cancelImport(own, actor, params.id)),
  );
  routes.add(
    {
      method: 'get',
      path: '/imports/{id}/errors.csv',
      summary: 'Every error of the last check, by row and column',
      access,
      responses: { 200: CSV_ANSWER },
    },
    ({ actor, params, res }) => {
      const lines = importErrors(own, actor, params.id).map(({ row, column, given, code, message }) => [
        row,
        column,
        given,
        code,
        message,
      ]);
      sendCsv(res, 'import-errors.csv', csvText(['row', 'column', 'given', 'code', 'message'], lines));
      return undefined;
    },
  );
  return routes;
}
