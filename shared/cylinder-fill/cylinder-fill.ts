import { asReturned, asReturnedOrNull } from '../calculations/decimals.ts';
import type { UnsaidCaution } from '../calculations/fields.ts';
import { done, type Outcome } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import type { Refrigerant } from '../reference/refrigerant.ts';
import { requireRefrigerant, requireSaturationTable } from '../reference/require-row.ts';
import { liquidDensityKgM3 } from '../reference/saturation.ts';
import { cautionsOfTable } from '../saturation/doubtful-table.ts';
import { snap12, snapSum } from '../units/round.ts';
import type { CylinderFillRequest, CylinderFillResponse } from './cylinder-fill.schema.ts';

export type CylinderFill = Omit<CylinderFillResponse, 'cautions'> & { cautions: UnsaidCaution[] };

/** Guideline for containers of recovered non-flammable refrigerants; the formula seen in trade press. */
export const FILL_FACTOR = 0.8;
/** For flammables: common practice, no source. */
export const FLAMMABLE_FILL_FACTOR = 0.7;
/** Basis of the specific gravity; 1,000 kg/m3 is the cautious choice (water at 25 °C has 997.05). */
export const WATER_KG_M3 = 1000;
const FILL_TEMP_C = 25;

/**
 * Largest net mass = fill factor x water capacity x specific gravity of the liquid at 25 °C. Without the specific
 * gravity every refrigerant lighter than water would be overfilled (R-32 by 4 %, propane by half).
 * Refuses `unknownRefrigerant`, and `outOfRange` where the table has no liquid at 25 °C.
 */
export function cylinderFill(request: CylinderFillRequest, reference: ReferenceData): Outcome<CylinderFill> {
  const refrigerant = requireRefrigerant(reference, request.refrigerant);
  if (!refrigerant.ok) return refrigerant;
  const density = densityOf(request, reference);
  if (!density.ok) return density;
  const perFactorG = request.waterCapacityG * (density.value.kgM3 / WATER_KG_M3);
  const maxNetG = snap12(perFactorG * (request.fillFactor ?? FILL_FACTOR));
  const contentG = request.grossG == null ? null : snapSum(request.grossG, -request.tareG);
  const roomLeftG = contentG === null ? null : snapSum(maxNetG, -contentG);
  return done({
    liquidDensityKgM3: asReturned(density.value.kgM3, 'kg/m3'),
    maxNetG: asReturned(maxNetG, 'g'),
    maxGrossG: asReturned(snapSum(request.tareG, maxNetG), 'g'),
    contentG: asReturnedOrNull(contentG, 'g'),
    roomLeftG: asReturnedOrNull(roomLeftG, 'g'),
    cautions: [
      ...overfilled(roomLeftG),
      ...flammable(refrigerant.value, perFactorG * FLAMMABLE_FILL_FACTOR),
      ...density.value.cautions,
    ],
  });
}

function densityOf(
  request: CylinderFillRequest,
  reference: ReferenceData,
): Outcome<{ kgM3: number; cautions: UnsaidCaution[] }> {
  if (request.specificGravity != null) return done({ kgM3: request.specificGravity * WATER_KG_M3, cautions: [] });
  const table = requireSaturationTable(reference, request.refrigerant);
  if (!table.ok) return table;
  const density = liquidDensityKgM3(table.value, FILL_TEMP_C, { path: '/refrigerant' });
  return density.ok ? done({ kgM3: density.value, cautions: cautionsOfTable(table.value) }) : density;
}

function overfilled(roomLeftG: number | null): UnsaidCaution[] {
  if (roomLeftG === null || roomLeftG >= 0) return [];
  return [{ code: 'cylinderOverfilled', signal: 'danger', params: { overG: asReturned(-roomLeftG, 'g') } }];
}

function flammable({ designation, safetyClass }: Refrigerant, practiceNetG: number): UnsaidCaution[] {
  if (safetyClass.endsWith('1')) return [];
  const params = { refrigerant: designation, safetyClass, percent: 70, netG: asReturned(practiceNetG, 'g') };
  return [{ code: 'flammableFillLimit', signal: 'warning', params }];
}
