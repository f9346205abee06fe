import { type CreateExportRequest, EXPORT_TABLES, type ExportTable } from '../../../shared/exports/export.schema.ts';
import { entries } from './entry-table.ts';
import { cylinders, tools, units } from './equipment-tables.ts';
import { flags, readings } from './log-tables.ts';
import { customers, parties, people, sites } from './people-tables.ts';
import { chargeSheets, jobs, journal, periods } from './record-tables.ts';
import type { TableOf, TableRows } from './table.ts';

const TABLES: { [W in ExportTable]: TableOf<W> } = {
  entries,
  units,
  cylinders,
  readings,
  flags,
  people,
  parties,
  tools,
  customers,
  sites,
  jobs,
  chargeSheets,
  journal,
  periods,
};

export type TableRequest = Extract<CreateExportRequest, { what: ExportTable }>;

export const isTable = (request: Pick<CreateExportRequest, 'what'>): request is TableRequest =>
  (EXPORT_TABLES as readonly string[]).includes(request.what);

export const tableRows = ({ what, filters }: Pick<TableRequest, 'what' | 'filters'>): TableRows =>
  (TABLES[what] as (filters: object) => TableRows)(filters);
