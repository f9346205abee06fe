import type { LedgerFlag } from './flag.ts';
import type { TimelinePosition } from './judged-group.ts';
import type { MassByRefrigerant } from './mass-by-refrigerant.ts';

/** A full charge as determined, dated, of one refrigerant. `jobId`: the job that changed it, if one did. */
export interface DatedFullCharge {
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly validFrom: number;
  readonly jobId: string | null;
}

/** What the judge has to know of a unit beside its timeline. Lists are dated, in any order. */
export interface UnitRegister {
  readonly unitId: string;
  readonly refrigerants: readonly { readonly refrigerant: string; readonly validFrom: number }[];
  readonly fullCharges: readonly DatedFullCharge[];
}

/** A loss that the server inferred and that later evidence can take back. */
export interface InferredLoss {
  readonly groupId: string;
  readonly refrigerant: string;
  readonly as: 'inferred' | 'beforeOurCare';
  readonly remainingMicrograms: bigint;
  readonly atLeast: boolean;
}

/** Where a unit stands after some groups of its timeline. */
export interface UnitState {
  readonly lastPosition: TimelinePosition | null;
  /** False: `book` is only the sum of what was put in and taken out, and may be below zero. */
  readonly known: boolean;
  readonly book: MassByRefrigerant;
  /** Variance in g² of what was weighed on the unit since it was last settled. */
  readonly varianceG2: number;
  /** Oldest first, since the unit was last empty. */
  readonly losses: readonly InferredLoss[];
  /** The last addition at which a loss was inferred, since the unit was last empty. */
  readonly lastLossAtAddition: {
    readonly occurredAt: number;
    readonly jobId: string | null;
  } | null;
  readonly standing: readonly LedgerFlag[];
}

export const emptyUnitState: UnitState = {
  lastPosition: null,
  known: false,
  book: {},
  varianceG2: 0,
  losses: [],
  lastLossAtAddition: null,
  standing: [],
};

const inOrder = <T extends { validFrom: number }>(dated: readonly T[]): T[] =>
  dated.toSorted((a, b) => a.validFrom - b.validFrom);

/** The refrigerant that the circuit is meant for on that day; before the first date the first one. */
export function unitRefrigerantAt(register: UnitRegister, at: number): string | null {
  const dated = inOrder(register.refrigerants);
  return (dated.findLast(({ validFrom }) => validFrom <= at) ?? dated[0])?.refrigerant ?? null;
}

/**
 * Micrograms; null where no full charge of that refrigerant was ever determined. The first one holds also before its
 * date: the circuit was the same before somebody determined it, and a unit is often registered after the work.
 */
export function fullChargeAt(register: UnitRegister, refrigerant: string, at: number): bigint | null {
  const dated = inOrder(register.fullCharges.filter((fullCharge) => fullCharge.refrigerant === refrigerant));
  return (dated.findLast(({ validFrom }) => validFrom <= at) ?? dated[0])?.massMicrograms ?? null;
}
