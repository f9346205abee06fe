import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import { replayUnit, wouldAsk } from '../../shared/ledger/judge-unit.ts';
import { compareInTimeline, type JudgedGroup, touchesUnit } from '../../shared/ledger/judged-group.ts';
import { massOf } from '../../shared/ledger/mass-by-refrigerant.ts';
import { fullChargeAt } from '../../shared/ledger/unit-state.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import type { PostingFacts } from '../entries/posting-facts.ts';

/**
 * Whether the group asks how full a unit is, with the rule that the judge itself uses. A unit whose timeline was read
 * (the group is late, say) is asked as it stood then.
 * @param replayed groups of the timelines that were read, for the units in `replayedIds`
 */
export function questionsAsked(
  group: JudgedGroup,
  facts: PostingFacts,
  replayed: Iterable<JudgedGroup>,
  replayedIds: readonly string[],
): EntryPreviewResponse['questions'] {
  const earlier = [...replayed].filter((other) => other.id !== group.id && compareInTimeline(other, group) < 0);
  return [...facts.units].flatMap(([unitId, { register, state: standing }]) => {
    const state = replayedIds.includes(unitId)
      ? replayUnit(
          register,
          earlier.filter((other) => touchesUnit(other, unitId)),
        ).state
      : standing;
    if (!state || !wouldAsk(register, state, group)) return [];
    const refrigerant = group.masses.find(({ to }) => to.place === 'unit' && to.id === unitId)?.refrigerant ?? '';
    const fullCharge = fullChargeAt(register, refrigerant, group.occurredAt);
    return [
      {
        asks: 'howFull' as const,
        unitId,
        bookG: state.known ? gramsOfMicrograms(massOf(state.book, refrigerant)) : null,
        fullChargeG: fullCharge === null ? null : gramsOfMicrograms(fullCharge),
      },
    ];
  });
}
