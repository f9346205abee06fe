import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import type { RoomLimitRequest } from './room-limit.schema.ts';

export type ManualRow = NonNullable<RoomLimitRequest['manualTable']>[number];

/** What the manual's own table says; it governs over any formula. */
export interface ManualAnswer {
  /** The row that decides for the charge; null where the table starts above a charge that needs no check at all. */
  row: ManualRow | null;
  /** The largest charge of the table that fits the room; null: no area, or not even the first row fits. */
  limitG: number | null;
}

/**
 * Reads the table: the row of the charge, between rows the next larger. A charge below the first row and at most m1
 * needs no check by the standard, and the manual is silent about it.
 *
 * Refuses `notAscending` rows, and `tableEndsShort` where the charge is above the last one: a table is not continued.
 */
export function readManualTable(
  table: readonly ManualRow[],
  chargeG: number,
  areaM2: number | null,
  m1G: number,
): Outcome<ManualAnswer> {
  const disorder = disorderOf(table);
  if (disorder.length > 0) return refused(...disorder);
  const first = table[0] as ManualRow;
  const last = table[table.length - 1] as ManualRow;
  if (chargeG > last.chargeG) {
    return refused({
      code: 'tableEndsShort',
      path: '/manualTable',
      given: chargeG,
      allowed: last.chargeG,
      params: { unit: 'g' },
    });
  }
  const isBelowTable = chargeG < first.chargeG && chargeG <= m1G;
  const fitting = areaM2 === null ? [] : table.filter((row) => row.minimumAreaM2 <= areaM2);
  return done({
    row: isBelowTable ? null : (table.find((row) => row.chargeG >= chargeG) as ManualRow),
    limitG: fitting.at(-1)?.chargeG ?? null,
  });
}

function disorderOf(table: readonly ManualRow[]): Refusal[] {
  const refusals: Refusal[] = [];
  table.forEach((row, index) => {
    const before = table[index - 1];
    if (!before) return;
    const at = `/manualTable/${index}`;
    if (row.chargeG <= before.chargeG) {
      refusals.push({ code: 'notAscending', path: `${at}/chargeG`, given: row.chargeG, allowed: before.chargeG });
    }
    if (row.minimumAreaM2 < before.minimumAreaM2) {
      const given = row.minimumAreaM2;
      refusals.push({ code: 'notAscending', path: `${at}/minimumAreaM2`, given, allowed: before.minimumAreaM2 });
    }
  });
  return refusals;
}
