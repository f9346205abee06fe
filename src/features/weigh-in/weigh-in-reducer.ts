import type { TypedMass } from '../../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { emptyReading, type KeyedReading, type ReadingUnit } from './scale-reading.ts';
import {
  afterPurpose,
  type FullAnswer,
  type Habits,
  type Hose,
  type HoseEnd,
  hasHose,
  type Leg,
  type LegIds,
  type Mode,
  type Purpose,
  type Step,
  type Vacuum,
  type WeighIn,
} from './weigh-in-state.ts';

export type Action =
  | { type: 'purpose'; purpose: Purpose; target: TypedMass | null; sheetId: string | null }
  | { type: 'vacuum'; vacuum: Vacuum; at: string }
  | { type: 'target'; target: TypedMass | null }
  | { type: 'cylinder'; cylinderId: string; ids: LegIds; habits: Habits }
  | { type: 'weighing'; toolId: string | null; mode: Mode; unit: ReadingUnit }
  | { type: 'hose'; hose: Hose }
  | { type: 'hosePlan'; hosePlan: HoseEnd }
  | { type: 'keyStart'; reading: KeyedReading }
  | { type: 'start'; at: string }
  | { type: 'keyNow'; reading: KeyedReading }
  | { type: 'end'; at: string; change: boolean }
  | { type: 'hoseEnd'; hoseEnd: HoseEnd; into: string | null }
  | { type: 'leaveOpen' }
  | { type: 'keepGoing' }
  | { type: 'answer'; answer: FullAnswer }
  | { type: 'say'; part: Partial<Pick<WeighIn, 'reason' | 'note' | 'occurredAt' | 'setFullCharge'>> }
  | { type: 'back' }
  | { type: 'posted'; open: boolean; answers: EntryGroupResponse[] };

/** One thing that was said or read; everything else stays as it was. */
export function weighInReducer(weighIn: WeighIn, action: Action): WeighIn {
  switch (action.type) {
    case 'purpose': {
      const { purpose, target, sheetId } = action;
      const asksTarget = target === null && purpose !== 'adjust';
      const changed = { ...weighIn, purpose, target, asksTarget, sheetId, answer: null };
      return { ...changed, step: afterPurpose(changed) };
    }
    case 'vacuum':
      return {
        ...weighIn,
        vacuum: action.vacuum,
        vacuumAt: weighIn.vacuum === action.vacuum ? weighIn.vacuumAt : action.at,
        step: weighIn.asksTarget ? 'target' : 'cylinder',
      };
    case 'target':
      return { ...weighIn, target: action.target, step: 'cylinder' };
    case 'cylinder':
      return chooseCylinder(weighIn, action);
    case 'weighing': {
      const { toolId, mode, unit } = action;
      return { ...inLeg(weighIn, (leg) => withWeighing(leg, toolId, mode, unit)), step: 'hose' };
    }
    case 'hose': {
      const changed = inLeg(weighIn, (leg) => ({ ...leg, hose: action.hose }));
      const asksPlan = changed.target !== null && action.hose.content !== null;
      return { ...changed, step: asksPlan ? 'hosePlan' : 'start' };
    }
    case 'hosePlan':
      return { ...inLeg(weighIn, (leg) => ({ ...leg, hosePlan: action.hosePlan })), step: 'start' };
    case 'keyStart':
      return inLeg(weighIn, (leg) => ({ ...leg, start: action.reading }));
    case 'start':
      return { ...inLeg(weighIn, (leg) => ({ ...leg, startAt: leg.startAt ?? action.at })), step: 'charging' };
    case 'keyNow':
      return inLeg(weighIn, (leg) => ({ ...leg, now: action.reading }));
    case 'end':
      return endLeg(weighIn, action);
    case 'hoseEnd': {
      const { hoseEnd, into } = action;
      const changed = inLeg(weighIn, (leg) => ({ ...leg, hoseEnd, hoseInto: into }));
      return afterHose(changed);
    }
    case 'leaveOpen':
      return { ...weighIn, step: 'leaveOpen' };
    case 'keepGoing':
      return { ...weighIn, step: 'charging' };
    case 'answer':
      return { ...weighIn, answer: action.answer };
    case 'say':
      return { ...weighIn, ...action.part };
    case 'back':
      return stepBack(weighIn);
    case 'posted':
      return { ...weighIn, step: action.open ? 'leftOpen' : 'done', posted: action.answers };
  }
}

