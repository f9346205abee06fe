import type { Request } from 'express';
import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
import { IMPORT_FIELDS } from '../../shared/imports/import-fields.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import type { ImportStore, StoredImport } from './import-store.ts';
import { errorsOf, shownOf, viewOf } from './import-view.ts';
import { readUpload } from './read-upload.ts';
import { workOn } from './work-on.ts';

export interface ImportParts {
  parts: Parts;
  store: ImportStore;
}

export async function takeUpload({ parts, store }: ImportParts, actor: Actor, req: Request): Promise<ImportView> {
  const upload = await readUpload(req);
  const stored: StoredImport = {
    ...upload,
    id: parts.newId(),
    firmId: actor.firmId,
    personId: actor.personId,
    shown: shownOf(upload.kind, upload.table),
    uploadedAt: parts.now().getTime(),
    state: 'read',
    request: null,
    ...NOTHING_DONE,
  };
  if (!store.add(stored)) throw new Problem('busy');
  return viewOf(stored, actor.locale);
}

const NOTHING_DONE = {
  rowsDone: 0,
  faults: [],
  made: 0,
  already: 0,
  recordSequence: null,
  problem: null,
  isCancelled: false,
} satisfies Partial<StoredImport>;

export function getImport({ store }: ImportParts, actor: Actor, id: string): ImportView {
  return viewOf(require(store, actor, id), actor.locale);
}

/** Reads every row as the columns say and holds it against everything that will hold it. Keeps nothing. */
export function checkImport(own: ImportParts, actor: Actor, id: string, request: CheckImportRequest): ImportView {
  const stored = require(own.store, actor, id);
  refuseMapping(stored, request);
  begin(own.store, stored, 'checking');
  stored.request = request;
  workOn(own.parts, actor, stored, request);
  return viewOf(stored, actor.locale);
}

/** Brings the rows in, all or nothing. */
export function runImport(own: ImportParts, actor: Actor, id: string): ImportView {
  const stored = require(own.store, actor, id);
  if (stored.state === 'done' || stored.state === 'running') return viewOf(stored, actor.locale);
  if (stored.state !== 'checked' || stored.faults.length > 0 || !stored.request) {
    throw problemOfRefusals([{ code: 'importNotChecked', path: '' }]);
  }
  begin(own.store, stored, 'running');
  workOn(own.parts, actor, stored, stored.request);
  return viewOf(stored, actor.locale);
}

/** Ends a check, or the bringing in before anything of it is kept. What has ended stays as it is. */
export function cancelImport({ store }: ImportParts, actor: Actor, id: string): ImportView {
  const stored = require(store, actor, id);
  if (stored.state === 'checking' || stored.state === 'running') stored.isCancelled = true;
  return viewOf(stored, actor.locale);
}

/** Every error as a table. */
export function importErrors({ store }: ImportParts, actor: Actor, id: string) {
  return [...errorsOf(require(store, actor, id), actor.locale)];
}

function require(store: ImportStore, actor: Actor, id: string): StoredImport {
  const stored = store.find(id, actor.firmId);
  if (!stored) throw new Problem('notFound');
  return stored;
}

function begin(store: ImportStore, stored: StoredImport, state: 'checking' | 'running'): void {
  if (store.isFirmBusy(stored.firmId)) throw problemOfRefusals([{ code: 'importBusy', path: '' }]);
  if (stored.state === 'done') throw problemOfRefusals([{ code: 'importDone', path: '' }]);
  Object.assign(stored, { ...NOTHING_DONE, state });
}

function refuseMapping({ kind, table }: StoredImport, { columns }: CheckImportRequest): void {
  const fields = IMPORT_FIELDS[kind];
  const refusals = [
    ...Object.entries(columns).flatMap(([name, column]) => {
      const path = `/columns/${name}`;
      if (!fields.some((field) => field.name === name)) return [{ code: 'unknownKey', path }];
      if (column < table.heads.length) return [];
      return [{ code: 'tooLarge', path, given: column, allowed: table.heads.length - 1 }];
    }),
    ...fields
      .filter(({ name, required }) => required && columns[name] === undefined)
      .map(({ name }) => ({ code: 'importColumnNeeded', path: `/columns/${name}` })),
  ];
  if (refusals.length > 0) throw problemOfRefusals(refusals);
}
