import { microgramsOfTyped, typedMass } from './mass.ts';

/** The units that the log keeps a mass in as typed; a tonne is for calculations. */
export const STORED_MASS_UNITS = ['g', 'kg', 'oz', 'lb'] as const;
export type StoredMassUnit = (typeof STORED_MASS_UNITS)[number];

export const isStoredMassUnit = (unit: string): unit is StoredMassUnit =>
  (STORED_MASS_UNITS as readonly string[]).includes(unit);

const isDecimal = (value: string): boolean => /^-?\d{1,12}(\.\d{1,12})?$/.test(value);

/** A mass above zero as registers and the log keep it: typed in g, kg, oz or lb. */
export const storedMass = typedMass
  .refine(({ unit }) => isStoredMassUnit(unit), {
    path: ['unit'],
    params: { code: 'notAllowedValue', allowed: [...STORED_MASS_UNITS] },
  })
  .refine((mass) => !isDecimal(mass.value) || microgramsOfTyped(mass) > 0n, {
    path: ['value'],
    params: { code: 'massNotPositive', allowed: '0.000001 g' },
  });