/** The change of cylinder waits for the question about the hose; it is kept in `adding` only once that is answered. */
const afterHose = (weighIn: WeighIn): WeighIn =>
  weighIn.legs.at(-1)?.endAt === null ? weighIn : { ...weighIn, step: weighIn.adding ? 'cylinder' : 'review' };

function inLeg(weighIn: WeighIn, change: (leg: Leg) => Leg): WeighIn {
  const last = weighIn.legs.length - 1;
  return { ...weighIn, legs: weighIn.legs.map((leg, index) => (index === last ? change(leg) : leg)) };
}

function chooseCylinder(weighIn: WeighIn, action: Extract<Action, { type: 'cylinder' }>): WeighIn {
  const { cylinderId, ids, habits } = action;
  const last = weighIn.legs.at(-1);
  if (!weighIn.adding && last) {
    // Another cylinder than was chosen first: what was read belongs to that one.
    const kept = last.cylinderId === cylinderId ? last : { ...last, cylinderId, ...unread(last.unit) };
    return { ...weighIn, legs: [...weighIn.legs.slice(0, -1), kept], step: 'weighing' };
  }
  // The second cylinder is weighed as the first was; its hose starts as that of a new connection.
  const like: Habits = last ? { ...habits, ...last, hose: { ...last.hose, full: false } } : habits;
  const leg: Leg = {
    ids,
    cylinderId,
    toolId: like.toolId,
    mode: like.mode,
    unit: like.unit,
    hose: like.hose,
    hosePlan: like.hosePlan,
    hoseEnd: null,
    hoseInto: null,
    ...unread(like.unit),
  };
  return { ...weighIn, legs: [...weighIn.legs, leg], adding: false, step: 'weighing' };
}

const unread = (unit: ReadingUnit) => ({
  start: emptyReading(unit),
  startAt: null,
  now: emptyReading(unit),
  endAt: null,
});

function withWeighing(leg: Leg, toolId: string | null, mode: Mode, unit: ReadingUnit): Leg {
  const same = leg.mode === mode && leg.unit === unit;
  return { ...leg, toolId, mode, unit, ...(same ? {} : unread(unit)) };
}

function endLeg(weighIn: WeighIn, { at, change }: Extract<Action, { type: 'end' }>): WeighIn {
  const ended = inLeg({ ...weighIn, adding: change }, (leg) => ({ ...leg, endAt: at }));
  const leg = ended.legs.at(-1);
  return leg && hasHose(leg) ? { ...ended, step: 'hoseEnd' } : afterHose(ended);
}

function stepBack(weighIn: WeighIn): WeighIn {
  const { step, legs } = weighIn;
  const last = legs.at(-1);
  const backIntoCharging = (): WeighIn => ({
    ...inLeg({ ...weighIn, adding: false }, (leg) => ({ ...leg, endAt: null })),
    step: 'charging',
  });
  switch (step) {
    case 'cylinder':
      if (weighIn.adding) return last && hasHose(last) ? { ...weighIn, step: 'hoseEnd' } : backIntoCharging();
      if (legs.length > 1) {
        const earlier = { ...weighIn, legs: legs.slice(0, -1), adding: true };
        return stepBack(earlier);
      }
      return { ...weighIn, step: beforeCylinder(weighIn) };
    case 'hoseEnd':
    case 'leaveOpen':
      return backIntoCharging();
    case 'review':
      return last && hasHose(last) ? { ...weighIn, step: 'hoseEnd' } : backIntoCharging();
    case 'charging':
      return { ...inLeg(weighIn, (leg) => ({ ...leg, startAt: null })), step: 'start' };
    case 'start':
      return { ...weighIn, step: last && hasHose(last) && weighIn.target !== null ? 'hosePlan' : 'hose' };
    case 'hosePlan':
      return { ...weighIn, step: 'hose' };
    case 'hose':
      return { ...weighIn, step: 'weighing' };
    case 'weighing':
      return { ...weighIn, step: 'cylinder' };
    case 'target':
      return { ...weighIn, step: weighIn.purpose === 'fullRecharge' ? 'vacuum' : 'purpose' };
    case 'vacuum':
      return { ...weighIn, step: 'purpose' };
    default:
      return weighIn;
  }
}

const beforeCylinder = ({ purpose, asksTarget }: WeighIn): Step =>
  asksTarget ? 'target' : purpose === 'fullRecharge' ? 'vacuum' : 'purpose';
