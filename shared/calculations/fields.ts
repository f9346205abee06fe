import { z } from 'zod';
import { ALTITUDE_RANGE_M } from '../units/pressure.ts';

/**
 * Fields that several calculations take. The bounds are no rules of the trade unless they say so: they keep out what
 * no system has, a slip of a factor of a thousand or a value in another unit.
 */
export const refrigerantField = z.string().trim().min(1).max(20).describe('designation: R-32');

/** Nothing that the trade weighs, cools or heats is outside. */
export const tempCField = z.number().min(-100).max(200);
/** A vacuum reads below zero; 20 MPa is beyond every component here. */
export const kPaGaugeField = z.number().min(-110).max(20_000);
export const massGField = z.number().min(0).max(10_000_000_000);
export const lengthMField = z.number().min(0).max(10_000);

/** Local air pressure, from the Dead Sea (107 kPa) to the highest places of work. */
export const atmosphereKPaAbsField = z.number().min(40).max(110).describe('kPa absolute; 101.325 where absent');
export const altitudeMField = z
  .number()
  .min(ALTITUDE_RANGE_M.min)
  .max(ALTITUDE_RANGE_M.max)
  .describe('m above sea level; gives the pressure of the ICAO standard atmosphere');

export const systemVolumeLField = z.number().positive().max(100_000).describe('inside volume of the tested part, L');

export const CAUTION_SIGNALS = ['danger', 'warning', 'caution', 'notice'] as const;

/** A hazard that this result meets: signal word as in ANSI Z535, sentence from the catalogue under `caution.<code>`. */
export const cautionsField = z.array(
  z.strictObject({ code: z.string(), signal: z.enum(CAUTION_SIGNALS), message: z.string() }),
);

/** As the calculation returns it; the server adds the sentence. */
export interface UnsaidCaution {
  code: string;
  signal: (typeof CAUTION_SIGNALS)[number];
  params: Readonly<Record<string, string | number>>;
}
