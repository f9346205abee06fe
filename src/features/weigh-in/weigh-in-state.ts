import type { TypedMass } from '../../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { emptyReading, type KeyedReading, type ReadingUnit } from './scale-reading.ts';

/** What is being done; each becomes the kind of the group that is posted. */
export const PURPOSES = ['extraCharge', 'fullRecharge', 'refill', 'adjust'] as const;
export type Purpose = (typeof PURPOSES)[number];
export type Mode = 'gross' | 'zeroed';
/** What becomes of the hose's content at the end. */
export type HoseEnd = 'emptied' | 'lost' | 'recovered';
export type FullAnswer = 'full' | 'notFull' | 'moreThanFull' | 'notKnown';
/** What was pulled down before a full recharge. Only the whole circuit is a statement; lines alone state nothing. */
export type Vacuum = 'whole' | 'lines';

export interface Hose {
  /** Filled and purged when the start reading is taken. */
  full: boolean;
  /** null: too little to count. */
  content: TypedMass | null;
}

/** Ids of one cylinder's part, made when the cylinder is chosen and never again: pressing twice posts once. */
export interface LegIds {
  before: string;
  after: string;
  mass: string;
  hose: string;
}

/** One cylinder's part of a weigh-in, from its start to its end reading. */
export interface Leg {
  ids: LegIds;
  cylinderId: string;
  toolId: string | null;
  mode: Mode;
  unit: ReadingUnit;
  hose: Hose;
  /** What is meant to become of the hose: the stop depends on it. */
  hosePlan: HoseEnd | null;
  start: KeyedReading;
  /** null until the start reading stands. */
  startAt: string | null;
  /** What the scale shows now; with `endAt` it is the end reading. */
  now: KeyedReading;
  endAt: string | null;
  hoseEnd: HoseEnd | null;
  /** Where it was recovered to. */
  hoseInto: string | null;
}

export const STEPS = [
  'purpose',
  'vacuum',
  'target',
  'cylinder',
  'weighing',
  'hose',
  'hosePlan',
  'start',
  'charging',
  'hoseEnd',
  'review',
] as const;
export type Step = (typeof STEPS)[number] | 'leaveOpen' | 'done' | 'leftOpen';

export interface GroupIds {
  vacuum: string;
  fullCharge: string;
  /** What was weighed before the cylinder that is left open. */
  part: string;
  open: string;
  main: string;
}

/** A weigh-in as far as it has come. Plain JSON: it survives a reload, a lost signal and a detour through sign-in. */
export interface WeighIn {
  ids: GroupIds;
  purpose: Purpose | null;
  /** Given with the address: the charge sheet says what is being done and how much. */
  sheetId: string | null;
  /** What the sheet, or the person, says has to go in; null: to a subcooling or superheat, or not said. */
  target: TypedMass | null;
  /** Nobody else says how much: the person is asked. */
  asksTarget: boolean;
  vacuum: Vacuum | null;
  vacuumAt: string | null;
  legs: Leg[];
  /** The cylinder was changed: the next one has not been chosen yet. */
  adding: boolean;
  step: Step;
  answer: FullAnswer | null;
  /** The sheet's total becomes the unit's full charge. */
  setFullCharge: boolean;
  /** Said instead of the time of the end reading. */
  occurredAt: string | null;
  reason: string;
  note: string;
  /** What the server answered, once it is posted: shown until the page is left. */
  posted: EntryGroupResponse[];
}

/** What a technician chose the last time, on this device: the next weigh-in starts with it. */
export interface Habits {
  toolId: string | null;
  mode: Mode;
  unit: ReadingUnit;
  hose: Hose;
  hosePlan: HoseEnd | null;
}

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

export interface WeighInStart {
  ids: GroupIds;
  /** From a charge sheet: what is done and how much. */
  sheet: { id: string; purpose: Purpose; target: TypedMass } | null;
}

export function startWeighIn({ ids, sheet }: WeighInStart): WeighIn {
  const begun: WeighIn = {
    ids,
    purpose: sheet?.purpose ?? null,
    sheetId: sheet?.id ?? null,
    target: sheet?.target ?? null,
    asksTarget: false,
    vacuum: null,
    vacuumAt: null,
    legs: [],
    adding: false,
    step: 'purpose',
    answer: null,
    setFullCharge: true,
    occurredAt: null,
    reason: '',
    note: '',
    posted: [],
  };
  return sheet ? { ...begun, step: afterPurpose(begun) } : begun;
}

const afterPurpose = ({ purpose, asksTarget }: Pick<WeighIn, 'purpose' | 'asksTarget'>): Step => {
  if (purpose === 'fullRecharge') return 'vacuum';
  return asksTarget ? 'target' : 'cylinder';
};

/** Whether there is a hose to ask about. */
export const hasHose = (leg: Leg): boolean => leg.hose.content !== null;

/** The questions of this weigh-in in their order, for the cylinder in hand: what the progress bar counts. */
export function stepsOf(weighIn: WeighIn, begunWithSheet: boolean): Step[] {
  const leg = weighIn.legs.at(-1);
  return STEPS.filter((step) => {
    switch (step) {
      case 'purpose':
        return !begunWithSheet;
      case 'vacuum':
        return weighIn.purpose === 'fullRecharge';
      case 'target':
        return weighIn.asksTarget;
      case 'hosePlan':
        return weighIn.target !== null && (leg === undefined || hasHose(leg));
      case 'hoseEnd':
        return leg === undefined || hasHose(leg);
      default:
        return true;
    }
  });
}

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
