import type { AtmosphereKind, Place } from './place.ts';

/** A posted entry, whoever made it. */
export interface EmissionEntry {
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly from: Place;
  readonly to: Place;
  /** `2026-11`. */
  readonly bookingMonth: string;
  readonly atLeast: boolean;
}

export interface Emission {
  readonly bookingMonth: string;
  readonly refrigerant: string;
  readonly as: AtmosphereKind;
  /** Below zero where more was taken back in the month than was lost. */
  readonly massMicrograms: bigint;
  /** The part of it that is only "at least": the unit was left not full. */
  readonly atLeastMicrograms: bigint;
}

/**
 * What went to the atmosphere, by booking month, refrigerant and how. A loss taken back, a reversal and a correction
 * are negative in their own month. A difference is no emission until month close posts it as one.
 */
export function emissions(entries: readonly EmissionEntry[]): Emission[] {
  const byKey = new Map<string, Emission>();
  const add = (entry: EmissionEntry, place: Place, massMicrograms: bigint): void => {
    if (place.place !== 'atmosphere') return;
    const { bookingMonth, refrigerant, atLeast } = entry;
    const key = [bookingMonth, refrigerant, place.as].join('|');
    const earlier = byKey.get(key);
    byKey.set(key, {
      bookingMonth,
      refrigerant,
      as: place.as,
      massMicrograms: (earlier?.massMicrograms ?? 0n) + massMicrograms,
      atLeastMicrograms: (earlier?.atLeastMicrograms ?? 0n) + (atLeast ? massMicrograms : 0n),
    });
  };
  for (const entry of entries) {
    add(entry, entry.to, entry.massMicrograms);
    add(entry, entry.from, -entry.massMicrograms);
  }
  return [...byKey.entries()]
    .toSorted(([a], [b]) => (a < b ? -1 : 1))
    .map(([, emission]) => emission)
    .filter(({ massMicrograms, atLeastMicrograms }) => massMicrograms !== 0n || atLeastMicrograms !== 0n);
}
