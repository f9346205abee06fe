import { z } from 'zod';
import { day, id, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';

export const TOOL_KINDS = ['scale', 'gauge', 'vacuumGauge', 'torqueWrench', 'detector', 'recoveryMachine'] as const;
export const toolKind = z.enum(TOOL_KINDS);

/** Accuracy of a scale as `formulas.md` (j) uses it: resolution d, repeatability s, relative span error c, offset. */
export const scaleAccuracy = z.strictObject({
  resolutionG: z.number().positive().max(1000),
  repeatabilityG: z.number().min(0).max(1000).default(0),
  spanErrorRelative: z.number().min(0).max(0.05).default(0),
  offsetG: z.number().min(0).max(1000).default(0),
});

export const createToolRequest = z.strictObject({
  id,
  kind: toolKind,
  name: shortText(80),
  serial: shortText(60).nullish(),
  /** Required for a scale. */
  scale: scaleAccuracy.nullish(),
  madeOn: day.nullish(),
  lastCheckedOn: day.nullish(),
  heldBy: id.nullish(),
});
export const updateToolRequest = createToolRequest.omit({ id: true, kind: true }).partial();
export const tool = z.strictObject({
  id,
  kind: toolKind,
  name: z.string(),
  serial: z.string().nullable(),
  scale: scaleAccuracy.nullable(),
  madeOn: day.nullable(),
  lastCheckedOn: day.nullable(),
  heldBy: id.nullable(),
  heldByName: z.string().nullable(),
  version: z.int(),
});
export type Tool = z.output<typeof tool>;

export const TOOL_SORTS = ['name', '-name'] as const;
export const toolListQuery = pageQuery.extend({
  sort: z.enum(TOOL_SORTS).default('name'),
  kind: toolKind.optional(),
  heldBy: id.optional(),
  /** Over name and serial. */
  search: searchText.optional(),
});
export type ToolListQuery = z.output<typeof toolListQuery>;
export const toolPage = pageOf(tool);
