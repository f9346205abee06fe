import { snap12 } from '../units/round.ts';
import { grossVarianceG2, type Scale } from './scale.ts';

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

/** A reading that a following group may still share, and what it counts for so far. */
interface OpenReading {
  readonly key: string;
  readonly readingG2: number;
  readonly count: number;
  readonly uses: number;
}

/**
 * What a cylinder's book rests on since a reading last set it: that reading (null: a paper), and everything issued
 * since. It stays small however much that is, so that a snapshot can hold it.
 */
export interface BookBasis {
  readonly start: ScaleReading | null;
  readonly open: readonly OpenReading[];
  /** Readings that nothing can share any more, and masses weighed elsewhere. */
  readonly varianceG2: number;
  readonly readings: number;
  readonly shared: number;
  readonly notWeighed: number;
  /** The span error of what was weighed here, by scale: it enters where that is not the scale of the first reading. */
  readonly spanG2: Readonly<Record<string, number>>;
}

const perReadingG2 = ({ resolutionG, repeatabilityG }: Scale): number => resolutionG ** 2 / 12 + repeatabilityG ** 2;
const rectangularG2 = (halfWidthG: number): number => halfWidthG ** 2 / 3;

/** Of the readings of three groups at least: one shares its last reading with the next one's first. */
const OPEN_READINGS = 8;

export function basisOn(start: ScaleReading | null): BookBasis {
  return {
    start,
    open: start ? counted([], start, 1) : [],
    varianceG2: 0,
    readings: 0,
    shared: 0,
    notWeighed: 0,
    spanG2: {},
  };
}

/**
 * Whether a reading is what the book rests on from now on: where the book follows it, and where it finds a paper right
 * to the last figure. One that merely lies within the scales leaves the book, and what it rests on, as they were.
 */
export const setsBook = (postedMicrograms: bigint, differenceMicrograms: bigint, restsOnPaper: boolean): boolean =>
  postedMicrograms !== 0n || (restsOnPaper && differenceMicrograms === 0n);

export const withIssues = (basis: BookBasis, issues: readonly Issue[]): BookBasis => issues.reduce(withIssue, basis);

function withIssue(basis: BookBasis, issue: Issue): BookBasis {
  if (issue.weighed === 'no') return { ...basis, notWeighed: basis.notWeighed + 1 };
  if (issue.weighed === 'elsewhere') {
    const spanG2 = rectangularG2(issue.scale.spanErrorRelative * issue.massG);
    const varianceG2 = basis.varianceG2 + 2 * perReadingG2(issue.scale) + spanG2;
    return { ...basis, varianceG2, readings: basis.readings + 2 };
  }
  const { before, after } = issue;
  const spanG2 = rectangularG2(before.scale.spanErrorRelative * (before.grossG - after.grossG));
  return settled({
    ...basis,
    open: counted(counted(basis.open, before, -1), after, 1),
    spanG2: { ...basis.spanG2, [before.scaleKey]: (basis.spanG2[before.scaleKey] ?? 0) + spanG2 },
  });
}

function counted(open: readonly OpenReading[], { key, scale }: ScaleReading, by: number): OpenReading[] {
  const earlier = open.find((reading) => reading.key === key);
  if (!earlier) return [...open, { key, readingG2: perReadingG2(scale), count: by, uses: 1 }];
  const again = { ...earlier, count: earlier.count + by, uses: earlier.uses + 1 };
  return open.map((reading) => (reading === earlier ? again : reading));
}

/** The oldest readings into the sum. */
function settled(basis: BookBasis): BookBasis {
  const [oldest, ...open] = basis.open;
  if (!oldest || basis.open.length <= OPEN_READINGS) return basis;
  return settled({ ...basis, ...sumsWith(basis, [oldest]), open });
}

function sumsWith({ varianceG2, readings, shared }: BookBasis, more: readonly OpenReading[]) {
  return {
    varianceG2: more.reduce((sum, { count, readingG2 }) => sum + count ** 2 * readingG2, varianceG2),
    readings: readings + more.filter(({ count }) => count !== 0).length,
    shared: shared + more.filter(({ count, uses }) => count === 0 && uses > 1).length,
  };
}

/**
 * Uncertainty of D = (start - end) - sum of what was issued, by the very scales that were read.
 *
 * Each reading enters with what it counts for in D: a reading that two weighings share counts for nothing (n of
 * sqrt(2 + 2 n) leaves them out). The span error acts once, on what left the cylinder, and on each mass weighed on
 * another scale; between two scales it acts on both gross readings, and their zeros do not cancel. Method: JCGM 100,
 * Type B evaluation (from memory, the text was not re-read).
 *
 * @param contentG what the end reading says the cylinder holds
 */
export function uncertaintyOf(basis: BookBasis, end: ScaleReading, contentG: number): DifferenceUncertainty {
  const { start } = basis;
  const sums = sumsWith(basis, counted(basis.open, end, -1));
  const ownScale = (start ?? end).scaleKey;
  const otherG2 = Object.entries(basis.spanG2).reduce((sum, [key, g2]) => (key === ownScale ? sum : sum + g2), 0);
  // Two at least: where start and end of one weighing are the first and the last reading, its own mass was typed.
  const roundedG2 = start ? Math.max(sums.varianceG2, 2 * perReadingG2(end.scale)) : sums.varianceG2;
  return {
    standardG: snap12(Math.sqrt(roundedG2 + otherG2 + betweenG2(start, end, contentG))),
    // A paper counts as a reading: what it says was weighed somewhere too.
    independentReadings: Math.max(2, sums.readings + (start ? 0 : 1)),
    sharedReadings: sums.shared,
    notWeighed: basis.notWeighed,
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
