import type { EntityManager } from 'typeorm';
import { inFirm } from '../database/firm-scope.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import type { PlannedTable, RowFaults, RowPlan } from './plan-rows.ts';

/** Ends the transaction without keeping anything. */
class NothingKept extends Error {}

export interface BroughtIn {
  made: number;
  already: number;
  faults: RowFaults[];
}

/** Rows that reach the log together, and between which others get in while independent rows are rehearsed. */
const AT_ONCE = 250;

/**
 * Brings rows in, all or nothing, in one transaction, many of them at a time. A row that is refused does not hide what
 * is wrong with the others, and one refusal keeps the whole from being kept.
 * @param rehearsal everything is judged as it will be, and nothing kept
 * @param independent no row rests on another: a rehearsal then holds the firm's log for a part of the rows at a time
 * @param beforeRows called between parts with how many are done; what it throws ends it, and nothing is kept
 * @param beforeKeeping in the transaction, when every row is in
 */
export async function bringIn(
  parts: PostingParts,
  actor: Actor,
  table: PlannedTable,
  { rehearsal, independent, beforeRows, beforeKeeping }: BringingIn,
): Promise<BroughtIn> {
  const outcome: BroughtIn = { made: 0, already: 0, faults: [] };
  const inTime = table.plans.toSorted((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : a.number - b.number));
  const together = rehearsal && independent ? AT_ONCE : Math.max(1, inTime.length);
  for (let at = 0; at < inTime.length; at += together) {
    const some = inTime.slice(at, at + together);
    await inTransaction(parts, actor, async (manager) => {
      for (let from = 0; from < some.length; from += AT_ONCE) {
        beforeRows(at + from);
        await bringMany(manager, table, some.slice(from, from + AT_ONCE), outcome);
      }
      beforeRows(at + some.length);
      if (rehearsal || outcome.faults.length > 0) throw new NothingKept();
      await beforeKeeping(manager, outcome);
    });
  }
  outcome.faults.sort((a, b) => a.number - b.number);
  return outcome;
}

export interface BringingIn {
  rehearsal: boolean;
  independent: boolean;
  beforeRows(done: number): void;
  beforeKeeping(manager: EntityManager, outcome: BroughtIn): Promise<void>;
}

async function inTransaction(
  parts: PostingParts,
  actor: Actor,
  work: (manager: EntityManager) => Promise<void>,
): Promise<void> {
  try {
    await inFirm(parts.dataSource, actor, async (manager) => {
      await lockHead(manager);
      await work(manager);
    });
  } catch (error) {
    if (!(error instanceof NothingKept)) throw error;
  }
}

/**
 * What the database refuses of many says not which: they are brought in again in halves, down to the one. The database
 * also looks at the sum of what comes at once, so that alone the same rows may well be taken.
 */
async function bringMany(
  manager: EntityManager,
  table: PlannedTable,
  plans: readonly RowPlan[],
  outcome: BroughtIn,
): Promise<void> {
  await manager.query('savepoint import_rows');
  try {
    const tried = await table.bring(manager, plans);
    await manager.query('release savepoint import_rows');
    for (const [index, plan] of plans.entries()) count(plan, tried[index] ?? false, outcome);
  } catch (error) {
    await manager.query('rollback to savepoint import_rows; release savepoint import_rows');
    const [plan] = plans;
    if (plan && plans.length === 1) {
      if (!(error instanceof Problem) || error.status >= 500) throw error;
      return count(plan, error, outcome);
    }
    const half = Math.ceil(plans.length / 2);
    await bringMany(manager, table, plans.slice(0, half), outcome);
    await bringMany(manager, table, plans.slice(half), outcome);
  }
}

function count(plan: RowPlan, tried: boolean | Problem, outcome: BroughtIn): void {
  if (tried === true) {
    outcome.made += 1;
  } else if (tried === false) {
    outcome.already += 1;
  } else {
    // The id of a row follows from its cells: what differs is how they were read.
    const code = tried.code === 'idReused' ? 'importReadOtherwise' : tried.code;
    const refusals = tried.errors.length > 0 ? tried.errors : [{ code, path: '', params: tried.params }];
    const faults = refusals.map((refusal) => ({ field: plan.fieldOf(refusal), refusal }));
    outcome.faults.push({ number: plan.number, cells: plan.cells, faults });
  }
}
