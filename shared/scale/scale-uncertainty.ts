/** What is known of a scale, in g; `spanErrorRelative` is the half-width of a rectangular distribution. */
export interface ScaleFacts {
  resolutionG: number;
  repeatabilityG?: number | null | undefined;
  spanErrorRelative?: number | null | undefined;
}

/**
 * Variance in g2 of a sum of independent readings: each has a rounding (rectangular, d2/12) and its repeatability; the
 * span error counts once, on the net mass, since it is the same in all. GUM (JCGM 100) Type B, from memory.
 */
export function varianceG2(scale: ScaleFacts, readings: number, netG: number): number {
  const perReading = scale.resolutionG ** 2 / 12 + (scale.repeatabilityG ?? 0) ** 2;
  return readings * perReading + ((scale.spanErrorRelative ?? 0) * netG) ** 2 / 3;
}

/** Standard uncertainty in g of a net mass from two readings. */
export const netMassUncertaintyG = (scale: ScaleFacts, netG: number) => Math.sqrt(varianceG2(scale, 2, netG));
