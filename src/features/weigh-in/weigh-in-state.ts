import type { TypedMass } from '../../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import type { KeyedReading, ReadingUnit } from './scale-reading.ts';

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

/** The first question after it is clear what is being done. */
export const afterPurpose = ({ purpose, asksTarget }: Pick<WeighIn, 'purpose' | 'asksTarget'>): Step => {
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
