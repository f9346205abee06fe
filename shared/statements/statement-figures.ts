import { verdictOf } from '../scale/reconcile.ts';
import {
  type DifferenceUncertainty,
  differenceUncertainty,
  type Issue,
  type ScaleReading,
} from './difference-uncertainty.ts';
import {
  type CylinderStep,
  issuesOf,
  type ReadingCheck,
  type StepReading,
  scaleReading,
  standsBeforeMasses,
  type Verdict,
  walkCylinder,
} from './walk-cylinder.ts';

export interface PeriodDifference {
  /** The last gross reading of the period. */
  readonly last: ReadingCheck;
  /** What the book should have been there: opening and masses, and nothing that a reading added. */
  readonly expectedMicrograms: bigint;
  readonly differenceMicrograms: bigint;
  readonly uncertainty: DifferenceUncertainty;
  readonly verdict: Verdict;
  /** When the opening was weighed; null: it rests on a paper. */
  readonly restsOnAt: number | null;
}

export interface StatementFigures {
  /** Gross readings of the period, in order. */
  readonly checks: readonly ReadingCheck[];
  /** Null: not weighed in the period, or first weighed in it. */
  readonly difference: PeriodDifference | null;
}

/**
 * The readings of a period against the book, one by one and all together: D = (start - end) - sum of what was issued,
 * from the last reading before the period to the last one in it.
 *
 * @param steps groups that stand, in order, from shortly before the period to its end
 * @param openingMicrograms the book at the start of the period, whatever came before
 * @param from milliseconds since 1970, UTC
 */
export function statementFigures(
  steps: readonly CylinderStep[],
  openingMicrograms: bigint,
  from: number,
): StatementFigures {
  const earlier = steps.filter(({ occurredAt }) => occurredAt < from);
  const before = earlier.reduce((book, step) => book - movedIn(step) - step.postedMicrograms, openingMicrograms);
  const { checks: all } = walkCylinder(steps, before);
  const inPeriod = new Set(steps.filter(({ occurredAt }) => occurredAt >= from).map(({ groupId }) => groupId));
  const checks = all.filter(({ groupId }) => inPeriod.has(groupId));
  return { checks, difference: periodDifference(steps, all, checks) };
}

const movedIn = ({ masses }: CylinderStep): bigint =>
  masses.reduce((sum, { massMicrograms }) => sum + massMicrograms, 0n);

function periodDifference(
  steps: readonly CylinderStep[],
  all: readonly ReadingCheck[],
  checks: readonly ReadingCheck[],
): PeriodDifference | null {
  const last = checks.at(-1);
  if (!last || last.verdict === null) return null;
  // An opening within the period starts the account anew.
  const opened = checks.findLastIndex(({ verdict }) => verdict === null);
  const counted = checks.slice(opened + 1);
  const differenceMicrograms = counted
    .slice(0, -1)
    .reduce((sum, { postedMicrograms }) => sum + postedMicrograms, last.differenceMicrograms);
  const first = counted[0] as ReadingCheck;
  const start = all[all.indexOf(first) - 1] ?? null;
  const uncertainty = differenceUncertainty({
    ...between(steps, start, last),
    contentG: Number(last.contentMicrograms) / 1e6,
  });
  const sizeG = Math.abs(Number(differenceMicrograms)) / 1e6;
  return {
    last,
    expectedMicrograms: last.contentMicrograms - differenceMicrograms,
    differenceMicrograms,
    uncertainty,
    verdict: verdictOf(sizeG, uncertainty.standardG),
    restsOnAt: start?.at ?? null,
  };
}

/** The two readings, and every mass between them with its own readings. */
function between(
  steps: readonly CylinderStep[],
  start: ReadingCheck | null,
  end: ReadingCheck,
): { start: ScaleReading | null; end: ScaleReading; issues: Issue[] } {
  const starts = new Map<string, ScaleReading>();
  const issues: Issue[] = [];
  let started = start === null;
  for (const step of steps) {
    const own = issuesOf(step, starts);
    const opening = step.readings.find(({ mode, moment }) => mode === 'gross' && moment === 'before');
    if (opening) starts.set(step.groupId, scaleReading(opening));
    const startsHere = start?.groupId === step.groupId;
    // The masses of the group that holds the start lie after it or before it; likewise those of the last group.
    const isAfterStart = startsHere ? isBeforeMasses(step, start.readingId) : started;
    const isBeforeEnd = end.groupId !== step.groupId || !isBeforeMasses(step, end.readingId);
    if (isAfterStart && isBeforeEnd) issues.push(...own);
    started ||= startsHere;
    if (end.groupId === step.groupId) break;
  }
  const found = (id: string) => steps.flatMap(({ readings }) => readings).find((reading) => reading.id === id);
  return {
    start: start ? scaleReading(found(start.readingId) as StepReading) : null,
    end: scaleReading(found(end.readingId) as StepReading),
    issues,
  };
}

const isBeforeMasses = (step: CylinderStep, readingId: string): boolean => {
  const reading = step.readings.find(({ id }) => id === readingId);
  return reading !== undefined && standsBeforeMasses(step, reading);
};
