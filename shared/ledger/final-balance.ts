import type { Refusal } from '../problems/outcome.ts';
import { gramsText } from './grams-text.ts';
import { type Place, placeKey, samePlace } from './place.ts';

/** A balance after everything that a posting adds. `known` is false for a unit whose book is only a sum. */
export interface FinalBalance {
  readonly place: Place;
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly known?: boolean;
}

/**
 * No cylinder and no known unit ends below zero, on the totals after the whole posting; the past may. The way out is in
 * the message: weigh the cylinder, then post, because a reading explains the gap.
 *
 * @param balances of every place that the posting touched, the judge's corrections included.
 * @param entries as they stand in the request, so that the refusal points at the one that takes too much.
 */
export function finalBalanceRefusals(
  balances: readonly FinalBalance[],
  entries: readonly { from: Place; refrigerant: string | null; massMicrograms: bigint }[] = [],
): Refusal[] {
  return balances
    .filter(({ place, massMicrograms, known }) => {
      const hasFloor = place.place === 'cylinder' || (place.place === 'unit' && known !== false);
      return hasFloor && massMicrograms < 0n;
    })
    .map(({ place, refrigerant, massMicrograms }) => {
      const taken = entries
        .map((entry, index) => ({ ...entry, index }))
        .filter((entry) => samePlace(entry.from, place) && (entry.refrigerant ?? refrigerant) === refrigerant);
      const takenMicrograms = taken.reduce((sum, entry) => sum + entry.massMicrograms, 0n);
      const [first] = taken.toSorted((a, b) => (a.massMicrograms > b.massMicrograms ? -1 : 1));
      return {
        code: 'exceedsBook',
        path: first ? `/entries/${first.index}/mass` : '',
        given: gramsText(takenMicrograms),
        allowed: gramsText(massMicrograms + takenMicrograms),
        params: {
          place: placeKey(place),
          refrigerant,
          massG: gramsText(takenMicrograms),
          bookG: gramsText(massMicrograms + takenMicrograms),
          shortG: gramsText(-massMicrograms),
        },
      };
    });
}
