import { type BookKind, balancesOf, DIFFERENCE_KINDS, type DifferenceKind, type Flow, type MonthSum } from './flows.ts';

/** One kind of place over a period. All ends together are nothing: each entry takes from one what it gives to another. */
export interface PlaceOverPeriod {
  readonly kind: BookKind;
  readonly startMicrograms: bigint;
  readonly inMicrograms: bigint;
  readonly outMicrograms: bigint;
  readonly endMicrograms: bigint;
}

export const BOOK_KINDS: readonly BookKind[] = [
  'supplier',
  'factory',
  'opening',
  'customer',
  'otherContractor',
  'cylinder',
  'unit',
  'reclaimer',
  'destroyed',
  'atmosphere:measured',
  'atmosphere:inferred',
  'atmosphere:hose',
  'atmosphere:beforeOurCare',
  ...DIFFERENCE_KINDS,
];

/** @param before the sums of every month before the period */
export function placesOverPeriod(
  before: readonly Pick<MonthSum, 'fromKind' | 'toKind' | 'massMicrograms'>[],
  flows: readonly Flow[],
): PlaceOverPeriod[] {
  const start = balancesOf(before);
  return BOOK_KINDS.flatMap((kind) => {
    const between = flows.filter(({ fromKind, toKind }) => fromKind !== toKind);
    const sum = (end: 'fromKind' | 'toKind') =>
      between.filter((flow) => flow[end] === kind).reduce((mass, { massMicrograms }) => mass + massMicrograms, 0n);
    const [startMicrograms, inMicrograms, outMicrograms] = [start.get(kind) ?? 0n, sum('toKind'), sum('fromKind')];
    if (startMicrograms === 0n && inMicrograms === 0n && outMicrograms === 0n) return [];
    const endMicrograms = startMicrograms + inMicrograms - outMicrograms;
    return [{ kind, startMicrograms, inMicrograms, outMicrograms, endMicrograms }];
  });
}

/** A kind of difference over a period: what statements put there, what month close made of it, what stands. */
export interface DifferenceOverPeriod {
  readonly kind: DifferenceKind;
  readonly startMicrograms: bigint;
  /** Shown by readings, empty units and certificates, less what was explained since. */
  readonly shownMicrograms: bigint;
  /** To the atmosphere, the supplier or missing; a difference that came to be missing adds to that. */
  readonly settledMicrograms: bigint;
  readonly endMicrograms: bigint;
}

/** At the other end of a difference when month close settles it; all else is what a statement shows. */
const SETTLES: ReadonlySet<BookKind> = new Set([
  'atmosphere:measured',
  'atmosphere:inferred',
  'atmosphere:hose',
  'atmosphere:beforeOurCare',
  'supplier',
  ...DIFFERENCE_KINDS,
]);

export function differencesOverPeriod(
  before: readonly Pick<MonthSum, 'fromKind' | 'toKind' | 'massMicrograms'>[],
  flows: readonly Flow[],
): DifferenceOverPeriod[] {
  const start = balancesOf(before);
  return DIFFERENCE_KINDS.flatMap((kind) => {
    let shown = 0n;
    let settled = 0n;
    for (const { fromKind, toKind, massMicrograms } of flows) {
      if ((fromKind === kind) === (toKind === kind)) continue;
      const other = fromKind === kind ? toKind : fromKind;
      const mass = toKind === kind ? massMicrograms : -massMicrograms;
      if (SETTLES.has(other)) settled -= mass;
      else shown += mass;
    }
    const startMicrograms = start.get(kind) ?? 0n;
    if (startMicrograms === 0n && shown === 0n && settled === 0n) return [];
    return [
      {
        kind,
        startMicrograms,
        shownMicrograms: shown,
        settledMicrograms: settled,
        endMicrograms: startMicrograms + shown - settled,
      },
    ];
  });
}
