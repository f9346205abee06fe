import { z } from 'zod';
import { flagText, id, instant, pageOf, pageQuery, shortText } from '../lists/list.schema.ts';

export const JOB_KINDS = ['install', 'serviceWithLeak', 'recovery', 'decommission', 'relocation', 'retrofit'] as const;
export const jobKind = z.enum(JOB_KINDS);
export const createJobRequest = z.strictObject({
  id,
  unitId: id,
  kind: jobKind,
  openedAt: instant,
  title: shortText(160).nullish(),
});
export const updateJobRequest = z.strictObject({
  title: shortText(160).nullable().optional(),
  closedAt: instant.nullable().optional(),
});
export const job = z.strictObject({
  id,
  unitId: id,
  unitName: z.string(),
  siteName: z.string(),
  kind: jobKind,
  title: z.string().nullable(),
  openedAt: instant,
  closedAt: instant.nullable(),
  version: z.int(),
});
export type Job = z.output<typeof job>;

export const JOB_SORTS = ['-openedAt', 'openedAt'] as const;
export const jobListQuery = pageQuery.extend({
  sort: z.enum(JOB_SORTS).default('-openedAt'),
  unitId: id.optional(),
  /** Jobs that are not closed; `false`: closed ones. */
  open: flagText.optional(),
});
export type JobListQuery = z.output<typeof jobListQuery>;
export const jobPage = pageOf(job);
