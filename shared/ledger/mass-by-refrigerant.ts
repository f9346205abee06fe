/** A balance of one place: micrograms by refrigerant. A refrigerant without mass is absent. */
export type MassByRefrigerant = Readonly<Record<string, bigint>>;

export const refrigerantsOf = (book: MassByRefrigerant): string[] => Object.keys(book).sort();
export const massOf = (book: MassByRefrigerant, refrigerant: string): bigint => book[refrigerant] ?? 0n;
export const totalOf = (book: MassByRefrigerant): bigint => Object.values(book).reduce((sum, mass) => sum + mass, 0n);

/** The book with the mass added; a negative mass is taken off. */
export function plus(book: MassByRefrigerant, refrigerant: string, massMicrograms: bigint): MassByRefrigerant {
  const mass = massOf(book, refrigerant) + massMicrograms;
  const { [refrigerant]: _, ...others } = book;
  return mass === 0n ? others : { ...others, [refrigerant]: mass };
}

export function plusAll(book: MassByRefrigerant, change: MassByRefrigerant): MassByRefrigerant {
  return refrigerantsOf(change).reduce((sum, refrigerant) => plus(sum, refrigerant, massOf(change, refrigerant)), book);
}

export function smaller(one: bigint, other: bigint): bigint {
  if (one < other) return one;
  return other;
}

/** More than one refrigerant in it: to a reclaimer only. */
export const isMixed = (book: MassByRefrigerant): boolean => Object.values(book).filter((mass) => mass > 0n).length > 1;

/**
 * A mass divided in the ratio of what the book holds, exact in sum: whole micrograms by largest remainder, ties to the
 * refrigerant first in the alphabet. A negative mass is divided as its opposite. What the book does not hold, or holds
 * below zero, gets no share.
 *
 * @returns null where the book holds nothing: there is no ratio.
 */
export function splitByBook(book: MassByRefrigerant, massMicrograms: bigint): MassByRefrigerant | null {
  const held = refrigerantsOf(book)
    .map((refrigerant) => ({ refrigerant, weight: massOf(book, refrigerant) }))
    .filter(({ weight }) => weight > 0n);
  const total = held.reduce((sum, { weight }) => sum + weight, 0n);
  if (total === 0n) return null;
  const sign = massMicrograms < 0n ? -1n : 1n;
  const size = massMicrograms * sign;
  const parts = held.map(({ refrigerant, weight }) => ({
    refrigerant,
    share: (size * weight) / total,
    remainder: (size * weight) % total,
  }));
  let left = size - parts.reduce((sum, { share }) => sum + share, 0n);
  for (const part of parts.toSorted((a, b) => (b.remainder > a.remainder ? 1 : b.remainder < a.remainder ? -1 : 0))) {
    if (left === 0n) break;
    part.share += 1n;
    left -= 1n;
  }
  return Object.fromEntries(
    parts.filter(({ share }) => share > 0n).map(({ refrigerant, share }) => [refrigerant, share * sign]),
  );
}
