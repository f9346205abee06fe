import type { z } from 'zod';
import { type BooksQuery, COST_METHOD, type CostRow, type costResponse } from '../../shared/books/books.schema.ts';
import { averageIn, monthlyAverages, worthOf } from '../../shared/books/cost.ts';
import type { BookKind } from '../../shared/books/flows.ts';
import { monthBefore } from '../../shared/periods/month.ts';
import { roundTo } from '../../shared/units/round.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import { type BooksParts, readCurrency } from './books.service.ts';
import { monthStocks, readStockFlows, type StockFlow } from './price.repository.ts';

/** What the stock is worth and what became of it, by refrigerant, at the weighted average of each booking month. */
export function getCost(parts: BooksParts, actor: Actor, query: BooksQuery): Promise<z.output<typeof costResponse>> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const flows = await readStockFlows(manager, query.refrigerant);
    const stocks = monthStocks(flows);
    return {
      method: COST_METHOD,
      currency: await readCurrency(manager),
      rows: [...stocks].map(([refrigerant, months]) =>
        costRowOf(
          refrigerant,
          flows.filter((flow) => flow.refrigerant === refrigerant),
          monthlyAverages(months),
          query,
        ),
      ),
    };
  });
}

interface Sum {
  massG: number;
  cost: number;
}
const nothing = (): Sum => ({ massG: 0, cost: 0 });

type Bucket = 'bought' | 'otherIn' | 'intoUnits' | 'lost' | 'differences' | 'otherOut';

const LOST: ReadonlySet<BookKind> = new Set([
  'atmosphere:hose',
  'atmosphere:measured',
  'atmosphere:inferred',
  'atmosphere:beforeOurCare',
]);
const DIFFERENCES: ReadonlySet<BookKind> = new Set([
  'cylinderDifference',
  'supplierShortFill',
  'unitDifference',
  'reclaimerDifference',
  'missing',
]);

/** Where a flow of the stock belongs, and whether what comes in is counted against it: losses and differences are net. */
function bucketOf(kind: BookKind, isIn: boolean): Bucket {
  if (LOST.has(kind)) return 'lost';
  if (DIFFERENCES.has(kind)) return 'differences';
  if (isIn) return kind === 'supplier' ? 'bought' : 'otherIn';
  return kind === 'unit' ? 'intoUnits' : 'otherOut';
}

function costRowOf(
  refrigerant: string,
  flows: readonly StockFlow[],
  averages: ReadonlyMap<string, number>,
  { from, to }: BooksQuery,
): CostRow {
  const buckets: Record<Bucket, Sum> = {
    bought: nothing(),
    otherIn: nothing(),
    intoUnits: nothing(),
    lost: nothing(),
    differences: nothing(),
    otherOut: nothing(),
  };
  let [startG, endG, withoutPriceG] = [0, 0, 0];
  for (const flow of flows) {
    const [inG, outG] = [gramsOf(flow.inMicrograms), gramsOf(flow.outMicrograms)];
    if (flow.month < from) startG += inG - outG;
    if (flow.month <= to) endG += inG - outG;
    if (flow.month < from || flow.month > to) continue;
    const perKg = averageIn(averages, flow.month) ?? 0;
    const pricedG = gramsOf(flow.pricedMicrograms);
    const inTo = buckets[bucketOf(flow.kind, true)];
    const outOf = buckets[bucketOf(flow.kind, false)];
    // What nets counts as gone: what came back is taken off.
    const sign = inTo === outOf ? -1 : 1;
    inTo.massG += sign * inG;
    inTo.cost += sign * (flow.costMicros / 1e6 + worthOf(inG - pricedG, perKg));
    outOf.massG += outG;
    outOf.cost += worthOf(outG, perKg);
    if (flow.kind === 'supplier') withoutPriceG += inG - pricedG;
  }
  const [startPerKg, endPerKg] = [averageIn(averages, monthBefore(from)), averageIn(averages, to)];
  const money = (value: number) => roundTo(value, 2);
  const grams = (massG: number) => roundTo(massG, 6);
  const perKg = (value: number | null) => (value === null ? null : roundTo(value, 4));
  return {
    refrigerant,
    startPerKg: perKg(startPerKg),
    endPerKg: perKg(endPerKg),
    startG: grams(startG),
    startCost: money(worthOf(startG, startPerKg ?? 0)),
    boughtG: grams(buckets.bought.massG),
    boughtCost: money(buckets.bought.cost),
    withoutPriceG: grams(withoutPriceG),
    otherInG: grams(buckets.otherIn.massG),
    otherInCost: money(buckets.otherIn.cost),
    intoUnitsG: grams(buckets.intoUnits.massG),
    intoUnitsCost: money(buckets.intoUnits.cost),
    lostG: grams(buckets.lost.massG),
    lostCost: money(buckets.lost.cost),
    differencesG: grams(buckets.differences.massG),
    differencesCost: money(buckets.differences.cost),
    otherOutG: grams(buckets.otherOut.massG),
    otherOutCost: money(buckets.otherOut.cost),
    endG: grams(endG),
    endCost: money(worthOf(endG, endPerKg ?? 0)),
  };
}

const gramsOf = (mass: bigint): number => Number(mass) / 1e6;
