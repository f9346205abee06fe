import { z } from 'zod';
import { day, id } from '../lists/list.schema.ts';
import { STORED_MASS_UNITS } from '../units/stored-mass.ts';
import { IMPORT_KINDS } from './import-fields.ts';

export const importKind = z.enum(IMPORT_KINDS);

/** Bounds of a file. A table that is larger is cut by its owner into several. */
export const IMPORT_LIMITS = {
  fileBytes: 8 * 1024 * 1024,
  /** Of everything in an XLSX file once unpacked. */
  unpackedBytes: 48 * 1024 * 1024,
  rows: 10_000,
  columns: 60,
  cellCharacters: 4_000,
} as const;

/** How large a file is and how large it may be, in MB: rounded up, so that what is too large never reads as allowed. */
export const sizesInMegabytes = (bytes: number) => ({
  given: Math.ceil((bytes / 1024 / 1024) * 10) / 10,
  allowed: IMPORT_LIMITS.fileBytes / 1024 / 1024,
});

export const DATE_ORDERS = ['dmy', 'mdy'] as const;
export const DECIMALS = ['point', 'comma'] as const;

export const checkImportRequest = z.strictObject({
  /** Field to the number of its column, from 0. */
  columns: z.record(
    z.string().max(40),
    z
      .int()
      .min(0)
      .max(IMPORT_LIMITS.columns - 1),
  ),
  /** Unit of masses that stand without one. */
  massUnit: z.enum(STORED_MASS_UNITS),
  decimal: z.enum(DECIMALS),
  /** Of dates such as 03/04/2025; 2025-04-03 needs none. */
  dateOrder: z.enum(DATE_ORDERS),
  /** From which day on a register's row holds where no column says so. */
  since: day,
});
export type CheckImportRequest = z.output<typeof checkImportRequest>;

/** `read`: columns can be mapped. `checked` without errors: it can be brought in. Ended otherwise, nothing was kept. */
export const IMPORT_STATES = ['read', 'checking', 'checked', 'running', 'done', 'cancelled', 'failed'] as const;

export const importError = z.strictObject({
  /** Of the file: the heads are row 1. */
  row: z.int(),
  /** The head of the column; null: the row as a whole. */
  column: z.string().nullable(),
  given: z.string().nullable(),
  code: z.string(),
  message: z.string(),
});
export type ImportError = z.output<typeof importError>;

export const importView = z.strictObject({
  id,
  kind: importKind,
  fileName: z.string(),
  /** Of the file; its record in the log names it too. */
  sha256: z.string(),
  /** What the file was understood as. */
  read: z.strictObject({
    format: z.enum(['csv', 'xlsx']),
    encoding: z.enum(['utf-8', 'utf-16', 'windows-1252']).nullable(),
    delimiter: z.enum([',', ';', '\t', '|']).nullable(),
    sheet: z.string().nullable(),
    rows: z.int(),
    /** Cells that hold a formula: what stood in them last is taken, as text; nothing is worked out. */
    formulas: z.int(),
    decimal: z.enum(DECIMALS),
  }),
  columns: z.array(z.strictObject({ head: z.string(), samples: z.array(z.string()) })),
  fields: z.array(z.strictObject({ name: z.string(), required: z.boolean(), guess: z.int().nullable() })),
  state: z.enum(IMPORT_STATES),
  rowsDone: z.int(),
  /** How many rows cannot be taken, and the first errors; all of them are in the CSV file. */
  wrongRows: z.int(),
  errorCount: z.int(),
  errors: z.array(importError),
  /** Rows that were new, and rows that an earlier import had brought in. */
  made: z.int(),
  already: z.int(),
  /** The record of the log that says that it was brought in. Null: nothing was new, or it was not brought in. */
  recordSequence: z.int().nullable(),
  /** Why it broke off. */
  problem: z.string().nullable(),
});
export type ImportView = z.output<typeof importView>;
