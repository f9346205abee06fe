/** One booking month of the stock of one refrigerant: what is held in cylinders that are bought into. */
export interface MonthStock {
  /** `2026-11`. */
  readonly month: string;
  /** Bought with a price, less what was reversed. */
  readonly pricedG: number;
  /** What that cost. */
  readonly value: number;
  /** Everything else that changed the stock; below zero where more went out. */
  readonly otherG: number;
}

const G_PER_KG = 1000;

/**
 * Price a kilogram by booking month: the weighted average of the month. What is on hand at its start, at the average of
 * the month before, and what was bought in it, at its own price, together give the average at which everything leaves in
 * that month. What came in without a price (a reading that found more, a paper still to come) takes the average and
 * changes none; what was on hand before the first price is taken at that.
 *
 * So a purchase is worth what was paid for it, once: start and purchases are what left and what is on hand at the end.
 *
 * @param months in order
 */
export function monthlyAverages(months: readonly MonthStock[]): Map<string, number> {
  const averages = new Map<string, number>();
  const beforeFirstPrice: string[] = [];
  let average: number | null = null;
  let stockG = 0;
  for (const { month, pricedG, value, otherG } of months) {
    const startG: number = average === null ? 0 : Math.max(stockG, 0);
    const massG: number = startG + pricedG;
    const worth: number = (startG / G_PER_KG) * (average ?? 0) + value;
    if (pricedG !== 0 && massG > 0 && worth >= 0) average = worth / (massG / G_PER_KG);
    stockG += pricedG + otherG;
    if (average === null) {
      beforeFirstPrice.push(month);
      continue;
    }
    for (const earlier of beforeFirstPrice.splice(0)) averages.set(earlier, average);
    averages.set(month, average);
  }
  return averages;
}

/** The average of a month; of the last one before it in which anything moved, else of the first after it. */
export function averageIn(averages: ReadonlyMap<string, number>, month: string): number | null {
  const known = averages.get(month);
  if (known !== undefined) return known;
  const months = [...averages.keys()].sort();
  const nearest = months.findLast((other) => other < month) ?? months[0];
  return nearest === undefined ? null : (averages.get(nearest) ?? null);
}

/** What a mass is worth at a price a kilogram; not rounded. */
export const worthOf = (massG: number, perKg: number): number => (massG / G_PER_KG) * perKg;
