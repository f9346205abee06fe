import { asReturned } from '../calculations/decimals.ts';
import type { UnsaidCaution } from '../calculations/fields.ts';
import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { requireSaturationTable } from '../reference/require-row.ts';
import { liquidDensityKgM3, saturationKPaAbs, saturationTempC, vapourDensityKgM3 } from '../reference/saturation.ts';
import type { SaturationTable } from '../reference/saturation-table.ts';
import { snap12 } from '../units/round.ts';
import { cautionsOfTable } from './doubtful-table.ts';
import type { SaturationRequest } from './saturation.schema.ts';

interface Densities {
  liquidDensityKgM3: number;
  vapourDensityKgM3: number;
  cautions: UnsaidCaution[];
}
export type Saturation =
  | (Densities & { bubbleC: number; dewC: number })
  | (Densities & { bubbleKPaAbs: number; dewKPaAbs: number });

/**
 * Bubble and dew point by pressure or by temperature, with the densities of what boils and what condenses there.
 * Refuses `unknownRefrigerant`, `exactlyOneOf` and `outOfRange`.
 */
export function findSaturation(request: SaturationRequest, reference: ReferenceData): Outcome<Saturation> {
  const table = requireSaturationTable(reference, request.refrigerant);
  if (!table.ok) return table;
  const { pressureKPaAbs, tempC } = request;
  if (pressureKPaAbs != null && tempC == null) return atPressure(table.value, pressureKPaAbs);
  if (tempC != null && pressureKPaAbs == null) return atTemperature(table.value, tempC);
  return refused({
    code: 'exactlyOneOf',
    path: tempC == null ? '' : '/tempC',
    allowed: ['pressureKPaAbs', 'tempC'],
  });
}

function atPressure(table: SaturationTable, pressureKPaAbs: number): Outcome<Saturation> {
  const min = table.bubbleKPaAbs[0] as number;
  const max = table.dewKPaAbs[table.dewKPaAbs.length - 1] as number;
  const pressure = snap12(pressureKPaAbs);
  // Both curves have to be inside: the bubble line starts higher, the dew line ends lower.
  if (pressure < min || pressure > max) {
    const params = { given: pressureKPaAbs, min, max, unit: 'kPa', what: table.designation };
    return refused({ code: 'outOfRange', path: '/pressureKPaAbs', given: pressureKPaAbs, allowed: [min, max], params });
  }
  const at = { path: '/pressureKPaAbs' };
  const bubbleC = saturationTempC(table, 'bubble', pressure, at);
  if (!bubbleC.ok) return bubbleC;
  const dewC = saturationTempC(table, 'dew', pressure, at);
  if (!dewC.ok) return dewC;
  const densities = densitiesAt(table, bubbleC.value, dewC.value, at.path);
  if (!densities.ok) return densities;
  return done({
    bubbleC: asReturned(bubbleC.value, '°C'),
    dewC: asReturned(dewC.value, '°C'),
    ...densities.value,
  });
}

function atTemperature(table: SaturationTable, tempC: number): Outcome<Saturation> {
  const at = { path: '/tempC' };
  const bubble = saturationKPaAbs(table, 'bubble', tempC, at);
  if (!bubble.ok) return bubble;
  const dew = saturationKPaAbs(table, 'dew', tempC, at);
  if (!dew.ok) return dew;
  const densities = densitiesAt(table, tempC, tempC, at.path);
  if (!densities.ok) return densities;
  return done({
    bubbleKPaAbs: asReturned(bubble.value, 'kPa'),
    dewKPaAbs: asReturned(dew.value, 'kPa'),
    ...densities.value,
  });
}

function densitiesAt(table: SaturationTable, bubbleC: number, dewC: number, path: string): Outcome<Densities> {
  const liquid = liquidDensityKgM3(table, bubbleC, { path });
  if (!liquid.ok) return liquid;
  const vapour = vapourDensityKgM3(table, dewC, { path });
  if (!vapour.ok) return vapour;
  return done({
    liquidDensityKgM3: asReturned(liquid.value, 'kg/m3'),
    vapourDensityKgM3: asReturned(vapour.value, 'kg/m3'),
    cautions: cautionsOfTable(table),
  });
}
