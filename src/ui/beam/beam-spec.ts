/**
 * What a beam shows, in the unit that its ticks count (grams, kilograms, ounces, pounds). Every label is a finished text
 * with its own figure and unit, so that the drawing needs to know nothing of the trade.
 */
export interface BeamSpec {
  /** The ends of the scale. From a larger to a smaller figure where progress means less (a cylinder on the scale). */
  domain: readonly [from: number, to: number];
  /** Unit of the ticks, shown once, at the last. `lbOz`: they count ounces and read `21 lb 4 oz`. */
  unit: string;
  /** Lying on the beam. */
  segments: readonly BeamSegment[];
  /** Hanging under the beam: the other side of an equation (in = out). */
  counter?: readonly BeamSegment[];
  poise?: BeamPoise;
  marks?: readonly BeamMark[];
  /** Where a reading may end: the tolerance around a stop. */
  band?: { from: number; to: number };
}

export interface BeamSegment {
  from: number;
  to: number;
  /** rest: verdigris; move: copper; gone: hatched, mass that left; free: an outline, room that is left. */
  kind: 'rest' | 'move' | 'gone' | 'free';
  label: string;
}

/** The pointer: where the mass stands now. */
export interface BeamPoise {
  at: number;
  label: string;
  kind: 'rest' | 'move';
}

export interface BeamMark {
  at: number;
  label: string;
  /** stop: nothing goes past it; target: where to stop; limit: a threshold; note: any other point worth a word. */
  kind: 'stop' | 'target' | 'limit' | 'note';
}

/** Ends of a scale from zero that shows `most` with air behind it, on a round figure. */
export function roundEnd(most: number): number {
  if (!(most > 0)) return 1;
  const size = 10 ** Math.floor(Math.log10(most));
  const steps = [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10];
  return (steps.find((step) => step * size >= most) ?? 10) * size;
}
