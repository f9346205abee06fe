import type { AtmosphereKind, PlaceKind } from '../ledger/place.ts';

/** A kind of place as the books by month name it: `cylinder`, `atmosphere:hose`. */
export type BookKind = Exclude<PlaceKind, 'atmosphere'> | `atmosphere:${AtmosphereKind}`;

/** A sum of the books by month: everything that went from one kind of place to another in some months. */
export interface MonthSum {
  readonly fromKind: BookKind;
  readonly toKind: BookKind;
  readonly massMicrograms: bigint;
  /** The part of it that reversals move. */
  readonly reversalMicrograms: bigint;
  readonly entryCount: number;
}

/** What went one way, less what was taken back: a reversed purchase is no return, a reversed charge no recovery. */
export interface Flow {
  readonly fromKind: BookKind;
  readonly toKind: BookKind;
  /** Below zero where more was taken back in the period than went. */
  readonly massMicrograms: bigint;
  /** Entries of the log behind it, reversals included. */
  readonly entryCount: number;
}

const keyOf = (fromKind: string, toKind: string): string => `${fromKind}>${toKind}`;

/** The flows of a period. What reversals move is taken off the way that they reverse. */
export function flowsOf(sums: readonly MonthSum[]): Flow[] {
  const flows = new Map<string, Flow>();
  const add = (fromKind: BookKind, toKind: BookKind, massMicrograms: bigint, entryCount: number): void => {
    const key = keyOf(fromKind, toKind);
    const earlier = flows.get(key);
    flows.set(key, {
      fromKind,
      toKind,
      massMicrograms: (earlier?.massMicrograms ?? 0n) + massMicrograms,
      entryCount: (earlier?.entryCount ?? 0) + entryCount,
    });
  };
  for (const { fromKind, toKind, massMicrograms, reversalMicrograms, entryCount } of sums) {
    add(fromKind, toKind, massMicrograms - reversalMicrograms, entryCount);
    if (reversalMicrograms !== 0n) add(toKind, fromKind, -reversalMicrograms, 0);
  }
  return [...flows.values()].filter(({ massMicrograms, entryCount }) => massMicrograms !== 0n || entryCount > 0);
}

/** What kinds of places held, by all sums given: the sums of every month up to some day. */
export function balancesOf(
  sums: readonly Pick<MonthSum, 'fromKind' | 'toKind' | 'massMicrograms'>[],
): Map<BookKind, bigint> {
  const balances = new Map<BookKind, bigint>();
  const add = (kind: BookKind, mass: bigint): void => {
    balances.set(kind, (balances.get(kind) ?? 0n) + mass);
  };
  for (const { fromKind, toKind, massMicrograms } of sums) {
    add(fromKind, -massMicrograms);
    add(toKind, massMicrograms);
  }
  return balances;
}

/** A difference is nobody's place: what the books and the scales disagree about, each kind in plain sight. */
export const DIFFERENCE_KINDS = [
  'cylinderDifference',
  'unitDifference',
  'supplierShortFill',
  'reclaimerDifference',
  'missing',
] as const satisfies readonly BookKind[];
export type DifferenceKind = (typeof DIFFERENCE_KINDS)[number];
export const isDifference = (kind: BookKind): kind is DifferenceKind =>
  (DIFFERENCE_KINDS as readonly BookKind[]).includes(kind);
