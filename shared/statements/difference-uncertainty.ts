import { grossVarianceG2, type Scale } from '../ledger/scale.ts';
import { snap12 } from '../units/round.ts';

/** One gross reading of a cylinder on a scale. */
export interface ScaleReading {
  /** The same for one and the same reading, wherever it was written down: what is shared has no part in the sum. */
  readonly key: string;
  /** Which scale: its zero and its span cancel only against themselves. */
  readonly scaleKey: string;
  readonly scale: Scale;
  readonly grossG: number;
}

/** A mass that left or entered the cylinder, by how it is known. */
export type Issue =
  /** From its own pair of readings of this cylinder. */
  | { readonly weighed: 'here'; readonly before: ScaleReading; readonly after: ScaleReading }
  /** From a pair of readings elsewhere: another cylinder on its scale, or this one's scale zeroed. */
  | { readonly weighed: 'elsewhere'; readonly scale: Scale; readonly massG: number }
  /** Estimated, or told by a paper: no scale vouches for it. */
  | { readonly weighed: 'no' };

export interface Basis {
  /** The reading that the book rests on; null: a paper, so that tare and zero of the scale enter too. */
  readonly start: ScaleReading | null;
  readonly end: ScaleReading;
  /** What the end reading says the cylinder holds. */
  readonly contentG: number;
  readonly issues: readonly Issue[];
}

export interface DifferenceUncertainty {
  /** Of the difference, in g; twice of it is the limit within which the scales explain it. */
  readonly standardG: number;
  /** Roundings that enter: two, and two for each issue with readings of its own. */
  readonly independentReadings: number;
  /** Readings that end one weighing and start the next, so that they cancel. */
  readonly sharedReadings: number;
  /** Masses that no scale vouches for. */
  readonly notWeighed: number;
}

const perReadingG2 = ({ resolutionG, repeatabilityG }: Scale): number => resolutionG ** 2 / 12 + repeatabilityG ** 2;
const rectangularG2 = (halfWidthG: number): number => halfWidthG ** 2 / 3;

/**
 * Uncertainty of D = (start - end) - sum of what was issued, by the very scales that were read.
 *
 * Each reading enters with what it counts for in D: a reading that two weighings share counts for nothing (n of
 * sqrt(2 + 2 n) leaves them out). The span error acts once, on what left the cylinder, and on each mass weighed on
 * another scale; between two scales it acts on both gross readings, and their zeros do not cancel. Method: JCGM 100,
 * Type B evaluation (from memory, the text was not re-read).
 */
export function differenceUncertainty({ start, end, contentG, issues }: Basis): DifferenceUncertainty {
  const counts = new Map<string, { scale: Scale; count: number; uses: number }>();
  const count = ({ key, scale }: ScaleReading, by: number): void => {
    const earlier = counts.get(key) ?? { scale, count: 0, uses: 0 };
    counts.set(key, { scale, count: earlier.count + by, uses: earlier.uses + 1 });
  };
  if (start) count(start, 1);
  count(end, -1);
  let varianceG2 = 0;
  let elsewhere = 0;
  let notWeighed = 0;
  for (const issue of issues) {
    if (issue.weighed === 'no') notWeighed += 1;
    if (issue.weighed === 'elsewhere') {
      elsewhere += 1;
      varianceG2 += 2 * perReadingG2(issue.scale) + rectangularG2(issue.scale.spanErrorRelative * issue.massG);
    }
    if (issue.weighed === 'here') {
      const { before, after } = issue;
      count(before, -1);
      count(after, 1);
      const isOtherScale = before.scaleKey !== (start ?? end).scaleKey;
      if (isOtherScale) varianceG2 += rectangularG2(before.scale.spanErrorRelative * (before.grossG - after.grossG));
    }
  }
  const readings = [...counts.values()];
  const rounded = readings.reduce((sum, { scale, count: times }) => sum + times ** 2 * perReadingG2(scale), 0);
  // Two at least: where start and end of one weighing are the first and the last reading, its own mass was typed.
  varianceG2 += start ? Math.max(rounded, 2 * perReadingG2(end.scale)) : rounded;
  varianceG2 += betweenG2(start, end, contentG);
  return {
    standardG: snap12(Math.sqrt(varianceG2)),
    independentReadings: Math.max(2, readings.filter(({ count: times }) => times !== 0).length + 2 * elsewhere),
    sharedReadings: readings.filter(({ count: times, uses }) => times === 0 && uses > 1).length,
    notWeighed,
  };
}

/** Span and zero between the reading that the book rests on and the last one; what is rounded is counted elsewhere. */
function betweenG2(start: ScaleReading | null, end: ScaleReading, contentG: number): number {
  // A paper says what the cylinder holds: the tare was stamped from another scale, and a second reading is as good as made.
  if (!start) return grossVarianceG2(end.scale, microgramsOf(contentG)) - perReadingG2(end.scale);
  if (start.scaleKey === end.scaleKey) {
    return rectangularG2(end.scale.spanErrorRelative * (start.grossG - end.grossG));
  }
  const ofScale = ({ scale, grossG }: ScaleReading): number =>
    rectangularG2(scale.spanErrorRelative * grossG) + rectangularG2(scale.offsetG);
  return ofScale(start) + ofScale(end);
}

const microgramsOf = (massG: number): bigint => BigInt(Math.round(massG * 1e6));
