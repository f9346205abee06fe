import { createJobRequest, job, jobListQuery, jobPage, updateJobRequest } from '../../shared/jobs/jobs.schema.ts';
import { type ApiRoutes, apiRoutes } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';
import { addRegister } from '../registers/register-routes.ts';
import { createJob, getJob, listJobs, updateJob } from './job.service.ts';

export function jobRoutes(parts: Parts): ApiRoutes {
  const routes = apiRoutes(parts, 'Jobs');
  addRegister(routes, {
    path: '/jobs',
    words: { one: 'a job', many: 'Jobs, newest first' },
    write: 'jobs:write',
    create: createJobRequest,
    update: updateJobRequest,
    view: job,
    query: jobListQuery,
    page: jobPage,
    list: (actor, query) => listJobs(parts, actor, query),
    get: (actor, id) => getJob(parts, actor, id),
    make: (actor, request) => createJob(parts, actor, request),
    change: (actor, id, version, request) => updateJob(parts, actor, id, version, request),
  });
  return routes;
}
