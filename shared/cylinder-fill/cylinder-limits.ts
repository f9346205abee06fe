import { asReturned } from '../calculations/decimals.ts';
import { STANDARD_ATMOSPHERE_KPA } from '../units/factors.ts';
import { gramsOfMicrograms, type Micrograms, microgramsOfGrams } from '../units/mass.ts';
import { snap12 } from '../units/round.ts';
import { FILL_FACTOR, WATER_KG_M3 } from './cylinder-fill.ts';
import { type FillJurisdiction, findFillFigures, pressureRule } from './filling-table.ts';

/** What the limit follows from, as stamped on the collar. */
export interface LimitStamps {
  readonly kind: 'refillable' | 'nonRefillable' | 'recovery';
  /** What the cylinder is meant for. */
  readonly refrigerant: string;
  readonly stampedLimitMicrograms: bigint | null;
  readonly waterCapacityMicrograms: bigint | null;
}

/**
 * Largest net content: the stamped limit, else for refillable and recovery cylinders the published rule, 0.8 x water
 * capacity x liquid density at 25 °C, with the lowest density of what is in it. Null: no limit, or not known.
 * @param held what it holds or is to hold; while it holds nothing it is meant for its own refrigerant
 */
export function cylinderLimit(stamps: LimitStamps, held: readonly string[] = []): Micrograms | null {
  if (stamps.stampedLimitMicrograms !== null) return stamps.stampedLimitMicrograms as Micrograms;
  if (stamps.kind === 'nonRefillable' || stamps.waterCapacityMicrograms === null) return null;
  const refrigerant = limitingRefrigerant(stamps.refrigerant, held);
  const density = refrigerant === null ? null : findFillFigures(refrigerant)?.liquidDensityKgM3At25C;
  if (density == null) return null;
  const waterCapacityG = gramsOfMicrograms(stamps.waterCapacityMicrograms);
  // The same steps as `cylinderFill`, so that both say the same figure to the milligram.
  const maxNetG = asReturned(snap12(waterCapacityG * (density / WATER_KG_M3) * FILL_FACTOR), 'g');
  const limit = microgramsOfGrams(maxNetG);
  return limit > 0n ? limit : null;
}

/** The lightest of what is in it; one whose density is not known counts as what the cylinder is meant for. */
export function limitingRefrigerant(registered: string, held: readonly string[]): string | null {
  const density = (refrigerant: string) => findFillFigures(refrigerant)?.liquidDensityKgM3At25C ?? null;
  const meant = held.map((refrigerant) => (density(refrigerant) === null ? registered : refrigerant));
  const dense = heldOrMeant(registered, meant).map((refrigerant) => ({ refrigerant, kgM3: density(refrigerant) }));
  if (dense.some(({ kgM3 }) => kgM3 === null)) return null;
  return dense.toSorted((a, b) => (a.kgM3 ?? 0) - (b.kgM3 ?? 0))[0]?.refrigerant ?? null;
}

/** What a refrigerant presses at 55 °C, kPa gauge over a standard atmosphere: the liquid's bubble pressure. Null: no figure. */
export function ratingPressureKPaGauge(refrigerant: string): number | null {
  const pressure = findFillFigures(refrigerant)?.bubbleKPaAbsAt55C ?? null;
  return pressure === null ? null : snap12(pressure - STANDARD_ATMOSPHERE_KPA);
}

/** Of several the one that presses most at 55 °C. */
export const pressingMost = (refrigerants: readonly string[]): string =>
  refrigerants.toSorted((a, b) => (ratingPressureKPaGauge(b) ?? 0) - (ratingPressureKPaGauge(a) ?? 0))[0] ?? '';

/** The most that a cylinder of this service pressure may be pressed to at 55 °C, kPa gauge. */
export const allowedPressureKPaGauge = (serviceKPaGauge: number, jurisdiction: FillJurisdiction | null): number =>
  snap12(serviceKPaGauge * pressureRule(jurisdiction).serviceFactor);

/**
 * Does the service pressure (kPa gauge) bear these refrigerants at 55 °C? In the US the pressure there may be 5/4 of it
 * (49 CFR 173.301a(d)), elsewhere not more than it. Each is judged for itself: no mixture's own pressure is reckoned.
 * False as soon as one is not borne; null: no service pressure, or no figure for one.
 */
export function pressureRatingHolds(
  servicePressureKPaGauge: number | null,
  refrigerants: readonly string[],
  jurisdiction: FillJurisdiction | null,
): boolean | null {
  if (servicePressureKPaGauge === null) return null;
  const { except } = pressureRule(jurisdiction);
  const allowed = allowedPressureKPaGauge(servicePressureKPaGauge, jurisdiction);
  const answers = refrigerants.map((refrigerant) => {
    const pressure = except.includes(refrigerant) ? null : ratingPressureKPaGauge(refrigerant);
    return pressure === null ? null : pressure <= allowed;
  });
  if (answers.includes(false)) return false;
  return answers.length === 0 || answers.includes(null) ? null : true;
}

/** What a cylinder is judged by: what is in it, else what it is meant for. */
export const heldOrMeant = (registered: string, held: readonly string[]): readonly string[] =>
  held.length > 0 ? held : [registered];
