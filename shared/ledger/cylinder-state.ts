import { cylinderLimit } from '../cylinder-fill/cylinder-limits.ts';
import type { FillJurisdiction } from '../cylinder-fill/filling-table.ts';
import { type BookBasis, basisOn, type ScaleReading } from './book-basis.ts';
import type { LedgerFlag } from './flag.ts';
import type { TimelinePosition } from './judged-group.ts';
import { type MassByRefrigerant, massOf, refrigerantsOf } from './mass-by-refrigerant.ts';

/** What is stamped on a cylinder and decides what may go into it; null: not known. */
export interface CylinderCollar {
  readonly stampedLimitMicrograms: bigint | null;
  readonly waterCapacityMicrograms: bigint | null;
  readonly servicePressureKPaGauge: number | null;
  /** Whose rule its pressure is judged by. */
  readonly jurisdiction: FillJurisdiction | null;
  /** The first moment after the month in which its re-test is due. */
  readonly retestOverdueFrom: number | null;
}
export const BLANK_COLLAR: CylinderCollar = {
  stampedLimitMicrograms: null,
  waterCapacityMicrograms: null,
  servicePressureKPaGauge: null,
  jurisdiction: null,
  retestOverdueFrom: null,
};

/** What the judge has to know of a cylinder beside its timeline. */
export interface CylinderRegister {
  readonly cylinderId: string;
  /** The refrigerant it is meant for: what a reading is taken to be while the book holds nothing. */
  readonly refrigerant: string;
  readonly nonRefillable: boolean;
  readonly collar: CylinderCollar;
  /** Dated tares, in any order; before the first one's day the first one holds. At least one. */
  readonly tares: readonly { readonly validFrom: number; readonly tareMicrograms: bigint }[];
}

/** Where a cylinder stands after some groups of its timeline. */
export interface CylinderState {
  readonly lastPosition: TimelinePosition | null;
  readonly book: MassByRefrigerant;
  /** An entry or a reading has said what it holds: a later gap is a difference, not an opening. */
  readonly opened: boolean;
  /** What the book rests on since a reading last set it: how uncertain the next difference is. */
  readonly basis: BookBasis;
  /** Start readings of weigh-ins that are not closed, by their group. */
  readonly openStarts: Readonly<Record<string, ScaleReading>>;
  /** Bought, and not weighed since. */
  readonly boughtUnweighed: boolean;
  /** Stolen, burst or lost and not found again. */
  readonly missingMicrograms: bigint;
  /** When something was last put into what it holds; null while it is empty, or holds only what it came with. */
  readonly filledAt: number | null;
  readonly standing: readonly LedgerFlag[];
}

export const emptyCylinderState: CylinderState = {
  lastPosition: null,
  book: {},
  opened: false,
  basis: basisOn(null),
  openStarts: {},
  boughtUnweighed: false,
  missingMicrograms: 0n,
  filledAt: null,
  standing: [],
};

export function tareAt(register: CylinderRegister, at: number): bigint {
  const dated = register.tares.toSorted((a, b) => a.validFrom - b.validFrom);
  const tare = dated.findLast(({ validFrom }) => validFrom <= at) ?? dated[0];
  if (!tare) throw new RangeError(`Cylinder ${register.cylinderId} has no tare`);
  return tare.tareMicrograms;
}

/** What the book says is in it. */
export const heldIn = (book: MassByRefrigerant): string[] =>
  refrigerantsOf(book).filter((refrigerant) => massOf(book, refrigerant) > 0n);

/** Largest net content with what it holds; null: no limit, or not known. */
export const limitOf = ({ collar, nonRefillable, refrigerant }: CylinderRegister, held: readonly string[]) =>
  cylinderLimit({ ...collar, kind: nonRefillable ? 'nonRefillable' : 'refillable', refrigerant }, held);
