import { type Place, placeKey } from './place.ts';

/**
 * What is put before the manager. `danger`: people can come to harm. `look`: books and what was said contradict, or
 * something is owed. `note`: what the server did and why; nothing is asked.
 */
export const FLAG_LEVELS = {
  cylinderNotExplained: 'look',
  cylinderLookAgain: 'look',
  supplierShortFill: 'look',
  readingBelowTare: 'look',
  cylinderMixed: 'danger',
  nonRefillableRefilled: 'danger',
  cylinderOverLimit: 'danger',
  cylinderPressureTooHigh: 'danger',
  cylinderFilledPastRetest: 'danger',
  cylinderMissing: 'look',
  lateBeforeOpening: 'look',
  bookAboveFullCharge: 'look',
  saidFullBookBelow: 'look',
  unitShort: 'look',
  askIfFull: 'look',
  bookNotKnown: 'look',
  fullChargeNotDetermined: 'look',
  unitOpenedAt: 'note',
  oursGoneAtLeast: 'look',
  moreThanFullChargeCameOut: 'look',
  moreCameOutThanWentIn: 'look',
  vacuumWithoutRecovery: 'look',
  lossAtRecovery: 'note',
  lossTakenBack: 'note',
  secondAdditionIn30Days: 'look',
  certificateDifference: 'note',
} as const satisfies Record<string, 'danger' | 'look' | 'note'>;
export type FlagCode = keyof typeof FLAG_LEVELS;
export const FLAG_CODES = Object.keys(FLAG_LEVELS) as [FlagCode, ...FlagCode[]];

export interface LedgerFlag {
  readonly code: FlagCode;
  readonly place: Place;
  /** The group whose judgement it is; for a standing flag the group that brought it about. */
  readonly groupId: string;
  readonly refrigerant: string | null;
  /** Signed where a reading is held against a book: reading less book. */
  readonly massMicrograms: bigint | null;
  /** True: says how the place stands now and goes when that changes. False: belongs to its group for good. */
  readonly standing: boolean;
  /** Further figures for the message, in micrograms. */
  readonly figures: Readonly<Record<string, bigint>>;
}

export const flagKey = (flag: Pick<LedgerFlag, 'code' | 'place' | 'groupId' | 'refrigerant'>): string =>
  [flag.code, placeKey(flag.place), flag.groupId, flag.refrigerant ?? ''].join('|');

/** A place's open flags after a step in order: what belonged to earlier groups stays, what stands is taken anew. */
export function flagsAfterStep(
  openBefore: readonly LedgerFlag[],
  step: { flags: readonly LedgerFlag[]; state: { standing: readonly LedgerFlag[] } },
): LedgerFlag[] {
  return [...openBefore.filter((flag) => !flag.standing), ...step.flags, ...step.state.standing];
}

/** What to open, to write anew (another figure) and to close. */
export function flagChanges(
  openBefore: readonly LedgerFlag[],
  openAfter: readonly LedgerFlag[],
): { opened: LedgerFlag[]; changed: LedgerFlag[]; closed: LedgerFlag[] } {
  const before = new Map(openBefore.map((flag) => [flagKey(flag), flag]));
  const after = new Map(openAfter.map((flag) => [flagKey(flag), flag]));
  return {
    opened: [...after.values()].filter((flag) => !before.has(flagKey(flag))),
    changed: [...after.values()].filter((flag) => {
      const earlier = before.get(flagKey(flag));
      return earlier !== undefined && !sameFigures(earlier, flag);
    }),
    closed: [...before.values()].filter((flag) => !after.has(flagKey(flag))),
  };
}

function sameFigures(one: LedgerFlag, other: LedgerFlag): boolean {
  const names = Object.keys(one.figures);
  return (
    one.massMicrograms === other.massMicrograms &&
    names.length === Object.keys(other.figures).length &&
    names.every((name) => one.figures[name] === other.figures[name])
  );
}
