import { z } from 'zod';
import { id, instant, shortText } from '../lists/list.schema.ts';

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
