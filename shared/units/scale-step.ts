import { MASS_FACTORS } from './factors.ts';

/** Steps that scales of this trade have (common practice); 0.01 lb and 0.1 oz are 4.536 g and 2.835 g. */
const STEPS = { oz: [0.05, 0.1, 0.2, 0.25, 0.5, 1], lb: [0.01, 0.02, 0.05, 0.1, 0.2, 0.5] } as const;

/** One step of a scale's display in the unit that it was made in: a round number of ounces or pounds, else grams. */
export function scaleStepIn(stepG: number): { value: number; unit: 'oz' | 'lb' | 'g' } {
  for (const unit of ['oz', 'lb'] as const) {
    const gramsPer = MASS_FACTORS[unit].perUnit.valueOf();
    const value = STEPS[unit].find((known) => Math.abs(known * gramsPer - stepG) < 0.001);
    if (value !== undefined) return { value, unit };
  }
  return { value: stepG, unit: 'g' };
}
