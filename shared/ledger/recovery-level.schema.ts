import { z } from 'zod';
import { EVACUATION_EXCEPTIONS, LEVEL_UNITS } from '../reference/evacuation-level.ts';

/** As typed: no sign, point as separator. */
const level = z.strictObject({
  value: z.string().regex(/^\d{1,4}(\.\d{1,3})?$/),
  unit: z.enum(LEVEL_UNITS),
});

/**
 * To which level a unit was evacuated with its recovery, beside what the law asked for (40 CFR 82.156(a), Table 1): the
 * level required as it was shown to the person, with its clause, and the one that was reached; or why another level applies.
 */
export const recoveryLevel = z.strictObject({
  required: level,
  reached: level.nullable(),
  exception: z.enum([...EVACUATION_EXCEPTIONS, 'other']).nullable(),
  clause: z.string().trim().min(1).max(200),
});
export type RecoveryLevel = z.output<typeof recoveryLevel>;

/** As a request carries it: absent and null are the same. */
export const recoveryLevelRequest = recoveryLevel
  .extend({ reached: recoveryLevel.shape.reached.optional(), exception: recoveryLevel.shape.exception.optional() })
  .superRefine(({ required, reached, exception }, ctx) => {
    const refuse = (code: string, message: string): void => {
      ctx.addIssue({ code: 'custom', path: ['reached'], message, params: { code } });
    };
    if (!reached && !exception) refuse('levelReachedRequired', 'A level that was reached, or why another applies');
    if (reached && reached.unit !== required.unit) refuse('levelUnitDiffers', 'In the unit of the required level');
  });
