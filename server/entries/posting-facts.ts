import type { GroupRecord } from '../../shared/journal/record.schema.ts';
import type { CylinderRegister, CylinderState } from '../../shared/ledger/cylinder-state.ts';
import type { LedgerFlag } from '../../shared/ledger/flag.ts';
import type { JudgedGroup, JudgedStatement } from '../../shared/ledger/judged-group.ts';
import type { MassByRefrigerant } from '../../shared/ledger/mass-by-refrigerant.ts';
import type { Scale } from '../../shared/ledger/scale.ts';
import type { UnitRegister, UnitState } from '../../shared/ledger/unit-state.ts';

/** A flag as it is stored: what has its key is the same flag. */
export interface StoredFlag extends LedgerFlag {
  readonly id: string;
  readonly openedAt: string;
  readonly openedBy: string;
  readonly openedSequence: number;
}

export interface CylinderFacts {
  readonly register: CylinderRegister;
  readonly tag: string;
  readonly book: MassByRefrigerant;
  /** Null: written by other rules, so that the timeline has to be judged from its beginning. */
  readonly state: CylinderState | null;
}

export interface UnitFacts {
  readonly register: UnitRegister;
  readonly tag: string;
  readonly book: MassByRefrigerant;
  readonly state: UnitState | null;
  /** Where it stood from when, in order. */
  readonly sites: readonly { siteId: string; timeZone: string; validFrom: number }[];
}

/** Everything outside its body that a posting is judged by, read while the head is locked. */
export interface PostingFacts {
  readonly firm: { readonly timeZone: string; readonly sequence: number; readonly firstOpenMonth: string | null };
  /** Of the groups to be posted, those that exist already. */
  readonly earlierGroupIds: ReadonlySet<string>;
  readonly cylinders: ReadonlyMap<string, CylinderFacts>;
  readonly units: ReadonlyMap<string, UnitFacts>;
  readonly scales: ReadonlyMap<string, Scale>;
  /** Open flags that say how the places stand; those of replayed places come with their timeline. */
  readonly standingFlags: readonly StoredFlag[];
  /** By `customer:<id>`, `supplier:<id>`, ... */
  readonly parties: ReadonlyMap<string, { id: string; name: string }>;
  readonly jobs: ReadonlyMap<string, { unitId: string }>;
  readonly chargeSheets: ReadonlyMap<string, { unitId: string }>;
  readonly people: ReadonlySet<string>;
}

/** A posted group, as the judge reads it, and what else its records say. */
export interface StoredGroup extends JudgedGroup {
  readonly unitId: string | null;
  readonly siteId: string | null;
  readonly recordedBy: string;
  readonly recordedAt: number;
  readonly openWeighIn: boolean;
  readonly closesGroupId: string | null;
  readonly reversesGroupId: string | null;
  readonly answersGroupId: string | null;
  /** It only carries what judging again changed; nothing was entered with it. */
  readonly isCorrection: boolean;
  /** What it said itself; `statements` has the latest answers. */
  readonly ownStatements: readonly JudgedStatement[];
  readonly reversedByGroupId: string | null;
  /** The closing group that stands. */
  readonly closedByGroupId: string | null;
  readonly entries: readonly StoredEntry[];
}

/** An entered entry with its id, which a reversal names. */
export interface StoredEntry {
  readonly id: string;
  readonly unitId: string | null;
  readonly siteId: string | null;
}

export type RegulatoryPlace = Pick<GroupRecord, 'siteId' | 'regulatoryDay' | 'zoneDataVersion'>;
