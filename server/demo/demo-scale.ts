import type { z } from 'zod';
import type { scaleAccuracy } from '../../shared/tools/tools.schema.ts';
import { MASS_FACTORS } from '../../shared/units/factors.ts';
import type { StoredMassUnit } from '../../shared/units/stored-mass.ts';

/** A scale as its reader sees it: every reading is a whole number of steps. */
export interface DemoScale {
  id: string;
  name: string;
  serial: string;
  unit: StoredMassUnit;
  /** The step of the display in that unit. */
  step: number;
  /** What a charging hose holds, as this reader writes it down. */
  hoseSteps: number;
  accuracy: z.input<typeof scaleAccuracy>;
}

export interface Typed {
  value: string;
  unit: StoredMassUnit;
}

export const gramsPer = (unit: StoredMassUnit): number => MASS_FACTORS[unit].perUnit.valueOf();
export const gramsOf = ({ value, unit }: Typed): number => Number(value) * gramsPer(unit);
export const stepG = ({ step, unit }: DemoScale): number => step * gramsPer(unit);
export const wholeSteps = (massG: number, scale: DemoScale): number => Math.round(massG / stepG(scale));

/** So many steps as the display writes them. */
export function typedSteps(steps: number, { step, unit }: DemoScale): Typed {
  const decimals = String(step).split('.')[1]?.length ?? 0;
  return { value: (steps * step).toFixed(decimals), unit };
}
