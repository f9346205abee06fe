import type { AddedChange } from '../../shared/ledger/added-entry.ts';
import { finalBalanceRefusals } from '../../shared/ledger/final-balance.ts';
import type { JudgedGroup } from '../../shared/ledger/judged-group.ts';
import { type MassByRefrigerant, massOf, plus, refrigerantsOf } from '../../shared/ledger/mass-by-refrigerant.ts';
import { type Place, placeKey } from '../../shared/ledger/place.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import type { Posting } from './judge-posting.ts';
import type { PostingFacts } from './posting-facts.ts';

/** The masses that a posting moves: what was entered, what a reversal sends back, what judging adds. */
export function movedMasses(
  changes: readonly AddedChange[],
  added: JudgedGroup | null,
  reversed: JudgedGroup | undefined,
): { refrigerant: string; massMicrograms: bigint; from: Place; to: Place }[] {
  const mirrored = (reversed?.masses ?? []).map((mass) => ({ ...mass, from: mass.to, to: mass.from }));
  return [...(added?.masses ?? []), ...mirrored, ...changes];
}

/** The book of a place after all of it. */
export function bookAfter(
  place: Place,
  before: MassByRefrigerant,
  moved: readonly { refrigerant: string; massMicrograms: bigint; from: Place; to: Place }[],
): MassByRefrigerant {
  const key = placeKey(place);
  let book = before;
  for (const { from, to, refrigerant, massMicrograms } of moved) {
    if (placeKey(to) === key) book = plus(book, refrigerant, massMicrograms);
    if (placeKey(from) === key) book = plus(book, refrigerant, -massMicrograms);
  }
  return book;
}

export function bookBefore(place: Place, facts: PostingFacts): MassByRefrigerant {
  if (place.place === 'cylinder') return facts.cylinders.get(place.id)?.book ?? {};
  if (place.place === 'unit') return facts.units.get(place.id)?.book ?? {};
  return {};
}

/** No cylinder and no known unit ends below zero, on the totals after everything that the posting adds. */
export function floorRefusals(
  judged: readonly { readonly place: Place; readonly known: boolean }[],
  changes: readonly AddedChange[],
  posting: Posting,
  added: JudgedGroup | null,
  facts: PostingFacts,
): Refusal[] {
  const moved = movedMasses(changes, added, posting.reversed);
  const balances = judged.flatMap(({ place, known }) => {
    const book = bookAfter(place, bookBefore(place, facts), moved);
    return refrigerantsOf(book).map((refrigerant) => {
      return { place, refrigerant, massMicrograms: massOf(book, refrigerant), known };
    });
  });
  return finalBalanceRefusals(balances, posting.added?.masses ?? []).map((refusal) => ({
    ...refusal,
    path: refusal.path === '' ? '' : `${posting.addedAt ?? ''}${refusal.path}`,
    params: { ...refusal.params, place: tagOf(String(refusal.params?.place), facts) },
  }));
}

/** What people call the place, instead of its id. */
function tagOf(key: string, { cylinders, units }: PostingFacts): string {
  const id = key.slice(key.indexOf(':') + 1);
  return cylinders.get(id)?.tag ?? units.get(id)?.tag ?? key;
}
