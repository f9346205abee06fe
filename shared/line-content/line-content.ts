import { asReturned } from '../calculations/decimals.ts';
import type { UnsaidCaution } from '../calculations/fields.ts';
import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { requireSaturationTable } from '../reference/require-row.ts';
import { liquidDensityKgM3, vapourDensityKgM3 } from '../reference/saturation.ts';
import { cautionsOfTable } from '../saturation/doubtful-table.ts';
import { snapSum } from '../units/round.ts';
import type { LineContentRequest, LineContentResponse } from './line-content.schema.ts';

export type LineContent = Omit<LineContentResponse, 'cautions'> & { cautions: UnsaidCaution[] };

/** g/m of a bore in mm filled at a density in kg/m3: density x pi/4 x d2 / 1000. */
export const gramsPerMetre = (boreMm: number, densityKgM3: number) => (densityKgM3 * Math.PI * boreMm ** 2) / 4 / 1000;

/**
 * What the pipe holds if it is full of saturated liquid, or of saturated vapour. It never replaces the manual's rate:
 * a liquid line behind an expansion device carries both phases.
 * Refuses `unknownRefrigerant`, `outOfRange` and a wall that leaves no bore (`notBelow` at `/wallMm`).
 */
export function lineContent(request: LineContentRequest, reference: ReferenceData): Outcome<LineContent> {
  const table = requireSaturationTable(reference, request.refrigerant);
  if (!table.ok) return table;
  const boreMm = snapSum(request.odMm, -request.wallMm, -request.wallMm);
  if (boreMm <= 0) {
    return refused({ code: 'notBelow', path: '/wallMm', given: request.wallMm, allowed: request.odMm / 2 });
  }
  const densityAt = request.phase === 'liquid' ? liquidDensityKgM3 : vapourDensityKgM3;
  const density = densityAt(table.value, request.tempC, { path: '/tempC' });
  if (!density.ok) return density;
  const gPerM = gramsPerMetre(boreMm, density.value);
  return done({
    densityKgM3: asReturned(density.value, 'kg/m3'),
    gPerM: asReturned(gPerM, 'g/m'),
    contentG: asReturned(gPerM * request.lengthM, 'g'),
    cautions: cautionsOfTable(table.value),
  });
}
