import type { EntryPreviewResponse, PreviewedBalance } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { massOf } from '../../shared/ledger/mass-by-refrigerant.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { type Labels, placeView } from '../entries/place-labels.ts';
import type { PostingFacts } from '../entries/posting-facts.ts';
import { messageFor } from '../messages/translate.ts';

/** What people call the places of a posting, out of the facts that it is judged by. */
export const labelsOfFacts = ({ cylinders, units, parties }: PostingFacts): Labels =>
  new Map([
    ...[...cylinders].map(([id, { tag }]) => [id, tag] as const),
    ...[...units].map(([id, { tag }]) => [id, tag] as const),
    ...[...parties.values()].map(({ id, name }) => [id, name] as const),
  ]);

/** The answer that a posting would give, without what only a posting has, and with every place in words. */
export function presentPreview(
  { entries, balances, flags, warnings }: EntryGroupResponse,
  facts: PostingFacts,
  ownGroupIds: readonly string[],
  locale: Locale,
): Omit<EntryPreviewResponse, 'questions' | 'reasons'> {
  const labels = labelsOfFacts(facts);
  return {
    entries: entries.map(({ sequence: _, recordedAt: __, from, to, ...entry }) => ({
      ...entry,
      from: placeView(from, labels, locale),
      to: placeView(to, labels, locale),
    })),
    balances: balances.map(({ place, refrigerant, massG, known }): PreviewedBalance => {
      const book = (place.place === 'cylinder' ? facts.cylinders : facts.units).get(place.id ?? '')?.book ?? {};
      return {
        place: placeView(place, labels, locale),
        refrigerant,
        beforeG: gramsOfMicrograms(massOf(book, refrigerant)),
        afterG: massG,
        known,
      };
    }),
    flags: flags.filter(({ openedBy, closedBy }) => ownGroupIds.includes(openedBy) && closedBy === null),
    warnings,
  };
}

/** Reasons in the caller's words, as the refusal of a posting would say them. */
export const presentReasons = (refusals: readonly Refusal[], locale: Locale): EntryPreviewResponse['reasons'] =>
  refusals.map(({ code, path, given, allowed, params }) => ({
    code,
    path,
    message: messageFor(`problem.${code}`, locale, {
      given: given as string,
      allowed: allowed as string,
      ...params,
    }),
    ...(given === undefined ? {} : { given }),
    ...(allowed === undefined ? {} : { allowed }),
  }));
