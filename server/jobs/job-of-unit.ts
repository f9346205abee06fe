import type { EntityManager } from 'typeorm';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { jobsRepository } from './job.repository.ts';

/** What a request says it belongs to (a job, a charge sheet) has to be known here, and to be of the request's unit. */
export function belongsRefusal(
  { path, id, unitId }: { path: string; id: string; unitId: string | null | undefined },
  found: { unitId: string } | null | undefined,
): Refusal[] {
  if (!found) return [{ code: 'notKnownHere', path, given: id }];
  return unitId && found.unitId !== unitId ? [{ code: 'ofAnotherUnit', path, given: id }] : [];
}

/**
 * The job that a register of a unit names at `/jobId`.
 * @throws Problem 422 when it is not known here, or is a job of another unit
 */
export async function requireJobOfUnit(manager: EntityManager, unitId: string, jobId: string | null): Promise<void> {
  if (jobId === null) return;
  const job = await jobsRepository(manager).find(jobId);
  const refusals = belongsRefusal({ path: '/jobId', id: jobId, unitId }, job);
  if (refusals.length > 0) throw problemOfRefusals(refusals);
}
