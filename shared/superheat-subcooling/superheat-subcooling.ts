import { asReturned } from '../calculations/decimals.ts';
import type { UnsaidCaution } from '../calculations/fields.ts';
import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { requireSaturationTable } from '../reference/require-row.ts';
import { type SaturationCurve, saturationTempC } from '../reference/saturation.ts';
import type { SaturationTable } from '../reference/saturation-table.ts';
import { cautionsOfTable } from '../saturation/doubtful-table.ts';
import { STANDARD_ATMOSPHERE_KPA } from '../units/factors.ts';
import { atmosphereAtAltitude } from '../units/pressure.ts';
import { snapSum } from '../units/round.ts';
import type { SuperheatSubcoolingRequest, SuperheatSubcoolingResponse } from './superheat-subcooling.schema.ts';

export type SuperheatSubcooling = Omit<SuperheatSubcoolingResponse, 'cautions'> & { cautions: UnsaidCaution[] };

type Side = NonNullable<SuperheatSubcoolingRequest['suction']>;

/**
 * Superheat = line temperature - dew point at the suction pressure; subcooling = bubble point at the liquid pressure -
 * line temperature. Dew and bubble are never exchanged: with R-407C the wrong column makes a flooded coil look safe by
 * 6 K. A value below zero is returned as it is: it is what the readings say.
 *
 * Refuses `unknownRefrigerant`, `atLeastOneOf` (neither side), `onlyOneOf` (pressure and altitude both) and `outOfRange`.
 */
export function superheatSubcooling(
  request: SuperheatSubcoolingRequest,
  reference: ReferenceData,
): Outcome<SuperheatSubcooling> {
  const table = requireSaturationTable(reference, request.refrigerant);
  if (!table.ok) return table;
  const { suction, liquid, atmosphereKPaAbs, altitudeM } = request;
  const refusals: Refusal[] = [];
  if (suction == null && liquid == null) {
    refusals.push({
      code: 'atLeastOneOf',
      path: '',
      allowed: ['suction', 'liquid'],
    });
  }
  if (atmosphereKPaAbs != null && altitudeM != null) {
    refusals.push({
      code: 'onlyOneOf',
      path: '/altitudeM',
      given: altitudeM,
      allowed: ['atmosphereKPaAbs', 'altitudeM'],
    });
  }
  const lessKPa = altitudeM != null ? atmosphereAtAltitude(altitudeM) : (atmosphereKPaAbs ?? STANDARD_ATMOSPHERE_KPA);
  const dewC = suction ? pointOf(table.value, 'dew', suction, '/suction/kPaGauge', lessKPa) : null;
  const bubbleC = liquid ? pointOf(table.value, 'bubble', liquid, '/liquid/kPaGauge', lessKPa) : null;
  for (const point of [dewC, bubbleC]) if (point && !point.ok) refusals.push(...point.refusals);
  if (refusals.length > 0) return refused(...refusals);
  const dew = suction && dewC?.ok ? { at: dewC.value, lineC: suction.lineTempC } : null;
  const bubble = liquid && bubbleC?.ok ? { at: bubbleC.value, lineC: liquid.lineTempC } : null;
  return done({
    dewC: dew && asReturned(dew.at, '°C'),
    superheatK: dew && asReturned(snapSum(dew.lineC, -dew.at), 'K'),
    bubbleC: bubble && asReturned(bubble.at, '°C'),
    subcoolingK: bubble && asReturned(snapSum(bubble.at, -bubble.lineC), 'K'),
    cautions: cautionsOfTable(table.value),
  });
}

function pointOf(table: SaturationTable, curve: SaturationCurve, side: Side, path: string, lessKPa: number) {
  return saturationTempC(table, curve, side.kPaGauge + lessKPa, { path, given: side.kPaGauge, lessKPa });
}
