import type { JudgedGroup } from './judged-group.ts';
import { type MassByRefrigerant, massOf, refrigerantsOf, smaller } from './mass-by-refrigerant.ts';
import { singlePlace } from './place.ts';
import { isBeyond } from './scale.ts';
import { netAdded, type UnitFlow } from './unit-flow.ts';
import type { UnitJudging } from './unit-judging.ts';
import { fullChargeAt, type UnitRegister, type UnitState, unitRefrigerantAt } from './unit-state.ts';

/** Where a judgement is made: the register, the group, what it does to the unit, and the state before it. */
export interface UnitJudgedAt {
  readonly register: UnitRegister;
  readonly group: JudgedGroup;
  readonly flow: UnitFlow;
  readonly before: UnitState;
}

const THIRTY_DAYS_MS = 30 * 24 * 60 * 60 * 1000;

/** The figures on which it depends whether an addition asks; `varianceG2` with what this addition weighs. */
export function asksAtAddition(figures: {
  known: boolean;
  bookMicrograms: bigint;
  addedMicrograms: bigint;
  fullChargeMicrograms: bigint | null;
  varianceG2: number;
}): boolean {
  const { known, bookMicrograms, addedMicrograms, fullChargeMicrograms, varianceG2 } = figures;
  if (addedMicrograms <= 0n) return false;
  if (!known) return true;
  const over = bookMicrograms + addedMicrograms - (fullChargeMicrograms ?? bookMicrograms);
  return over > 0n && isBeyond(over, varianceG2);
}

/** What a unit that is empty now tells of its book. From here on the book is known and nothing earlier is taken back. */
export function settleEmpty(judging: UnitJudging, at: UnitJudgedAt): void {
  if (judging.known) {
    judging.settleSurplus();
    for (const refrigerant of refrigerantsOf(judging.book)) settleRemainder(judging, at, refrigerant);
  } else {
    settleUnknown(judging, at, {});
  }
  judging.varianceG2 = 0;
  judging.losses = [];
}

/** What the known book still holds although the unit is empty. */
function settleRemainder(judging: UnitJudging, { flow }: UnitJudgedAt, refrigerant: string): void {
  const remainder = massOf(judging.book, refrigerant);
  if (!judging.isBeyond(remainder)) {
    judging.post(refrigerant, -remainder, singlePlace('unitDifference'));
    return;
  }
  judging.postInferredLoss(refrigerant, remainder, false);
  const by = flow.statement?.by ?? (refrigerantsOf(flow.removals).length > 0 ? 'recovery' : null);
  if (by === 'vacuum') judging.flag('vacuumWithoutRecovery', refrigerant, remainder);
  if (by === 'recovery') judging.flag('lossAtRecovery', refrigerant, remainder);
}

/**
 * The first *empty*, or *full* with a known full charge, settles a book that was not known: the content stated less the
 * sum of masses comes from `opening`, or went to the atmosphere, at least that much. What full charge exceeds that
 * opening was lost before our care.
 */
function settleUnknown(judging: UnitJudging, { register, group }: UnitJudgedAt, stated: MassByRefrigerant): void {
  const main = unitRefrigerantAt(register, group.occurredAt);
  const isEmpty = refrigerantsOf(stated).length === 0;
  const all = new Set([...refrigerantsOf(judging.book), ...(main === null ? [] : [main])]);
  for (const refrigerant of all) {
    const sum = massOf(judging.book, refrigerant);
    const isStated = isEmpty || refrigerant === main;
    const opening = isStated ? massOf(stated, refrigerant) - sum : sum < 0n ? -sum : 0n;
    const opened = opening > 0n ? opening : 0n;
    if (opened > 0n) {
      judging.post(refrigerant, opened, singlePlace('opening'));
      judging.flag('unitOpenedAt', refrigerant, opened);
    }
    const fullCharge = refrigerant === main ? fullChargeAt(register, refrigerant, group.occurredAt) : null;
    if (fullCharge !== null && fullCharge > opened) judging.postLossBeforeOurCare(refrigerant, fullCharge - opened);
    if (fullCharge !== null && isEmpty && judging.isBeyond(opened - fullCharge) && opened > fullCharge) {
      judging.flag('moreThanFullChargeCameOut', refrigerant, opened - fullCharge, { fullCharge });
    }
    if (opening < 0n) {
      judging.postInferredLoss(refrigerant, -opening, true);
      judging.flag('oursGoneAtLeast', refrigerant, -opening);
    }
  }
  judging.known = true;
  judging.varianceG2 = 0;
}

