import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { createCylinderRequest } from '../../shared/cylinders/cylinder.schema.ts';
import type { CheckImportRequest } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { entryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { refusalsOfIssues } from '../../shared/problems/refusals-of-issues.ts';
import { createUnitRequest } from '../../shared/unit-register/unit.schema.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { postGroupsWithin } from '../entries/post-groups.ts';
import type { Actor } from '../http/actor.ts';
import type { NewOrRefused } from '../journal/register-journal.ts';
import { makeUnits } from '../units/make-units.ts';
import { bringCylinders, type CylinderBodies } from './bring-cylinders.ts';
import { ENTRY_PATHS, entryRows } from './entry-rows.ts';
import type { Names } from './import.repository.ts';
import { CYLINDER_PATHS, cylinderRows, type FieldPaths, UNIT_PATHS, unitRows } from './register-rows.ts';
import { type RowFault, type RowReader, rowReader } from './row-reader.ts';
import type { Table } from './table.ts';

/** A row that can be read. */
export interface RowPlan {
  number: number;
  cells: readonly string[];
  /** Rows are brought in by their time, so that the log is judged once and not over and over. */
  at: string;
  fieldOf(refusal: Refusal): string | null;
}
export interface RowFaults {
  number: number;
  cells: readonly string[];
  faults: RowFault[];
}
export interface PlannedTable {
  plans: readonly RowPlan[];
  faults: readonly RowFaults[];
  /**
   * Brings in rows through the services that every request goes through; the head is locked.
   * @returns of each whether it is new, or what refused it
   * @throws Problem where the database refuses them together
   */
  bring(manager: EntityManager, plans: readonly RowPlan[]): Promise<NewOrRefused[]>;
}

export interface Planning {
  kind: ImportKind;
  table: Table;
  request: CheckImportRequest;
  names: Names;
  /** Between rows: lets others have the processor; what it throws ends the planning. */
  pause(): Promise<void>;
}

/** What rows of one kind become, and what brings them in. */
interface Kind<Body> {
  paths: FieldPaths;
  read(row: RowReader): { at: string; refusals: Refusal[]; body: Body };
  bring(manager: EntityManager, bodies: readonly Body[]): Promise<NewOrRefused[]>;
}

/** Every row of the table, read and held against the schemas and the registers. Nothing is written. */
export function planRows(parts: PostingParts, actor: Actor, planning: Planning): Promise<PlannedTable> {
  switch (planning.kind) {
    case 'units':
      return planKind(unitKind(parts, actor, planning.names), actor, planning);
    case 'cylinders':
      return planKind(cylinderKind(parts, actor, planning.names), actor, planning);
    case 'entries':
      return planKind(entryKind(parts, actor, planning.names), actor, planning);
  }
}

/** Rows read before others have a turn. */
const ROWS_A_TURN = 200;

async function planKind<Body>(
  { paths, read, bring }: Kind<Body>,
  { firmId }: Actor,
  { kind, table, request, pause }: Planning,
): Promise<PlannedTable> {
  const bodies = new Map<RowPlan, Body>();
  const faulty: RowFaults[] = [];
  const seen = new Map<string, number>();
  for (const [index, row] of table.rows.entries()) {
    if (index % ROWS_A_TURN === 0) await pause();
    const { number, cells } = row;
    const content = JSON.stringify(cells);
    const occurrence = (seen.get(content) ?? 0) + 1;
    seen.set(content, occurrence);
    const reader = rowReader(row, { request, firmId, kind, occurrence });
    const { at, refusals, body } = read(reader);
    const fieldOf = ({ path }: Refusal) => fieldAt(paths, path, request);
    const parsed = reader.faults.length > 0 ? [] : refusals;
    const faults = [...reader.faults, ...parsed.map((refusal) => ({ field: fieldOf(refusal), refusal }))];
    if (faults.length > 0) faulty.push({ number, cells, faults });
    else bodies.set({ number, cells, at, fieldOf }, body);
  }
  return {
    plans: [...bodies.keys()],
    faults: faulty,
    bring: (manager, plans) =>
      bring(
        manager,
        plans.map((plan) => bodies.get(plan) as Body),
      ),
  };
}

function unitKind(parts: PostingParts, actor: Actor, names: Names): Kind<z.output<typeof createUnitRequest>> {
  const read = unitRows(names);
  return {
    paths: UNIT_PATHS,
    read(row) {
      const body = read(row);
      const at = body.initialCharge.state === 'notKnown' ? '' : body.initialCharge.at;
      return { at, ...checked(createUnitRequest, body) };
    },
    bring: (manager, bodies) => makeUnits(manager, parts, actor, bodies),
  };
}

function cylinderKind(parts: PostingParts, actor: Actor, names: Names): Kind<CylinderBodies> {
  const read = cylinderRows(names);
  return {
    paths: CYLINDER_PATHS,
    read(row) {
      const { request, opening } = read(row);
      const cylinder = checked(createCylinderRequest, request);
      const group = opening ? checked(entryGroupRequest, opening) : null;
      const refusals = [...cylinder.refusals, ...(group?.refusals ?? [])];
      const body = { cylinder: cylinder.body, opening: group?.body ?? null };
      return { at: opening?.occurredAt ?? '', refusals, body };
    },
    bring: (manager, bodies) => bringCylinders(manager, parts, actor, bodies),
  };
}

function entryKind(parts: PostingParts, actor: Actor, names: Names): Kind<z.output<typeof entryGroupRequest>> {
  const read = entryRows(names);
  return {
    paths: ENTRY_PATHS,
    read(row) {
      const body = read(row);
      return { at: body.occurredAt, ...checked(entryGroupRequest, body) };
    },
    bring: (manager, bodies) => postGroupsWithin(manager, parts, actor, bodies),
  };
}

function checked<S extends z.ZodType>(schema: S, body: unknown) {
  const result = schema.safeParse(body);
  return result.success
    ? { refusals: [] as Refusal[], body: result.data }
    : { refusals: refusalsOfIssues(result.error.issues, body), body: undefined as z.output<S> };
}

/** The field whose cell a refusal speaks of; null: none of the mapped ones. */
function fieldAt(paths: FieldPaths, path: string, { columns }: CheckImportRequest): string | null {
  const found = paths.find(([start]) => path === start || path.startsWith(`${start}/`))?.[1];
  const field = found ?? path.split('/')[1] ?? '';
  return field in columns ? field : null;
}
