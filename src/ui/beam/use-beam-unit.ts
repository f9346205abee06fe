import { useMemo } from 'react';
import { MASS_FACTORS } from '../../../shared/units/factors.ts';
import { usePreferences } from '../../lib/preferences.ts';
import type { BeamUnit } from './presets.ts';

const perUnit = (unit: keyof typeof MASS_FACTORS): BeamUnit => ({
  gramsPer: MASS_FACTORS[unit].perUnit.valueOf(),
  unit,
});

/** What the ticks count for this person; pounds and ounces are read in pounds. */
export function useBeamUnit(): BeamUnit {
  const { mass } = usePreferences();
  return useMemo(() => perUnit(mass === 'lbOz' ? 'lb' : mass), [mass]);
}
