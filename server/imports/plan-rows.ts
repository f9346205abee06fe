import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { createCylinderRequest } from '../../shared/cylinders/cylinder.schema.ts';
import type { CheckImportRequest } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { entryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { refusalsOfIssues } from '../../shared/problems/refusals-of-issues.ts';
import { createUnitRequest } from '../../shared/unit-register/unit.schema.ts';
import { createCylinder } from '../cylinders/cylinder.service.ts';
import { postWithin } from '../entries/entry-group.service.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { createUnit } from '../units/unit.service.ts';
import { ENTRY_PATHS, entryRows } from './entry-rows.ts';
import type { Names } from './import.repository.ts';
import { CYLINDER_PATHS, cylinderRows, type FieldPaths, UNIT_PATHS, unitRows } from './register-rows.ts';
import { type RowFault, type RowReader, rowReader } from './row-reader.ts';
import type { Table } from './table.ts';

/** A row that can be read: what brings it in, through the services that every request goes through. */
export interface RowPlan {
  number: number;
  /** Rows are brought in by their time, so that the log is judged once and not over and over. */
  at: string;
  /** False: an earlier import brought it in. */
  bringIn(manager: EntityManager): Promise<boolean>;
  fieldOf(refusal: Refusal): string | null;
}
export interface RowFaults {
  number: number;
  faults: RowFault[];
}
export type PlannedRow = RowPlan | RowFaults;

/** Every row of the table, read and held against the schemas and the registers. Nothing is written. */
export function planRows(
  parts: PostingParts,
  actor: Actor,
  { kind, table, request, names }: { kind: ImportKind; table: Table; request: CheckImportRequest; names: Names },
): PlannedRow[] {
  const plan = plannerOf(parts, actor, kind, names);
  const seen = new Map<string, number>();
  return table.rows.map((row) => {
    const content = JSON.stringify(row.cells);
    const occurrence = (seen.get(content) ?? 0) + 1;
    seen.set(content, occurrence);
    const reader = rowReader(row, { request, firmId: actor.firmId, kind, occurrence });
    const { parsed, at, paths, bringIn } = plan(reader);
    const fieldOf = ({ path }: Refusal) => fieldAt(paths, path, request);
    const refusals = reader.faults.length > 0 ? [] : parsed;
    const faults = [...reader.faults, ...refusals.map((refusal) => ({ field: fieldOf(refusal), refusal }))];
    return faults.length > 0 ? { number: row.number, faults } : { number: row.number, at, bringIn, fieldOf };
  });
}

interface Planned {
  parsed: Refusal[];
  at: string;
  paths: FieldPaths;
  bringIn: RowPlan['bringIn'];
}

function plannerOf(parts: PostingParts, actor: Actor, kind: ImportKind, names: Names): (row: RowReader) => Planned {
  if (kind === 'units') {
    const read = unitRows(names);
    return (row) => {
      const body = read(row);
      const { refusals, data } = checked(createUnitRequest, body);
      const at = body.initialCharge.state === 'notKnown' ? '' : body.initialCharge.at;
      const bringIn = async () => (await createUnit(parts, actor, data)).isNew;
      return { parsed: refusals, at, paths: UNIT_PATHS, bringIn };
    };
  }
  if (kind === 'cylinders') {
    const read = cylinderRows(names);
    return (row) => {
      const { request, opening } = read(row);
      const { refusals, data } = checked(createCylinderRequest, request);
      const group = opening ? checked(entryGroupRequest, opening) : null;
      const bringIn = async (manager: EntityManager) => {
        const { isNew } = await createCylinder(parts, actor, data);
        if (group) await postWithin(manager, parts, actor, group.data);
        return isNew;
      };
      const parsed = [...refusals, ...(group?.refusals ?? [])];
      return { parsed, at: opening?.occurredAt ?? '', paths: CYLINDER_PATHS, bringIn };
    };
  }
  const read = entryRows(names);
  return (row) => {
    const body = read(row);
    const { refusals, data } = checked(entryGroupRequest, body);
    const bringIn = async (manager: EntityManager) => (await postWithin(manager, parts, actor, data)).isNew;
    return { parsed: refusals, at: body.occurredAt, paths: ENTRY_PATHS, bringIn };
  };
}

function checked<S extends z.ZodType>(schema: S, body: unknown) {
  const result = schema.safeParse(body);
  return result.success
    ? { refusals: [] as Refusal[], data: result.data }
    : { refusals: refusalsOfIssues(result.error.issues, body), data: undefined as z.output<S> };
}

/** The field whose cell a refusal speaks of; null: none of the mapped ones. */
function fieldAt(paths: FieldPaths, path: string, { columns }: CheckImportRequest): string | null {
  const found = paths.find(([start]) => path === start || path.startsWith(`${start}/`))?.[1];
  const field = found ?? path.split('/')[1] ?? '';
  return field in columns ? field : null;
}
