import type { ImportError, ImportView } from '../../shared/imports/import.schema.ts';
import { guessColumns, IMPORT_FIELDS, type ImportKind } from '../../shared/imports/import-fields.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { messageFor } from '../messages/translate.ts';
import type { StoredImport } from './import-store.ts';
import type { Table } from './table.ts';

/** Errors in an answer; the CSV file holds all. */
const SHOWN_ERRORS = 100;
const SAMPLES = 3;

/** What is worked out of the columns once, when the file is read. */
export function shownOf(kind: ImportKind, table: Table): StoredImport['shown'] {
  const guess = guessColumns(kind, table.heads);
  return {
    columns: table.heads.map((head, column) => ({ head, samples: samplesOf(table, column) })),
    fields: IMPORT_FIELDS[kind].map(({ name, required }) => ({ name, required, guess: guess[name] ?? null })),
  };
}

function samplesOf({ rows }: Table, column: number): string[] {
  const samples: string[] = [];
  for (const { cells } of rows) {
    const cell = cells[column] ?? '';
    if (cell !== '') samples.push(cell.slice(0, 60));
    if (samples.length === SAMPLES) break;
  }
  return samples;
}

export function* errorsOf(stored: StoredImport, locale: Locale): Generator<ImportError> {
  for (const { number, cells, faults } of stored.faults) {
    for (const { field, refusal } of faults) {
      const column = field === null ? undefined : stored.request?.columns[field];
      const values = { given: refusal.given, allowed: refusal.allowed, ...refusal.params };
      yield {
        row: number,
        column: column === undefined ? null : (stored.table.heads[column] ?? null),
        given: column === undefined ? null : (cells[column] ?? null),
        code: refusal.code,
        message: messageFor(`problem.${refusal.code}`, locale, {
          ...values,
          field: refusal.path.split('/').at(-1) ?? '',
        }),
      };
    }
  }
}

export function viewOf(stored: StoredImport, locale: Locale): ImportView {
  const errors: ImportError[] = [];
  for (const error of errorsOf(stored, locale)) {
    errors.push(error);
    if (errors.length === SHOWN_ERRORS) break;
  }
  const { id, kind, fileName, sha256, table, shown, state, rowsDone, faults, made, already, recordSequence } = stored;
  return {
    id,
    kind,
    fileName,
    sha256,
    read: table.read,
    ...shown,
    state,
    rowsDone,
    wrongRows: faults.length,
    errorCount: faults.reduce((sum, row) => sum + row.faults.length, 0),
    errors,
    made,
    already,
    recordSequence,
    problem: stored.problem === null ? null : messageFor(`problem.${stored.problem}`, locale, {}),
  };
}
