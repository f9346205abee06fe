import type { LedgerFlag } from './flag.ts';
import type { TimelinePosition } from './judged-group.ts';
import type { MassByRefrigerant } from './mass-by-refrigerant.ts';

/** What the judge has to know of a cylinder beside its timeline. */
export interface CylinderRegister {
  readonly cylinderId: string;
  /** The refrigerant it is meant for: what a reading is taken to be while the book holds nothing. */
  readonly refrigerant: string;
  readonly nonRefillable: boolean;
  /** Largest net content, if there is a limit. */
  readonly limitMicrograms: bigint | null;
  /** Dated tares, in any order; before the first one's day the first one holds. At least one. */
  readonly tares: readonly { readonly validFrom: number; readonly tareMicrograms: bigint }[];
}

/** Where a cylinder stands after some groups of its timeline. */
export interface CylinderState {
  readonly lastPosition: TimelinePosition | null;
  readonly book: MassByRefrigerant;
  /** An entry or a reading has said what it holds: a later gap is a difference, not an opening. */
  readonly opened: boolean;
  /** Bought, and not weighed since. */
  readonly boughtUnweighed: boolean;
  /** Stolen, burst or lost and not found again. */
  readonly missingMicrograms: bigint;
  readonly standing: readonly LedgerFlag[];
}

export const emptyCylinderState: CylinderState = {
  lastPosition: null,
  book: {},
  opened: false,
  boughtUnweighed: false,
  missingMicrograms: 0n,
  standing: [],
};

export function tareAt(register: CylinderRegister, at: number): bigint {
  const dated = register.tares.toSorted((a, b) => a.validFrom - b.validFrom);
  const tare = dated.findLast(({ validFrom }) => validFrom <= at) ?? dated[0];
  if (!tare) throw new RangeError(`Cylinder ${register.cylinderId} has no tare`);
  return tare.tareMicrograms;
}
