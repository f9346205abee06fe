import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { systemVolumeLField } from '../calculations/fields.ts';

/** 760,000 micron are one atmosphere. */
const micron = z.number().min(0).max(760_000);
const minute = z.number().min(0).max(1_000_000);

/** `POST /calculations/evacuation`: the rise of a vacuum after the pump was valved off. */
export const evacuationRequest = z.strictObject({
  readings: z
    .array(z.strictObject({ minute, micron }))
    .min(1)
    .max(10_000)
    .describe('from isolation on, each later than the one before'),
  targetMicron: micron.nullish().describe('500 where absent'),
  holdMinutes: minute.nullish().describe('10 where absent'),
  holdLimitMicron: micron.nullish().describe('500 where absent'),
  systemVolumeL: systemVolumeLField.nullish(),
});
export type EvacuationRequest = z.output<typeof evacuationRequest>;

export const evacuationResponse = z.strictObject({
  riseMicron: returned('micron', 'last reading minus first'),
  riseMicronPerMinute: returned('micron/min').nullable().describe('micron/min, 3 decimals; null for a single reading'),
  shapeRatio: returned('ratio')
    .nullable()
    .describe('rise of the second half over that of the first, 3 decimals; null if flat, or no rise in the first half'),
  pattern: z.enum(['flat', 'levelling', 'rising']),
  leakPaM3PerS: returned('Pa m3/s', 'volume x rise over time; 0 if flat').nullable(),
  verdict: z.enum(['notReached', 'tooShort', 'fail', 'lookAgain', 'pass']),
});
export type EvacuationResponse = z.output<typeof evacuationResponse>;
