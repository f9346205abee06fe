import type { StepReading } from '../ledger/cylinder-issues.ts';
import { ASSUMED_SCALE } from '../ledger/scale.ts';
import type { CylinderStep } from './walk-cylinder.ts';

/** In micrograms. */
export const g = (mass: number): bigint => BigInt(Math.round(mass * 1e6));
export const TARE_G = 7_700;
let ids = 0;
export const reading = (
  moment: StepReading['moment'],
  netG: number,
  at: number,
  fields: Partial<StepReading> = {},
): StepReading => {
  ids += 1;
  return {
    id: `r${ids}`,
    at,
    toolId: 'scale 1',
    scale: ASSUMED_SCALE,
    moment,
    mode: 'gross',
    grossMicrograms: g(netG + TARE_G),
    hoseMicrograms: 0n,
    ...fields,
  };
};
export const step = (at: number, fields: Partial<CylinderStep>): CylinderStep => {
  ids += 1;
  return {
    groupId: `g${ids}`,
    closesGroupId: null,
    occurredAt: at,
    tareMicrograms: g(TARE_G),
    readings: [],
    masses: [],
    postedMicrograms: 0n,
    opens: false,
    ...fields,
  };
};
