import { z } from 'zod';
import { customerListQuery } from '../customers/customers.schema.ts';
import { cylinderListQuery } from '../cylinders/cylinder.schema.ts';
import { entryExportQuery, flagListQuery } from '../entries/entry.schema.ts';
import { jobListQuery } from '../jobs/jobs.schema.ts';
import { day, id, instant, month, pageOf, pageQuery } from '../lists/list.schema.ts';
import { partyListQuery } from '../parties/parties.schema.ts';
import { listPeopleQuery } from '../people/people.schema.ts';
import { journalQuery, proofPackageFilters } from '../proof/proof.schema.ts';
import { siteListQuery } from '../sites/sites.schema.ts';
import { STATEMENT_LIMITS } from '../statements/cylinder-statement.schema.ts';
import { toolListQuery } from '../tools/tools.schema.ts';
import { unitListQuery } from '../unit-register/unit.schema.ts';

export const EXPORT_TABLES = [
  'entries',
  'units',
  'cylinders',
  'readings',
  'flags',
  'people',
  'parties',
  'tools',
  'customers',
  'sites',
  'jobs',
  'chargeSheets',
  'journal',
  'periods',
] as const;
export type ExportTable = (typeof EXPORT_TABLES)[number];
export const EXPORT_DOCUMENTS = [
  'unitLog',
  'cylinderStatement',
  'periodReport',
  'disposalReport',
  'jobRecord',
  'chargeLabel',
] as const;
export type ExportDocument = (typeof EXPORT_DOCUMENTS)[number];
/** A package of the proof, as a zip. */
export const PROOF_PACKAGE = 'proofPackage';
export const EXPORT_WHATS = [...EXPORT_TABLES, ...EXPORT_DOCUMENTS, PROOF_PACKAGE] as const;
export type ExportWhat = (typeof EXPORT_WHATS)[number];

/** Above it a spreadsheet is refused: the same rows as CSV have no limit. */
export const XLSX_LARGEST_ROWS = 100_000;
/** How long a finished file can be downloaded. */
export const FILE_KEPT_HOURS = 24;
/** Exports of one person that wait or run at a time. */
export const UNFINISHED_A_PERSON = 5;

const DAY_MS = 24 * 60 * 60_000;
const TABLE_FORMATS = ['csv', 'xlsx'] as const;
const months = z
  .strictObject({ from: month, to: month })
  .refine(({ from, to }) => from <= to, { path: ['to'], params: { code: 'endBeforeStart' } });

/** First and last day, both included, in the firm's zone. */
const days = z
  .strictObject({ cylinderId: id, from: day, to: day })
  .refine(({ from, to }) => from <= to, { path: ['to'], params: { code: 'endBeforeStart' } })
  .refine(({ from, to }) => Date.parse(to) - Date.parse(from) < STATEMENT_LIMITS.days * DAY_MS, {
    path: ['from'],
    params: { code: 'statementPeriodTooLong', allowed: STATEMENT_LIMITS.days },
  });

const withoutPages = { cursor: true, limit: true } as const;
const table = <W extends ExportTable, F extends z.ZodType>(what: W, filters: F) =>
  z.strictObject({ id, what: z.literal(what), format: z.enum(TABLE_FORMATS), filters });
const document = <W extends ExportDocument, F extends z.ZodType>(what: W, filters: F) =>
  z.strictObject({ id, what: z.literal(what), format: z.literal('pdf'), filters });

/** Filters are those of the list with the same name, without its pages. */
export const createExportRequest = z.discriminatedUnion('what', [
  table('entries', entryExportQuery),
  table('units', unitListQuery.omit(withoutPages)),
  table('cylinders', cylinderListQuery.omit(withoutPages)),
  table('readings', z.strictObject({ cylinderId: id.optional(), unitId: id.optional() })),
  table('flags', flagListQuery.omit(withoutPages)),
  table('people', listPeopleQuery.omit(withoutPages)),
  table('parties', partyListQuery.omit(withoutPages)),
  table('tools', toolListQuery.omit(withoutPages)),
  table('customers', customerListQuery.omit(withoutPages)),
  table('sites', siteListQuery.omit(withoutPages)),
  table('jobs', jobListQuery.omit(withoutPages)),
  table('chargeSheets', z.strictObject({ unitId: id.optional() })),
  table('journal', journalQuery.omit(withoutPages)),
  table('periods', z.strictObject({})),
  document('unitLog', z.strictObject({ unitId: id })),
  document('cylinderStatement', days),
  document('periodReport', months),
  document('disposalReport', months),
  document('jobRecord', z.strictObject({ jobId: id })),
  document('chargeLabel', z.strictObject({ unitId: id })),
  z.strictObject({ id, what: z.literal(PROOF_PACKAGE), format: z.literal('zip'), filters: proofPackageFilters }),
]);
export type CreateExportRequest = z.output<typeof createExportRequest>;
export type FiltersOf<W extends ExportWhat> = Extract<CreateExportRequest, { what: W }>['filters'];
export type ExportFormat = CreateExportRequest['format'];

/** `expired`: it was made, and its file is gone. */
export const EXPORT_STATES = ['queued', 'running', 'done', 'cancelled', 'failed', 'expired'] as const;

export const exportView = z.strictObject({
  id,
  what: z.enum(EXPORT_WHATS),
  format: z.enum(['csv', 'xlsx', 'pdf', 'zip']),
  filters: z.record(z.string(), z.unknown()),
  state: z.enum(EXPORT_STATES),
  rowsDone: z.int(),
  /** Null until they were counted. */
  rowsTotal: z.int().nullable(),
  requestedBy: z.strictObject({ id, name: z.string() }),
  requestedAt: instant,
  finishedAt: instant.nullable(),
  /** Until when the file can be downloaded; null where there is none. */
  expiresAt: instant.nullable(),
  fileName: z.string().nullable(),
  sizeBytes: z.int().nullable(),
  /** Of the file, hex; the same stands in the journal. */
  sha256: z.string().nullable(),
  /** Sequence of its record in the journal. */
  record: z.int().nullable(),
  /** Why it failed, in the caller's language. */
  problem: z.strictObject({ code: z.string(), message: z.string() }).nullable(),
  /** Only who asked for a file downloads it. */
  mayDownload: z.boolean(),
});
export type ExportView = z.output<typeof exportView>;

export const exportListQuery = pageQuery;
export const exportPage = pageOf(exportView);
