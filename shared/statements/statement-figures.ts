import type { DifferenceUncertainty } from '../ledger/book-basis.ts';
import { scaleReading } from '../ledger/cylinder-issues.ts';
import { verdictOf } from '../scale/reconcile.ts';
import { differenceUncertainty } from './difference-uncertainty.ts';
import {
  type CylinderStep,
  type CylinderWalk,
  type ReadingCheck,
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
 * from the reading that the opening book rests on to the last one in the period.
 *
 * @param steps groups that stand, in order, from the reading that the opening book rests on to the end of the period
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
  const walk = walkCylinder(steps, before);
  const inPeriod = new Set(steps.filter(({ occurredAt }) => occurredAt >= from).map(({ groupId }) => groupId));
  const checks = walk.checks.filter(({ groupId }) => inPeriod.has(groupId));
  return { checks, difference: periodDifference(steps, walk, checks) };
}

const movedIn = ({ masses }: CylinderStep): bigint =>
  masses.reduce((sum, { massMicrograms }) => sum + massMicrograms, 0n);

function periodDifference(
  steps: readonly CylinderStep[],
  { issues }: CylinderWalk,
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
  // What was posted within the period is counted in, so that the account begins where the first of it began: at the
  // reading that the book rested on then. Without any, it is the difference of the last reading, word for word.
  const { restsOn, issuesBefore } = counted.find(({ postedMicrograms }) => postedMicrograms !== 0n) ?? last;
  const step = steps.find(({ groupId }) => groupId === last.groupId);
  const end = step?.readings.find(({ id }) => id === last.readingId);
  if (!end) throw new RangeError(`reading ${last.readingId} is in none of the steps`);
  const uncertainty = differenceUncertainty({
    start: restsOn?.reading ?? null,
    end: scaleReading(end),
    contentG: Number(last.contentMicrograms) / 1e6,
    issues: issues.slice(issuesBefore.start, last.issuesBefore.end),
  });
  const sizeG = Math.abs(Number(differenceMicrograms)) / 1e6;
  return {
    last,
    expectedMicrograms: last.contentMicrograms - differenceMicrograms,
    differenceMicrograms,
    uncertainty,
    verdict: verdictOf(sizeG, uncertainty.standardG),
    restsOnAt: restsOn?.at ?? null,
  };
}
