import { ticks } from 'd3-array';
import type { EmissionLine } from '../../../../shared/books/emissions.schema.ts';
import { monthsBetween } from '../../../../shared/periods/month.ts';

export interface MonthLoss {
  month: string;
  totalG: number;
  /** Null: one of its refrigerants has no figure in the set. */
  co2eT: number | null;
  atLeastG: number;
}

/** Every month of the period once, also those in which nothing was lost; all refrigerants together. */
export function lossesByMonth(lines: readonly EmissionLine[], from: string, to: string): MonthLoss[] {
  return monthsBetween(from, to).map((month) => {
    const own = lines.filter(({ key }) => key === month);
    return {
      month,
      totalG: own.reduce((sum, { totalG }) => sum + totalG, 0),
      co2eT: own.some(({ co2eT }) => co2eT === null) ? null : own.reduce((sum, { co2eT }) => sum + (co2eT ?? 0), 0),
      atLeastG: own.reduce((sum, { atLeastG }) => sum + atLeastG, 0),
    };
  });
}

export interface LaidBar {
  loss: MonthLoss;
  x: number;
  width: number;
  y: number;
  height: number;
}

export interface LaidBars {
  bars: LaidBar[];
  /** Of the line that is nothing, px from the top. */
  zeroY: number;
  /** Round values of the scale, in the unit that was asked for. */
  figures: { y: number; value: number }[];
}

/** As much as a thin line, so that a month with little is not taken for one with nothing. */
const THINNEST = 1.5;

/**
 * One bar for each month, up from the zero line; below it where more was taken back in a month than was lost.
 * @param unitG grams to one unit of the scale's figures
 */
export function layOutBars(
  losses: readonly MonthLoss[],
  unitG: number,
  space: { left: number; width: number; height: number },
): LaidBars {
  const values = losses.map(({ totalG }) => totalG);
  const [least, most] = [Math.min(0, ...values), Math.max(0, ...values)];
  const reach = most - least || 1;
  const at = (massG: number) => ((most - massG) / reach) * space.height;
  const slot = (space.width - space.left) / Math.max(losses.length, 1);
  const width = Math.max(2, Math.min(slot * 0.7, 44));
  return {
    zeroY: at(0),
    bars: losses.map((loss, index) => {
      const height = loss.totalG === 0 ? 0 : Math.max(Math.abs(at(loss.totalG) - at(0)), THINNEST);
      return {
        loss,
        x: space.left + index * slot + (slot - width) / 2,
        width,
        y: loss.totalG > 0 ? at(0) - height : at(0),
        height,
      };
    }),
    figures: ticks(least / unitG, most / unitG, 4).map((value) => ({ value, y: at(value * unitG) })),
  };
}
