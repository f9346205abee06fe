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

/**
 * Brings rows in, all or nothing, in one transaction. A row that is refused does not hide what is wrong with the others:
 * each stands behind a savepoint, and one refusal keeps the whole from being kept.
 * @param rehearsal everything is judged as it will be, and nothing kept
 */
export async function bringIn(
  parts: PostingParts,
  actor: Actor,
  plans: readonly RowPlan[],
  { rehearsal, onRow }: { rehearsal: boolean; onRow: () => void },
): Promise<BroughtIn> {
  const outcome: BroughtIn = { made: 0, already: 0, faults: [] };
  const inTime = plans.toSorted((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : a.number - b.number));
  try {
    await inFirm(parts.dataSource, actor, async (manager) => {
      await lockHead(manager);
      for (const plan of inTime) {
        await bringInOne(manager, plan, outcome);
        onRow();
      }
      if (rehearsal || outcome.faults.length > 0) throw new NothingKept();
    });
  } catch (error) {
    if (!(error instanceof NothingKept)) throw error;
  }
  outcome.faults.sort((a, b) => a.number - b.number);
  return outcome;
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
