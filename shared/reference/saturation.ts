import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { roundToStep, snap12 } from '../units/round.ts';
import type { SaturationTable } from './saturation-table.ts';

/**
 * Saturation by interpolation between the 1 K rows of a table. ln p and ln of the vapour density run linearly in T,
 * the liquid density itself does: within 0.0013 K, 0.01 % and 0.03 % of a direct flash (checked when the tables were
 * made). Outside the rows there is no answer, never an extrapolation.
 *
 * Blends have two curves: dew for superheat, bubble for subcooling. For single components they coincide.
 */
export type SaturationCurve = 'bubble' | 'dew';

/** Where in the request the argument came from, for the refusal. */
export interface Asked {
  path: string;
  /** What the person gave, where the argument was derived from it (a gauge pressure). */
  given?: number;
  /** The range in the person's terms is the table's less this much (the atmosphere, for a gauge pressure). */
  lessKPa?: number;
}

const pressures = (table: SaturationTable, curve: SaturationCurve) =>
  curve === 'bubble' ? table.bubbleKPaAbs : table.dewKPaAbs;

export const maxTempC = (table: SaturationTable) => table.minTempC + (table.bubbleKPaAbs.length - 1) * table.stepK;

function outside(asked: Asked, given: number, min: number, max: number, unit: string, designation: string): Refusal {
  return {
    code: 'outOfRange',
    path: asked.path,
    given,
    allowed: [min, max],
    params: { given, min, max, unit, what: designation },
  };
}

/** A reading of a column between its rows; `row` is a fractional row number inside the table. */
function between(column: readonly number[], row: number, scale: 'linear' | 'logarithmic'): number {
  const below = Math.min(Math.floor(row), column.length - 2);
  const lower = column[below] as number;
  const upper = column[below + 1] as number;
  const share = row - below;
  return scale === 'linear' ? lower + (upper - lower) * share : lower * (upper / lower) ** share;
}

function rowOfTemp(table: SaturationTable, tempC: number, asked: Asked): Outcome<number> {
  const row = (snap12(tempC) - table.minTempC) / table.stepK;
  if (row < 0 || row > table.bubbleKPaAbs.length - 1) {
    return refused(outside(asked, asked.given ?? tempC, table.minTempC, maxTempC(table), '°C', table.designation));
  }
  return done(row);
}

/** °C on the curve at an absolute pressure in kPa; refuses a pressure outside the table with code `outOfRange`. */
export function saturationTempC(
  table: SaturationTable,
  curve: SaturationCurve,
  kPaAbs: number,
  asked: Asked,
): Outcome<number> {
  const column = pressures(table, curve);
  const pressure = snap12(kPaAbs);
  const lowest = column[0] as number;
  const highest = column[column.length - 1] as number;
  if (pressure < lowest || pressure > highest) {
    const less = asked.lessKPa ?? 0;
    // Rounded inwards, so that a bound that the refusal names is itself accepted.
    const min = roundToStep(lowest - less, 0.001, 'up');
    const max = roundToStep(highest - less, 0.001, 'down');
    return refused(outside(asked, asked.given ?? kPaAbs, min, max, 'kPa', table.designation));
  }
  let below = 0;
  let above = column.length - 1;
  while (above - below > 1) {
    const middle = (below + above) >> 1;
    if ((column[middle] as number) <= pressure) below = middle;
    else above = middle;
  }
  const lower = column[below] as number;
  const upper = column[above] as number;
  const share = Math.log(pressure / lower) / Math.log(upper / lower);
  return done(table.minTempC + (below + share) * table.stepK);
}

/** kPa absolute on the curve at a temperature in °C. */
export function saturationKPaAbs(
  table: SaturationTable,
  curve: SaturationCurve,
  tempC: number,
  asked: Asked,
): Outcome<number> {
  const row = rowOfTemp(table, tempC, asked);
  return row.ok ? done(between(pressures(table, curve), row.value, 'logarithmic')) : row;
}

/** kg/m3 of saturated liquid (bubble point) at a temperature in °C. */
export function liquidDensityKgM3(table: SaturationTable, tempC: number, asked: Asked): Outcome<number> {
  const row = rowOfTemp(table, tempC, asked);
  return row.ok ? done(between(table.liquidDensityKgM3, row.value, 'linear')) : row;
}

/** kg/m3 of saturated vapour (dew point) at a temperature in °C. */
export function vapourDensityKgM3(table: SaturationTable, tempC: number, asked: Asked): Outcome<number> {
  const row = rowOfTemp(table, tempC, asked);
  return row.ok ? done(between(table.vapourDensityKgM3, row.value, 'logarithmic')) : row;
}
