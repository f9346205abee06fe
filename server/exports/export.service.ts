import { pipeline } from 'node:stream/promises';
import type { Response } from 'express';
import type { EntityManager } from 'typeorm';
import {
  type CreateExportRequest,
  type ExportView,
  PROOF_PACKAGE,
  UNFINISHED_A_PERSON,
  XLSX_LARGEST_ROWS,
} from '../../shared/exports/export.schema.ts';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import { type Actor, mayActor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { canonicalText } from '../journal/canonical-text.ts';
import { requireSubject } from '../proof/subject.repository.ts';
import { exportsRepository } from './export.repository.ts';
import { exportFolder } from './export-folder.ts';
import { enqueueExport } from './export-queue.ts';
import { mayExport } from './export-rights.ts';
import { countOf } from './tables/table.ts';
import { isTable, tableRows } from './tables/tables.ts';

const viewerOf = (parts: Parts, actor: Actor) => ({ actor, now: parts.now() });

/**
 * Puts an export into the queue, once: the same request again answers with what became of it.
 * @throws Problem 403; 409 when the id was used for something else; 422 `tooManyRowsForXlsx`, `notKnownHere`; 429
 */
export function requestExport(
  parts: Parts,
  actor: Actor,
  request: CreateExportRequest,
): Promise<{ isNew: boolean; view: ExportView }> {
  if (!mayExport(actor, request)) throw new Problem('notPermitted', { params: { permission: 'exports:make' } });
  return inFirm(parts.dataSource, actor, async (manager) => {
    const exports = exportsRepository(manager);
    const { id, what, format, filters } = request;
    const { firmId, personId, locale } = actor;
    // One request after the other of one person, so that a resend finds the first and nobody passes the limit.
    await manager.query('select pg_advisory_xact_lock(hashtextextended($1, 0))', [`export ${firmId} ${personId}`]);
    const earlier = await exports.find(id);
    if (earlier) {
      const isSame = canonicalText(askedOf(earlier)) === canonicalText(askedOf(JSON.parse(JSON.stringify(request))));
      if (!isSame || earlier.requestedBy !== personId) throw new Problem('idReused');
      return { isNew: false, view: await requireView(parts, actor, manager, id) };
    }
    if ((await exports.countUnfinished(personId)) >= UNFINISHED_A_PERSON)
      throw new Problem('tooManyExports', { params: { limit: UNFINISHED_A_PERSON } });
    await refuseTooManyRows(manager, request);
    if (request.what === PROOF_PACKAGE) await requireSubject(manager, request.filters);
    await exports.insert({ firmId, id, what, format, filters, locale, requestedBy: personId, at: parts.now() });
    await enqueueExport(manager, { firmId, exportId: id });
    return { isNew: true, view: await requireView(parts, actor, manager, id) };
  });
}

const askedOf = ({ what, format, filters }: Pick<CreateExportRequest, 'what' | 'format' | 'filters'>) => ({
  what,
  format,
  filters,
});

/** @throws Problem 422 where a spreadsheet would be larger than this program makes them */
async function refuseTooManyRows(manager: EntityManager, request: CreateExportRequest): Promise<void> {
  if (request.format !== 'xlsx' || !isTable(request)) return;
  const [counted] = await manager.query<{ count: string }[]>(countOf(tableRows(request), XLSX_LARGEST_ROWS + 1));
  if (Number(counted?.count) > XLSX_LARGEST_ROWS)
    throw problemOfRefusals([
      {
        code: 'tooManyRowsForXlsx',
        path: '/format',
        given: 'xlsx',
        allowed: XLSX_LARGEST_ROWS,
        params: { limit: XLSX_LARGEST_ROWS },
      },
    ]);
}

/** Newest first: everybody's for who makes exports, else one's own. */
export function listExports(parts: Parts, actor: Actor, query: PageQuery) {
  const onlyOf = mayActor(actor, 'exports:make') ? null : actor.personId;
  return inFirm(parts.dataSource, actor, (manager) =>
    exportsRepository(manager).list(query, onlyOf, viewerOf(parts, actor)),
  );
}

export function getExport(parts: Parts, actor: Actor, id: string): Promise<ExportView> {
  return inFirm(parts.dataSource, actor, (manager) => requireView(parts, actor, manager, id));
}

/** Stops what runs, within a second. What is finished stays as it is. */
export function cancelExport(parts: Parts, actor: Actor, id: string): Promise<ExportView> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const { requestedBy } = await requireView(parts, actor, manager, id);
    if (requestedBy.id !== actor.personId && !mayActor(actor, 'exports:make'))
      throw new Problem('notPermitted', { params: { permission: 'exports:make' } });
    await exportsRepository(manager).cancel(id, parts.now());
    return requireView(parts, actor, manager, id);
  });
}

const MEDIA_TYPES = {
  csv: 'text/csv; charset=utf-8',
  xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
  pdf: 'application/pdf',
  zip: 'application/zip',
} as const;

/**
 * Sends the file to who asked for it, and may still take it out.
 * @throws Problem 403 where the right to it was lost meanwhile, 404 for somebody else's or another firm's, 409 while it is not finished, 410 when it is gone
 */
export async function sendExportFile(parts: Parts, actor: Actor, id: string, res: Response): Promise<void> {
  const { view, row } = await inFirm(parts.dataSource, actor, async (manager) => ({
    view: await requireView(parts, actor, manager, id),
    row: await exportsRepository(manager).find(id),
  }));
  if (!row || row.requestedBy !== actor.personId) throw new Problem('notFound');
  if (!mayExport(actor, row as CreateExportRequest))
    throw new Problem('notPermitted', { params: { permission: 'exports:make' } });
  if (view.state === 'expired') throw new Problem('exportExpired');
  if (view.state !== 'done') throw new Problem('exportNotDone', { params: { state: view.state } });
  const file = await exportFolder(parts.settings.home).read({ firmId: actor.firmId, id, attempt: row.attempts });
  if (!file) throw new Problem('exportExpired');
  res
    .status(200)
    .type(MEDIA_TYPES[view.format])
    .attachment(view.fileName ?? `${id}.${view.format}`)
    .set('Content-Length', String(file.sizeBytes))
    // Of the file as it stands in the journal, for who wants to compare.
    .set('Repr-Digest', `sha-256=:${Buffer.from(view.sha256 ?? '', 'hex').toString('base64')}:`);
  await pipeline(file.stream(), res);
}

/** @throws Problem 404: also where only who makes exports or asked for it may see it */
async function requireView(parts: Parts, actor: Actor, manager: EntityManager, id: string): Promise<ExportView> {
  const view = await exportsRepository(manager).findView(id, viewerOf(parts, actor));
  const isOwn = view?.requestedBy.id === actor.personId;
  if (!view || !(isOwn || mayActor(actor, 'exports:make'))) throw new Problem('notFound');
  return view;
}
