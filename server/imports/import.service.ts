import type { Request } from 'express';
import {
  type CheckImportRequest,
  IMPORT_LIMITS,
  type ImportError,
  type ImportView,
} from '../../shared/imports/import.schema.ts';
import { guessColumns, IMPORT_FIELDS } from '../../shared/imports/import-fields.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { messageFor } from '../messages/translate.ts';
import { bringIn } from './bring-in.ts';
import { readNames } from './import.repository.ts';
import type { ImportStore, StoredImport } from './import-store.ts';
import { planRows, type RowPlan } from './plan-rows.ts';
import { readUpload } from './read-upload.ts';

/** Errors in an answer; the CSV file holds all. */
const SHOWN_ERRORS = 100;
const SAMPLES = 3;

export interface ImportParts {
  parts: Parts;
  store: ImportStore;
}

export async function takeUpload({ parts, store }: ImportParts, actor: Actor, req: Request): Promise<ImportView> {
  const { kind, fileName, table } = await readUpload(req);
  const stored: StoredImport = {
    id: parts.newId(),
    firmId: actor.firmId,
    personId: actor.personId,
    kind,
    fileName,
    table,
    uploadedAt: parts.now().getTime(),
    state: 'read',
    request: null,
    rowsDone: 0,
    faults: [],
    made: 0,
    already: 0,
  };
  if (!store.add(stored)) throw new Problem('busy');
  return viewOf(stored, actor.locale);
}

export function getImport({ store }: ImportParts, actor: Actor, id: string): ImportView {
  return viewOf(require(store, actor, id), actor.locale);
}

/** Reads every row as the columns say and holds it against everything that will hold it. Keeps nothing. */
export function checkImport(own: ImportParts, actor: Actor, id: string, request: CheckImportRequest): ImportView {
  const stored = require(own.store, actor, id);
  refuseMapping(stored, request);
  begin(own.store, stored, 'checking');
  stored.request = request;
  work(own, actor, stored, request, true);
  return viewOf(stored, actor.locale);
}

/** Brings the rows in, all or nothing. */
export function runImport(own: ImportParts, actor: Actor, id: string): ImportView {
  const stored = require(own.store, actor, id);
  if (stored.state === 'done') return viewOf(stored, actor.locale);
  if (stored.state !== 'checked' || stored.faults.length > 0 || !stored.request) {
    throw problemOfRefusals([{ code: 'importNotChecked', path: '' }]);
  }
  begin(own.store, stored, 'running');
  work(own, actor, stored, stored.request, false);
  return viewOf(stored, actor.locale);
}

function work(
  { parts }: ImportParts,
  actor: Actor,
  stored: StoredImport,
  request: CheckImportRequest,
  rehearsal: boolean,
): void {
  parts.background.run('import', async () => {
    try {
      const names = await inFirm(parts.dataSource, actor, readNames);
      const planned = planRows(parts, actor, { kind: stored.kind, table: stored.table, request, names });
      const plans = planned.filter((row): row is RowPlan => 'bringIn' in row);
      stored.faults = planned.filter((row) => 'faults' in row);
      stored.rowsDone = stored.faults.length;
      // What can be read is judged only when all of it can: half a table would be judged on books that lack the rest.
      if (stored.faults.length === 0) {
        const onRow = () => {
          stored.rowsDone += 1;
        };
        const { made, already, faults } = await bringIn(parts, actor, plans, {
          rehearsal,
          independent: stored.kind !== 'entries',
          onRow,
        });
        Object.assign(stored, { made, already, faults });
      }
      stored.state = rehearsal || stored.faults.length > 0 ? 'checked' : 'done';
    } catch (error) {
      stored.state = 'failed';
      throw error; // to the log
    }
  });
}

function require(store: ImportStore, actor: Actor, id: string): StoredImport {
  const stored = store.find(id, actor.firmId);
  if (!stored) throw new Problem('notFound');
  return stored;
}

function begin(store: ImportStore, stored: StoredImport, state: 'checking' | 'running'): void {
  if (store.isFirmBusy(stored.firmId)) throw problemOfRefusals([{ code: 'importBusy', path: '' }]);
  if (stored.state === 'done') throw problemOfRefusals([{ code: 'importDone', path: '' }]);
  Object.assign(stored, { state, rowsDone: 0, faults: [], made: 0, already: 0 });
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

export function* errorsOf(stored: StoredImport, locale: Locale): Generator<ImportError> {
  const cellsOf = new Map(stored.table.rows.map(({ number, cells }) => [number, cells]));
  for (const { number, faults } of stored.faults) {
    for (const { field, refusal } of faults) {
      const column = field === null ? undefined : stored.request?.columns[field];
      const values = { given: refusal.given, allowed: refusal.allowed, ...refusal.params };
      yield {
        row: number,
        column: column === undefined ? null : (stored.table.heads[column] ?? null),
        given: column === undefined ? null : (cellsOf.get(number)?.[column] ?? null),
        code: refusal.code,
        message: messageFor(`problem.${refusal.code}`, locale, {
          ...values,
          field: refusal.path.split('/').at(-1) ?? '',
        }),
      };
    }
  }
}

/** Every error as a table. */
export function importErrors({ store }: ImportParts, actor: Actor, id: string) {
  const stored = require(store, actor, id);
  return { stored, rows: [...errorsOf(stored, actor.locale)] };
}

function viewOf(stored: StoredImport, locale: Locale): ImportView {
  const { table, kind } = stored;
  const guess = guessColumns(kind, table.heads);
  const errors: ImportError[] = [];
  for (const error of errorsOf(stored, locale)) {
    errors.push(error);
    if (errors.length === SHOWN_ERRORS) break;
  }
  return {
    id: stored.id,
    kind,
    fileName: stored.fileName,
    read: table.read,
    columns: table.heads.map((head, column) => ({
      head,
      samples: table.rows
        .map(({ cells }) => cells[column] ?? '')
        .filter((cell) => cell !== '')
        .slice(0, SAMPLES)
        .map((cell) => cell.slice(0, 60)),
    })),
    fields: IMPORT_FIELDS[kind].map(({ name, required }) => ({ name, required, guess: guess[name] ?? null })),
    state: stored.state,
    rowsDone: Math.min(stored.rowsDone, IMPORT_LIMITS.rows),
    wrongRows: stored.faults.length,
    errorCount: stored.faults.reduce((sum, { faults }) => sum + faults.length, 0),
    errors,
    made: stored.made,
    already: stored.already,
  };
}