export interface AnswerJudged {
  /** The addition asks, and nobody answered: it counts as not known until somebody does. */
  readonly asked: boolean;
  readonly lastLossAtAddition: UnitState['lastLossAtAddition'];
}

/** The answer to "is it full now?", or what no answer counts as, held against the book after the whole group. */
export function judgeAnswer(judging: UnitJudging, at: UnitJudgedAt, bookBefore: MassByRefrigerant): AnswerJudged {
  const { register, group, flow, before } = at;
  const isEmpty = flow.statement?.is === 'empty';
  const answer = isEmpty ? null : (flow.statement?.is ?? null);
  const net = isEmpty ? flow.additions : netAdded(flow);
  const main = unitRefrigerantAt(register, group.occurredAt);
  const fullCharge = main === null ? null : fullChargeAt(register, main, group.occurredAt);
  if (!judging.known) {
    if (answer === 'full' && main !== null && fullCharge !== null) settleUnknown(judging, at, { [main]: fullCharge });
    const adds = Object.values(net).some((mass) => mass > 0n);
    return { asked: adds && answer === null && group.chargeSheetId === null, lastLossAtAddition: null };
  }
  const added = refrigerantsOf(net).filter((refrigerant) => massOf(net, refrigerant) > 0n);
  const isSaid = answer === 'full' || answer === 'notFull';
  let asked = false;
  let lastLossAtAddition = isEmpty ? null : before.lastLossAtAddition;
  for (const refrigerant of new Set([...added, ...(isSaid && main !== null ? [main] : [])])) {
    const judged = { refrigerant, before: massOf(bookBefore, refrigerant), net: massOf(net, refrigerant) };
    const asks = asksAtAddition({
      known: true,
      bookMicrograms: judged.before,
      addedMicrograms: judged.net,
      fullChargeMicrograms: fullChargeAt(register, refrigerant, group.occurredAt),
      varianceG2: judging.varianceG2,
    });
    const byDefault = asks && answer === null;
    if (byDefault && group.chargeSheetId !== null) continue;
    asked ||= byDefault && !isEmpty;
    if (!isSaid && !asks) continue;
    if (answer === 'moreThanFull') continue;
    const isLoss = judgeAgainstFullCharge(judging, at, judged, answer ?? 'notKnown');
    if (isLoss && judged.net > 0n) {
      if (isSecondIn30Days(before.lastLossAtAddition, group)) {
        judging.flag('secondAdditionIn30Days', refrigerant, judged.net);
      }
      lastLossAtAddition = { occurredAt: group.occurredAt, jobId: group.jobId };
    }
  }
  return { asked, lastLossAtAddition };
}

/** @returns whether a loss was inferred. */
function judgeAgainstFullCharge(
  judging: UnitJudging,
  { register, group, flow }: UnitJudgedAt,
  judged: { refrigerant: string; before: bigint; net: bigint },
  answer: 'full' | 'notFull' | 'moreThanFull' | 'notKnown' | 'empty',
): boolean {
  const { refrigerant } = judged;
  const fullCharge = fullChargeAt(register, refrigerant, group.occurredAt);
  const reference = fullCharge ?? judged.before;
  const after = massOf(judging.book, refrigerant);
  const over = after - reference;
  if (!judging.isBeyond(over)) return false;
  if (over > 0n) {
    const loss = smaller(over, smaller(judged.before, after));
    if (loss <= 0n) return false;
    judging.postInferredLoss(refrigerant, loss, answer === 'notFull');
    judging.varianceG2 = loss === over ? 0 : flow.additionsVarianceG2 + flow.removalsVarianceG2;
    return true;
  }
  if (answer !== 'full') return false;
  const left = judging.takeBack(refrigerant, -over);
  if (left === 0n) judging.varianceG2 = 0;
  return false;
}

function isSecondIn30Days(last: UnitState['lastLossAtAddition'], group: JudgedGroup): boolean {
  if (last === null || (last.jobId !== null && last.jobId === group.jobId)) return false;
  return group.occurredAt - last.occurredAt <= THIRTY_DAYS_MS;
}

/** How much the book stays below a full charge that somebody says is in the unit; null where that is no contradiction. */
export function shortOfSaidFull(judging: UnitJudging, { register, group, flow }: UnitJudgedAt): bigint | null {
  const said = flow.statement?.is;
  const main = unitRefrigerantAt(register, group.occurredAt);
  if (!judging.known || main === null || (said !== 'full' && said !== 'moreThanFull')) return null;
  const fullCharge = fullChargeAt(register, main, group.occurredAt);
  if (fullCharge === null) return null;
  const short = fullCharge - massOf(judging.book, main);
  return short > 0n && judging.isBeyond(short) ? short : null;
}
