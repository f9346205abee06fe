import { z } from 'zod';
import { roundTo } from '../units/round.ts';

/** Places that a calculation returns, by unit: fixed, so that browser and server show the same digits. */
const DECIMALS = {
  g: 3,
  m2: 3,
  kPa: 3,
  '°C': 3,
  K: 3,
  t: 5,
  'kg/m3': 3,
  'g/m': 3,
  GWP: 6,
  micron: 3,
  'micron/min': 3,
  ratio: 3,
  'Pa m3/s': 9,
} as const;
export type ReturnedUnit = keyof typeof DECIMALS;

/** The schema of a returned number; its decimals stand in the API description. */
export const returned = (unit: ReturnedUnit, what?: string) =>
  z.number().describe(`${what ? `${what}; ` : ''}${unit}, ${DECIMALS[unit]} decimals`);

/** A figure as it is returned: rounded once, half away from zero. */
export const asReturned = (value: number, unit: ReturnedUnit) => roundTo(value, DECIMALS[unit]);

export const asReturnedOrNull = (value: number | null, unit: ReturnedUnit) =>
  value === null ? null : asReturned(value, unit);
