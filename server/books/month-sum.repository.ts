import type { EntityManager } from 'typeorm';
import type { BookKind, MonthSum } from '../../shared/books/flows.ts';

export interface PeriodSums {
  /** Of every month before the period, added up. */
  before: MonthSum[];
  during: MonthSum[];
  /** All refrigerants of the firm, those with most on hand first. */
  refrigerants: string[];
  firstMonth: string | null;
  lastMonth: string | null;
}

interface Row {
  fromKind: BookKind;
  toKind: BookKind;
  isBefore: boolean;
  mass: string;
  reversal: string;
  entryCount: string;
}

/** Sums that posting keeps: some hundred rows, however long the log is. */
export async function readPeriodSums(
  manager: EntityManager,
  { from, to, refrigerant }: { from: string; to: string; refrigerant?: string | undefined },
): Promise<PeriodSums> {
  const rows = await manager.query<Row[]>(
    `select from_kind as "fromKind", to_kind as "toKind", month < $1 as "isBefore",
        sum(mass_micrograms)::text as mass, sum(reversal_micrograms)::text as reversal,
        sum(entry_count)::text as "entryCount"
      from month_sum where month <= $2 and ($3::text is null or refrigerant = $3) group by 1, 2, 3`,
    [from, to, refrigerant ?? null],
  );
  const [span] = await manager.query<Pick<PeriodSums, 'firstMonth' | 'lastMonth' | 'refrigerants'>[]>(
    `select min(first) as "firstMonth", max(last) as "lastMonth",
        coalesce(array_agg(refrigerant::text order by on_hand desc, refrigerant), '{}') as refrigerants
      from (select refrigerant, min(month) as first, max(month) as last,
          sum(case when to_kind = 'cylinder' then mass_micrograms else 0 end)
            - sum(case when from_kind = 'cylinder' then mass_micrograms else 0 end) as on_hand
        from month_sum group by refrigerant) r`,
  );
  const sumOf = ({ mass, reversal, entryCount, isBefore: _, ...row }: Row): MonthSum => ({
    ...row,
    massMicrograms: BigInt(mass),
    reversalMicrograms: BigInt(reversal),
    entryCount: Number(entryCount),
  });
  return {
    before: rows.filter(({ isBefore }) => isBefore).map(sumOf),
    during: rows.filter(({ isBefore }) => !isBefore).map(sumOf),
    refrigerants: span?.refrigerants ?? [],
    firstMonth: span?.firstMonth ?? null,
    lastMonth: span?.lastMonth ?? null,
  };
}
