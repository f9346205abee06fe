import { z } from 'zod';

/** `POST /calculations/joint-torque`: the general range of a flare by tube size; the unit's manual governs. */
export const jointTorqueRequest = z.strictObject({ odMm: z.number().positive().max(500) });
export type JointTorqueRequest = z.output<typeof jointTorqueRequest>;

const asPrinted = (unit: string) => z.number().describe(`${unit}, as printed in the table, 1 decimal`);

export const jointTorqueResponse = z.strictObject({
  minNm: asPrinted('N m'),
  maxNm: asPrinted('N m'),
  minFtLbf: asPrinted('ft lbf'),
  maxFtLbf: asPrinted('ft lbf'),
  acrossFlatsMm: z.number().describe('mm, nut for R-410A and R-32, 0 decimals'),
  source: z.string(),
});
export type JointTorqueResponse = z.output<typeof jointTorqueResponse>;
