import type { AddedEntry } from './added-entry.ts';
import type { LedgerFlag } from './flag.ts';
import { type JudgedGroup, timelineOf, touchesUnit } from './judged-group.ts';
import { massOf, refrigerantsOf, totalOf } from './mass-by-refrigerant.ts';
import { singlePlace } from './place.ts';
import { asksAtAddition, judgeAnswer, settleEmpty } from './unit-answer.ts';
import { negated, netAdded, type UnitFlow, unitFlowOf } from './unit-flow.ts';
import { UnitJudging } from './unit-judging.ts';
import { unitStandingFlags } from './unit-standing.ts';
import { emptyUnitState, fullChargeAt, type UnitRegister, type UnitState } from './unit-state.ts';

export interface UnitStep {
  readonly state: UnitState;
  readonly added: readonly AddedEntry[];
  /** Judgements of this group; what merely stands is in `state.standing`. */
  readonly flags: readonly LedgerFlag[];
}

/**
 * One group in order. With the statement *empty*: what it takes out, then the statement, then what it puts in (a
 * recovery and the weigh-in that follows may be one group). Every other statement is judged on the whole group.
 */
export function judgeUnitStep(register: UnitRegister, state: UnitState, group: JudgedGroup): UnitStep {
  const flow = unitFlowOf(group, register.unitId);
  const judging = new UnitJudging(register.unitId, state, group);
  const at = { register, group, flow, before: state };
  const isEmpty = flow.statement?.is === 'empty';
  if (isEmpty) {
    judging.move(negated(flow.removals));
    judging.varianceG2 += flow.removalsVarianceG2;
    settleEmpty(judging, at);
  }
  beginBook(judging, flow);
  const bookBefore = judging.book;
  judging.move(isEmpty ? flow.additions : netAdded(flow));
  judging.varianceG2 += flow.additionsVarianceG2 + (isEmpty ? 0 : flow.removalsVarianceG2);
  if (judging.known) judging.settleSurplus();
  const { asked, lastLossAtAddition } = judgeAnswer(judging, at, bookBefore);
  return {
    state: {
      lastPosition: { occurredAt: group.occurredAt, sequence: group.sequence },
      known: judging.known,
      book: judging.book,
      varianceG2: judging.varianceG2,
      losses: judging.losses,
      lastLossAtAddition,
      standing: unitStandingFlags(judging, at, asked),
    },
    added: judging.addedEntries(),
    flags: judging.flags,
  };
}

/**
 * A factory or opening entry makes the book known; what was weighed before it counts on. A sum below zero by then was
 * in the unit before our care: it is opened, because a known book does not stand below zero.
 */
function beginBook(judging: UnitJudging, flow: UnitFlow): void {
  if (refrigerantsOf(flow.starts).length > 0 && !judging.known) {
    const earlier = refrigerantsOf(judging.book);
    if (earlier.length > 0) judging.flag('lateBeforeOpening', null, totalOf(judging.book));
    for (const refrigerant of earlier) {
      const sum = massOf(judging.book, refrigerant);
      if (sum < 0n) judging.post(refrigerant, -sum, singlePlace('opening'));
    }
    judging.known = true;
  }
  judging.move(flow.starts);
}

/** The whole timeline from nothing: what its server-made entries and open flags have to be. */
export function replayUnit(register: UnitRegister, groups: readonly JudgedGroup[]): UnitStep {
  let state = emptyUnitState;
  const added: AddedEntry[] = [];
  const flags: LedgerFlag[] = [];
  for (const group of timelineOf(groups)) {
    if (!touchesUnit(group, register.unitId)) continue;
    const step = judgeUnitStep(register, state, group);
    state = step.state;
    added.push(...step.added);
    flags.push(...step.flags);
  }
  return { state, added, flags };
}

/**
 * Does this addition ask whether the unit is full? It does when the book is not known, or would pass full charge (where
 * that is not known: the book before) by more than twice the uncertainty. The client asks this before it posts; the
 * judge asks the same. After *empty* in the same group there is nothing to ask.
 */
export function wouldAsk(register: UnitRegister, state: UnitState, group: JudgedGroup): boolean {
  const flow = unitFlowOf(group, register.unitId);
  if (flow.statement?.is === 'empty') return false;
  const net = netAdded(flow);
  const known = state.known || refrigerantsOf(flow.starts).length > 0;
  return refrigerantsOf(net).some((refrigerant) =>
    asksAtAddition({
      known,
      bookMicrograms: massOf(state.book, refrigerant) + massOf(flow.starts, refrigerant),
      addedMicrograms: massOf(net, refrigerant),
      fullChargeMicrograms: fullChargeAt(register, refrigerant, group.occurredAt),
      varianceG2: state.varianceG2 + flow.additionsVarianceG2 + flow.removalsVarianceG2,
    }),
  );
}
