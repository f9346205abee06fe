import { asReturned, asReturnedOrNull } from '../calculations/decimals.ts';
import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { PRESSURE_FACTORS } from '../units/factors.ts';
import { snap12, snapSum } from '../units/round.ts';
import type { EvacuationRequest, EvacuationResponse } from './evacuation.schema.ts';

/** Target and limit of several installation manuals; ASHRAE 15.2 and 147 were not read. */
export const TARGET_MICRON = 500;
export const HOLD_LIMIT_MICRON = 500;
/** A split-unit manual waits ten minutes after closing the valve; others ask for 20 min or hours. */
export const HOLD_MINUTES = 10;
/** A heuristic, not a standard: below it the rise levels off (moisture, outgassing), above it goes on (leak). */
const LEVELLING_BELOW = 0.5;

const PA_PER_MICRON = PRESSURE_FACTORS.micron.perUnit.valueOf() * 1000;

type Reading = EvacuationRequest['readings'][number];

/**
 * Judges the decay test of a vacuum by limit and by shape. A published split manual reads a steady rise as a leak and
 * one that levels off as moisture. Time is counted from the first reading to the last; a value equal to a limit holds.
 * Refuses readings that are not in order (`notAscending`).
 */
export function judgeEvacuation(request: EvacuationRequest): Outcome<EvacuationResponse> {
  const { readings } = request;
  const disorder = disorderOf(readings);
  if (disorder.length > 0) return refused(...disorder);
  const first = readings[0] as Reading;
  const last = readings[readings.length - 1] as Reading;
  const riseMicron = snapSum(last.micron, -first.micron);
  const heldMinutes = snapSum(last.minute, -first.minute);
  const shape = shapeOf(readings, first, last, riseMicron);
  const leak =
    request.systemVolumeL == null || heldMinutes === 0
      ? null
      : (request.systemVolumeL / 1000) * ((Math.max(0, riseMicron) * PA_PER_MICRON) / (heldMinutes * 60));
  return done({
    riseMicron: asReturned(riseMicron, 'micron'),
    riseMicronPerMinute: asReturnedOrNull(heldMinutes === 0 ? null : riseMicron / heldMinutes, 'micron/min'),
    shapeRatio: asReturnedOrNull(shape.ratio, 'ratio'),
    pattern: shape.pattern,
    leakPaM3PerS: asReturnedOrNull(leak, 'Pa m3/s'),
    verdict: verdictOf(request, first, last, heldMinutes, shape.pattern),
  });
}

function disorderOf(readings: readonly Reading[]): Refusal[] {
  const refusals: Refusal[] = [];
  readings.forEach(({ minute }, index) => {
    const before = readings[index - 1]?.minute;
    if (before !== undefined && minute <= before) {
      refusals.push({ code: 'notAscending', path: `/readings/${index}/minute`, given: minute, allowed: before });
    }
  });
  return refusals;
}

function shapeOf(
  readings: readonly Reading[],
  first: Reading,
  last: Reading,
  riseMicron: number,
): { ratio: number | null; pattern: EvacuationResponse['pattern'] } {
  if (riseMicron <= 0) return { ratio: null, pattern: 'flat' };
  const middleMicron = micronAt(readings, first.minute + (last.minute - first.minute) / 2);
  const firstHalf = snapSum(middleMicron, -first.micron);
  // All of the rise in the second half: no ratio, and the opposite of levelling off.
  if (firstHalf <= 0) return { ratio: null, pattern: 'rising' };
  const ratio = snap12(snapSum(last.micron, -middleMicron) / firstHalf);
  return { ratio, pattern: ratio < LEVELLING_BELOW ? 'levelling' : 'rising' };
}

/** Linear between the two readings around a minute. */
function micronAt(readings: readonly Reading[], minute: number): number {
  const after = readings.findIndex((reading) => reading.minute >= minute);
  const upper = readings[after] as Reading;
  const lower = readings[after - 1] ?? upper;
  if (upper.minute === lower.minute) return upper.micron;
  return lower.micron + (upper.micron - lower.micron) * ((minute - lower.minute) / (upper.minute - lower.minute));
}

function verdictOf(
  request: EvacuationRequest,
  first: Reading,
  last: Reading,
  heldMinutes: number,
  pattern: EvacuationResponse['pattern'],
): EvacuationResponse['verdict'] {
  if (snap12(first.micron) > snap12(request.targetMicron ?? TARGET_MICRON)) return 'notReached';
  if (heldMinutes < snap12(request.holdMinutes ?? HOLD_MINUTES)) return 'tooShort';
  if (snap12(last.micron) > snap12(request.holdLimitMicron ?? HOLD_LIMIT_MICRON)) return 'fail';
  return pattern === 'rising' ? 'lookAgain' : 'pass';
}
