import type { EntityManager } from 'typeorm';
import { inFirm } from '../database/firm-scope.ts';
import type { PostingParts } from '../entries/post-group.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import type { RowFaults, RowPlan } from './plan-rows.ts';

/** Ends the transaction without keeping anything. */
class NothingKept extends Error {}

export interface BroughtIn {
  made: number;
  already: number;
  faults: RowFaults[];
}

/** Rows behind one savepoint. Each savepoint makes every later look at the head of the log slower. */
const AT_ONCE = 250;

/**
 * Brings rows in, all or nothing, in one transaction. A row that is refused does not hide what is wrong with the others:
 * the rows around it are taken one by one, and one refusal keeps the whole from being kept.
 * @param rehearsal everything is judged as it will be, and nothing kept
 * @param independent no row rests on another: a rehearsal then holds the firm's log for a part of the rows at a time
 */
export async function bringIn(
  parts: PostingParts,
  actor: Actor,
  plans: readonly RowPlan[],
  { rehearsal, independent, onRow }: { rehearsal: boolean; independent: boolean; onRow: () => void },
): Promise<BroughtIn> {
  const outcome: BroughtIn = { made: 0, already: 0, faults: [] };
  const inTime = plans.toSorted((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : a.number - b.number));
  const together = rehearsal && independent ? AT_ONCE : Math.max(1, inTime.length);
  for (let at = 0; at < inTime.length; at += together) {
    const some = inTime.slice(at, at + together);
    await inTransaction(
      parts,
      actor,
      () => rehearsal || outcome.faults.length > 0,
      async (manager) => {
        for (let from = 0; from < some.length; from += AT_ONCE) {
          const few = some.slice(from, from + AT_ONCE);
          if (await bringInTogether(manager, few, outcome, onRow)) continue;
          for (const plan of few) await bringInOne(manager, plan, outcome);
        }
      },
    );
  }
  outcome.faults.sort((a, b) => a.number - b.number);
  return outcome;
}

async function inTransaction(
  parts: PostingParts,
  actor: Actor,
  keepsNothing: () => boolean,
  work: (manager: EntityManager) => Promise<void>,
): Promise<void> {
  try {
    await inFirm(parts.dataSource, actor, async (manager) => {
      await lockHead(manager);
      await work(manager);
      if (keepsNothing()) throw new NothingKept();
    });
  } catch (error) {
    if (!(error instanceof NothingKept)) throw error;
  }
}

/** False: one of them was refused, and none of them is there. */
async function bringInTogether(
  manager: EntityManager,
  plans: readonly RowPlan[],
  outcome: BroughtIn,
  onRow: () => void,
): Promise<boolean> {
  await manager.query('savepoint import_rows');
  let made = 0;
  let refused = false;
  for (const plan of plans) {
    try {
      if (!refused && (await plan.bringIn(manager))) made += 1;
    } catch (error) {
      if (!(error instanceof Problem) || error.status >= 500) throw error;
      refused = true;
    }
    onRow();
  }
  await manager.query(`${refused ? 'rollback to' : 'release'} savepoint import_rows`);
  if (refused) return false;
  outcome.made += made;
  outcome.already += plans.length - made;
  return true;
}

async function bringInOne(manager: EntityManager, plan: RowPlan, outcome: BroughtIn): Promise<void> {
  await manager.query('savepoint import_row');
  try {
    const isNew = await plan.bringIn(manager);
    await manager.query('release savepoint import_row');
    if (isNew) outcome.made += 1;
    else outcome.already += 1;
  } catch (error) {
    if (!(error instanceof Problem) || error.status >= 500) throw error;
    await manager.query('rollback to savepoint import_row');
    const refusals = error.errors.length > 0 ? error.errors : [{ code: error.code, path: '', params: error.params }];
    outcome.faults.push({
      number: plan.number,
      faults: refusals.map((refusal) => ({ field: plan.fieldOf(refusal), refusal })),
    });
  }
}
