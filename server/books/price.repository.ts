import type { EntityManager } from 'typeorm';
import type { MonthStock } from '../../shared/books/cost.ts';
import type { BookKind } from '../../shared/books/flows.ts';
import { PurchasePriceEntity } from './purchase-price.entity.ts';

export type PriceRow = PurchasePriceEntity;

/** What stands at the other end of the stock that is bought into; `cylinder`: a recovery or a customer's cylinder. */
export interface StockFlow {
  month: string;
  refrigerant: string;
  kind: BookKind;
  /** Above zero: into the stock. Reversals are taken off the way that they reverse. */
  inMicrograms: bigint;
  outMicrograms: bigint;
  /** Of what came in, what has a price, and what that cost in millionths of the currency. */
  pricedMicrograms: bigint;
  costMicros: number;
}

/** Cylinders whose content is paid for: ours and rented ones, but those for recovery. */
const STOCK = `kind <> 'recovery' and owner_kind <> 'customer'`;

/** The last price that was given for what a group bought. */
export const PRICE_OF = (group: string, refrigerant: string): string => `(select x.micros_per_kg from purchase_price x
  where x.firm_id = e.firm_id and x.group_id = ${group} and x.refrigerant = ${refrigerant}
  order by x.given_at desc, x.id desc limit 1)`;

const FLOWS = `with stock as materialized (select id from cylinder where ${STOCK}),
  moved as (
    select e.firm_id, e.booking_month, e.refrigerant, e.group_id, e.reverses_entry_id, e.mass_micrograms,
        (t.id is not null) <> (e.reverses_entry_id is not null) as came_in,
        case when t.id is not null then e.from_place || coalesce(':' || e.from_as, '')
          else e.to_place || coalesce(':' || e.to_as, '') end as kind
      from entry e
      left join stock t on e.to_place = 'cylinder' and t.id = e.to_id
      left join stock f on e.from_place = 'cylinder' and f.id = e.from_id
      where 'cylinder' in (e.from_place, e.to_place) and (t.id is null) <> (f.id is null)
        and ($1::text is null or e.refrigerant = $1)),
  priced as (
    select e.*, case when e.kind = 'supplier' and e.came_in then ${PRICE_OF(
      `coalesce((select o.group_id from entry o where o.firm_id = e.firm_id and o.id = e.reverses_entry_id), e.group_id)`,
      'e.refrigerant',
    )} end as micros_per_kg,
      case when e.reverses_entry_id is null then 1 else -1 end as sign
      from moved e)
  select booking_month as month, refrigerant, kind,
    coalesce(sum(sign * mass_micrograms) filter (where came_in), 0)::text as "inMass",
    coalesce(sum(sign * mass_micrograms) filter (where not came_in), 0)::text as "outMass",
    coalesce(sum(sign * mass_micrograms) filter (where micros_per_kg is not null), 0)::text as priced,
    coalesce(sum(sign * mass_micrograms::numeric * micros_per_kg / 1e9), 0)::float8 as cost
  from priced group by 1, 2, 3 order by 1, 2, 3`;

/** Everything that ever moved into and out of the stock, by month; a scan of the log, for the cost alone. */
export async function readStockFlows(manager: EntityManager, refrigerant?: string): Promise<StockFlow[]> {
  const rows = await manager.query<
    {
      month: string;
      refrigerant: string;
      kind: BookKind;
      inMass: string;
      outMass: string;
      priced: string;
      cost: number;
    }[]
  >(FLOWS, [refrigerant ?? null]);
  return rows.map(({ inMass, outMass, priced, cost, ...row }) => ({
    ...row,
    inMicrograms: BigInt(inMass),
    outMicrograms: BigInt(outMass),
    pricedMicrograms: BigInt(priced),
    costMicros: cost,
  }));
}

/** The months of each refrigerant's stock, as the average price is worked out from them. */
export function monthStocks(flows: readonly StockFlow[]): Map<string, MonthStock[]> {
  const byRefrigerant = new Map<string, Map<string, MonthStock>>();
  for (const { refrigerant, month, inMicrograms, outMicrograms, pricedMicrograms, costMicros } of flows) {
    const months = byRefrigerant.get(refrigerant) ?? new Map<string, MonthStock>();
    const earlier = months.get(month) ?? { month, pricedG: 0, value: 0, otherG: 0 };
    months.set(month, {
      month,
      pricedG: earlier.pricedG + gramsOf(pricedMicrograms),
      value: earlier.value + costMicros / 1e6,
      otherG: earlier.otherG + gramsOf(inMicrograms - outMicrograms - pricedMicrograms),
    });
    byRefrigerant.set(refrigerant, months);
  }
  return new Map(
    [...byRefrigerant].map(([refrigerant, months]) => [
      refrigerant,
      [...months.values()].sort((a, b) => (a.month < b.month ? -1 : 1)),
    ]),
  );
}

const gramsOf = (mass: bigint): number => Number(mass) / 1e6;

export function priceRepository(manager: EntityManager) {
  return {
    async insert(row: PriceRow): Promise<void> {
      await manager.getRepository(PurchasePriceEntity).insert(row);
    },
    /** The firm's currency: that of its first price; null: it has none yet. */
    async findCurrency(): Promise<string | null> {
      const [row] = await manager.query<{ currency: string }[]>(
        'select currency from purchase_price order by given_at, id limit 1',
      );
      return row?.currency ?? null;
    },
    async hasAny(): Promise<boolean> {
      const rows = await manager.query<unknown[]>('select from purchase_price limit 1');
      return rows.length > 0;
    },
    /** Whether a group bought this refrigerant, by entries that stand. */
    async wasBought(groupId: string, refrigerant: string): Promise<boolean> {
      const rows = await manager.query<unknown[]>(
        `select from entry e where e.group_id = $1 and e.refrigerant = $2 and e.from_place = 'supplier'
          and e.reverses_entry_id is null limit 1`,
        [groupId, refrigerant],
      );
      return rows.length > 0;
    },
  };
}
