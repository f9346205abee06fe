import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type { createJobRequest, Job, JobListQuery, updateJobRequest } from '../../shared/jobs/jobs.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { changeRow, makeOnce, taken } from '../registers/register-rows.ts';
import { type JobRow, jobsRepository } from './job.repository.ts';

const PERSONAL = ['title'];
const REFERENCES = { job_unit_fkey: '/unitId' };
const factsOf = ({ unitId, kind, title, openedAt, closedAt }: Omit<JobRow, 'version'>) => ({
  unitId,
  kind,
  title,
  openedAt,
  closedAt,
});

export function listJobs(parts: Parts, actor: Actor, query: JobListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => jobsRepository(manager).list(query));
}

export function getJob(parts: Parts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createJob(parts: Parts, actor: Actor, request: z.output<typeof createJobRequest>) {
  const { id, unitId, kind, title = null } = request;
  const row = { firmId: actor.firmId, id, unitId, kind, title, openedAt: new Date(request.openedAt), closedAt: null };
  return makeOnce(
    parts,
    actor,
    { noun: 'job', subjectId: id, facts: factsOf(row), personal: PERSONAL },
    REFERENCES,
    (manager) => jobsRepository(manager).insert(row),
    (manager) => requireView(manager, id),
  );
}

export function updateJob(
  parts: Parts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateJobRequest>,
) {
  return changeRow<JobRow, Job>(
    parts,
    actor,
    {
      noun: 'job',
      id,
      version,
      personal: PERSONAL,
      references: REFERENCES,
      find: (manager) => jobsRepository(manager).find(id),
      factsOf,
      changed: (row) => {
        const closedAt = request.closedAt
          ? new Date(request.closedAt)
          : request.closedAt === null
            ? null
            : row.closedAt;
        if (closedAt !== null && closedAt < row.openedAt) {
          const figures = { given: closedAt.toISOString(), allowed: row.openedAt.toISOString() };
          throw problemOfRefusals([{ code: 'closedBeforeOpened', path: '/closedAt', ...figures }]);
        }
        return { ...row, title: taken(request.title, row.title), closedAt };
      },
      update: (manager, row) => jobsRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

async function requireView(manager: EntityManager, id: string): Promise<Job> {
  const found = await jobsRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return found;
}
