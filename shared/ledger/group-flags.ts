import type { LedgerFlag } from './flag.ts';
import type { JudgedGroup } from './judged-group.ts';
import { type MassByRefrigerant, massOf, plus, refrigerantsOf } from './mass-by-refrigerant.ts';
import { type Place, placeKey } from './place.ts';

/**
 * What a group shows by itself, whatever the books say: the difference that a reclaimer's certificate names, by
 * refrigerant; below zero where more was certified than sent.
 */
export function groupFlags(group: JudgedGroup): LedgerFlag[] {
  const places = new Map<string, Place>();
  const differences = new Map<string, MassByRefrigerant>();
  const add = (place: Place, refrigerant: string, massMicrograms: bigint): void => {
    const key = placeKey(place);
    places.set(key, place);
    differences.set(key, plus(differences.get(key) ?? {}, refrigerant, massMicrograms));
  };
  for (const { from, to, refrigerant, massMicrograms } of group.masses) {
    if (to.place === 'reclaimerDifference') add(from, refrigerant, massMicrograms);
    if (from.place === 'reclaimerDifference') add(to, refrigerant, -massMicrograms);
  }
  return [...places].flatMap(([key, place]) =>
    refrigerantsOf(differences.get(key) ?? {}).map((refrigerant) => ({
      code: 'certificateDifference' as const,
      place,
      groupId: group.id,
      refrigerant,
      massMicrograms: massOf(differences.get(key) ?? {}, refrigerant),
      standing: false,
      figures: {},
    })),
  );
}
