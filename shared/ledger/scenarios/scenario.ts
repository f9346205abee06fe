import type { EmptyBy, EntryGroupRequest, HowKnown } from '../entry-group.schema.ts';
import type { FlagCode } from '../flag.ts';
import type { AtmosphereKind } from '../place.ts';

/**
 * The 66 hand-worked cases of the log, as data: what is entered has the form of the `POST /entry-groups` body, with
 * symbols (`C1`, `U`, `a`) where the body has ids, so that the judge, the server and its database can be held against
 * the same figures. Masses are grams as decimal text; where no refrigerant is named it is R-410A.
 */
export interface Scenario {
  readonly id: string;
  readonly title: string;
  readonly cases: readonly ScenarioCase[];
}

export interface ScenarioCase {
  /** `S1.2`: scenario and case; a scenario of one case counts it as 1. */
  readonly id: string;
  readonly title: string;
  readonly start: ScenarioStart;
  readonly steps: readonly ScenarioStep[];
  readonly end: ScenarioEnd;
}

export interface ScenarioStart {
  readonly cylinders: Readonly<Record<string, StartCylinder>>;
  readonly units: Readonly<Record<string, StartUnit>>;
  /** Posted before the case begins, after the openings; nothing is expected of them but the books. */
  readonly history?: readonly SymbolicGroup[];
}

export interface StartCylinder {
  readonly refrigerant: string;
  readonly tareG: string;
  readonly nonRefillable: boolean;
  /** An opening entry of this mass; null: nothing says yet what it holds. */
  readonly contentG: string | null;
}

export interface StartUnit {
  readonly refrigerant: string;
  readonly initial: { readonly state: 'factory' | 'opening'; readonly massG: string } | { readonly state: 'notKnown' };
  readonly fullChargeG: string | null;
}

type Body = Omit<EntryGroupRequest, 'schema' | 'deviceSentAt' | 'readings' | 'entries'>;
type BodyReading = NonNullable<EntryGroupRequest['readings']>[number];
type BodyEntry = NonNullable<EntryGroupRequest['entries']>[number];
export type SymbolicReading = Omit<BodyReading, 'id'>;
export type SymbolicEntry = Omit<BodyEntry, 'id'>;
/** A body whose ids are symbols and whose entries and readings have none yet. */
export type SymbolicGroup = Body & { readings: SymbolicReading[]; entries: SymbolicEntry[] };

/** What somebody does. `recordId` stands for the `groupId` of a reversal or the id of a register change. */
export type ScenarioAct =
  | { readonly act: 'post'; readonly group: SymbolicGroup }
  | {
      readonly act: 'reverse';
      readonly recordId: string;
      readonly of: string;
      readonly replacement: SymbolicGroup | null;
    }
  | {
      readonly act: 'answer';
      readonly recordId: string;
      readonly of: string;
      readonly statement: NonNullable<EntryGroupRequest['statements']>[number];
    }
  | {
      readonly act: 'tare';
      readonly recordId: string;
      readonly cylinder: string;
      readonly tareG: string;
      readonly validFrom: string;
    }
  | {
      readonly act: 'fullCharge';
      readonly recordId: string;
      readonly unit: string;
      readonly refrigerant: string;
      readonly massG: string;
      readonly validFrom: string;
      readonly jobId: string | null;
    }
  | {
      readonly act: 'refrigerant';
      readonly recordId: string;
      readonly unit: string;
      readonly refrigerant: string;
      readonly validFrom: string;
    }
  | { readonly act: 'closeMonth'; readonly month: string }
  /** Something that the log does not hear of: a vacuum on the lines only, a unit moved with its charge. */
  | { readonly act: 'nothing' };

export interface ScenarioStep {
  readonly step: string;
  readonly entered: string;
  readonly does: ScenarioAct;
  readonly refused?: { readonly code: string; readonly givenG: string; readonly allowedG: string };
  /** Every entry that the step posts, in any order. */
  readonly posted: readonly PostedLine[];
  readonly books: Readonly<Record<string, ExpectedBook>>;
  /** Every flag that is open after the step. */
  readonly open: readonly OpenFlag[];
}

export interface PostedLine {
  readonly from: string;
  readonly to: string;
  readonly refrigerant: string;
  readonly massG: string;
  readonly addedByServer: boolean;
  /** The step whose group is judged again, or reversed. */
  readonly corrects: string | null;
  readonly atLeast: boolean;
  readonly takenBack: boolean;
  /** Where the case turns on it: the month it is booked in, and that it is late. */
  readonly bookedLateIn?: string;
}

/** Grams by refrigerant; `known: false` for a unit of which only the sum of masses is known. */
export interface ExpectedBook {
  readonly known: boolean;
  readonly byRefrigerant: Readonly<Record<string, string>>;
}

export interface OpenFlag {
  readonly code: FlagCode;
  readonly about: string;
  readonly massG: string | null;
}

export interface ScenarioEnd {
  readonly emissions: readonly ExpectedEmission[];
  /** Above zero, summed over the groups of one job. */
  readonly counted: readonly { readonly unit: string; readonly massG: string; readonly on?: string }[];
  /** Difference and party places that are not zero; `supplier`, `factory` and `opening` are left out. */
  readonly places: Readonly<Record<string, ExpectedBook>>;
}

export interface ExpectedEmission {
  readonly as: AtmosphereKind;
  readonly refrigerant: string;
  readonly massG: string;
  readonly atLeastG: string;
}

export type { EmptyBy, HowKnown };
