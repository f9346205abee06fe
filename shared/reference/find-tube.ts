import { snap12 } from '../units/round.ts';
import type { Tube } from './tube.ts';

/** Manuals print 9.5, 9.52 and 9.53 mm for one and the same 3/8 in pipe; the next nominal is further away than this. */
export const NOMINAL_OD_TOLERANCE_MM = 0.15;

/**
 * The item whose nominal outside diameter is nearest, none further than 0.15 mm; null if there is none. Of two equally
 * near ones the earlier in the list.
 */
export function nearestByOd<T>(items: readonly T[], odMmOf: (item: T) => number, odMm: number): T | null {
  let nearest: T | null = null;
  let smallest = NOMINAL_OD_TOLERANCE_MM;
  for (const item of items) {
    const distance = snap12(Math.abs(odMmOf(item) - odMm));
    if (distance < smallest || (distance === smallest && nearest === null)) {
      nearest = item;
      smallest = distance;
    }
  }
  return nearest;
}

/** The EN 12735-1 tube of that outside diameter with its usual wall, else null. */
export function findUsualTube(tubes: readonly Tube[], odMm: number): Tube | null {
  const metric = tubes.filter((tube) => tube.standard === 'EN 12735-1');
  // Sizes read in a source first, so that a tie (15.94 mm) goes to the inch-series size.
  const bySource = [...metric].sort((a, b) => Number(b.status === 'yes') - Number(a.status === 'yes'));
  return nearestByOd(bySource, (tube) => tube.odMm, odMm);
}
