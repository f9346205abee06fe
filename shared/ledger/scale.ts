import { snap12 } from '../units/round.ts';

/** One weighing scale, as its tool record says. Grams, except `spanErrorRelative` (0.001 is 0.1 %). */
export interface Scale {
  /** The step of the display, d. */
  readonly resolutionG: number;
  /** Standard deviation of repeated readings, s. */
  readonly repeatabilityG: number;
  /** Largest relative error of the span, c; taken as rectangular. */
  readonly spanErrorRelative: number;
  /** Largest error of the zero; taken as rectangular. */
  readonly offsetG: number;
}

/** Stands for a scale that nobody named: 5 g steps, as most gram scales of the trade. Common practice, no source. */
export const ASSUMED_SCALE: Scale = { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 };

const gramsOf = (massMicrograms: bigint): number => Number(massMicrograms) / 1e6;

/**
 * Variance in g² of a net mass from two readings of one scale (a zeroed reading carries two roundings as well):
 * u² = 2 (d²/12 + s²) + (c m)²/3, where a rectangular error of half-width a has the variance a²/3.
 * Method: JCGM 100, Type B evaluation (memory, the text was not re-read). For d = 5 g alone 2 u is 4.082 g.
 */
export function netVarianceG2(scale: Scale, massMicrograms: bigint): number {
  const reading = scale.resolutionG ** 2 / 12 + scale.repeatabilityG ** 2;
  return 2 * reading + (scale.spanErrorRelative * gramsOf(massMicrograms)) ** 2 / 3;
}

/**
 * Variance in g² of a gross reading held against the book. The book rests on an earlier reading of the cylinder, so two
 * readings enter here too; the span error acts on the content; the offset enters once, because the tare was stamped
 * from another scale and does not cancel it.
 */
export function grossVarianceG2(scale: Scale, contentMicrograms: bigint): number {
  return netVarianceG2(scale, contentMicrograms) + scale.offsetG ** 2 / 3;
}

/**
 * Is the mass more than `times` the standard uncertainty? Exactly at the limit is within, whatever the noise of the sum
 * of variances: six net masses with d = 5 g have 2 u of 10 g, and 10 g are within.
 */
export function isBeyond(massMicrograms: bigint, varianceG2: number, times = 2): boolean {
  return Math.abs(gramsOf(massMicrograms)) > snap12(times * Math.sqrt(varianceG2));
}
