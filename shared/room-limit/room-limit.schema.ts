import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { massGField, refrigerantField } from '../calculations/fields.ts';

export const ROOM_STANDARDS = ['IEC 60335-2-40:2018', 'IEC 60335-2-40:2022', 'EN 378-1'] as const;
export type RoomStandard = (typeof ROOM_STANDARDS)[number];
export const DEFAULT_ROOM_STANDARD: RoomStandard = 'IEC 60335-2-40:2018';

export const MOUNTINGS = ['floor', 'window', 'wall', 'ceiling'] as const;

const areaM2 = z.number().positive().max(100_000);

/** `POST /calculations/room-limit`: the charge of one circuit against the smallest room that it serves. */
export const roomLimitRequest = z.strictObject({
  refrigerant: refrigerantField,
  lflKgM3: z.number().positive().max(2).nullish().describe('lower flammable limit; replaces the table’s'),
  chargeG: massGField.describe('of one circuit: factory charge and extra together'),
  areaM2: areaM2.nullish().describe('floor area of the room'),
  releaseHeightM: z.number().positive().max(10).nullish().describe('height of the release; this or mounting'),
  mounting: z.enum(MOUNTINGS).nullish().describe('0.6, 1.0, 1.8 or 2.2 m'),
  standard: z.enum(ROOM_STANDARDS).nullish().describe('IEC 60335-2-40:2018 where absent'),
  manualTable: z
    .array(z.strictObject({ chargeG: massGField, minimumAreaM2: z.number().min(0).max(100_000) }))
    .min(1)
    .max(200)
    .nullish()
    .describe('the table of the unit’s own manual, charges ascending; it governs'),
});
export type RoomLimitRequest = z.output<typeof roomLimitRequest>;

export const roomLimitResponse = z.strictObject({
  m1G: returned('g', 'no room check up to here').nullable(),
  m2G: returned('g', 'largest charge without further measures').nullable(),
  m3G: returned('g', 'largest charge with measures').nullable(),
  formulaLimitG: returned('g', 'the smaller of the two forms; null without an area').nullable(),
  limitG: returned('g', 'what this room takes; without an area what any room takes').nullable(),
  limitGovernedBy: z.enum(['m1', 'squareRoot', 'linearCap', 'm2', 'manualTable']).nullable(),
  minimumAreaM2: returned('m2', '0 where no check is needed, null above m2').nullable(),
  minimumAreaGovernedBy: z.enum(['squareRoot', 'linearCap', 'manualTable']).nullable(),
  verdict: z.enum([
    'noCheckNeeded',
    'allowed',
    'allowedToBeConfirmed',
    'areaNeeded',
    'over',
    'measuresRequired',
    'notCovered',
  ]),
  clause: z.string().describe('what the verdict rests on'),
  status: z.enum(['confirmed', 'toBeConfirmed']).describe('toBeConfirmed: a figure that was used is from memory'),
});
export type RoomLimitResponse = z.output<typeof roomLimitResponse>;
