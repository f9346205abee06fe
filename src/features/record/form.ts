import type { Signal } from '../../ui/caution.tsx';
import type { Answers, FormContext } from './answers.ts';
import type { Complaint } from './complaints.ts';
import type { BuiltGroup } from './group-draft.ts';
import type { UnitChange } from './unit-change.ts';

/** A hazard, said at the question where it is met. */
export interface SaidCaution {
  signal: Signal;
  key: string;
}

interface Asked {
  /** Names the question in the catalogue: `record.ask.<id>`. */
  id: string;
  cautions?: readonly SaidCaution[];
}

/** Which way refrigerant goes, seen from the cylinders of the question. `once`: each is weighed once, or taken by its book. */
export type RowDirection = 'into' | 'outOf' | 'transfer' | 'once';

export type Question =
  | (Asked & { is: 'unit' })
  | (Asked & { is: 'choice'; options: readonly string[]; wrong?: Complaint | undefined })
  | (Asked & { is: 'site' })
  | (Asked & { is: 'emptied' })
  | (Asked & { is: 'refrigerant' })
  | (Asked & { is: 'fullCharge' })
  | (Asked & { is: 'rows'; direction: RowDirection; many: boolean; hose: boolean; byBook?: boolean })
  | (Asked & { is: 'mass' })
  | (Asked & { is: 'party'; of: 'supplier' | 'reclaimer' | 'otherContractor' | 'customer' })
  | (Asked & { is: 'document'; required: boolean; dated: boolean })
  | (Asked & { is: 'certified' })
  | (Asked & { is: 'level' })
  | (Asked & { is: 'purchase' })
  | (Asked & { is: 'fullness' })
  | (Asked & { is: 'reason' })
  | (Asked & { is: 'text'; required: boolean })
  | (Asked & { is: 'moment' });

export const FORM_KINDS = [
  'recovery',
  'foundEmpty',
  'vacuum',
  'refill',
  'putBack',
  'traceCharge',
  'customerRefrigerant',
  'otherContractor',
  'partialRecovery',
  'overchargeRemoved',
  'transfer',
  'heelRemoved',
  'reclaim',
  'destruction',
  'certificate',
  'return',
  'lend',
  'invoice',
  'warrantyReplacement',
  'relocation',
  'retrofit',
  'handOver',
  'loss',
  'found',
] as const;
export type FormKind = (typeof FORM_KINDS)[number];

/** A row of the log's table as a form: what is asked, and what the answers post. Pure: no clock, no network, no ids of its own. */
export interface RecordForm {
  kind: FormKind;
  /** What it is about, and so where it is offered. */
  about: 'unit' | 'cylinder' | 'papers';
  /** How many cylinders the form begins with. */
  rows: number;
  permission: 'entries:post' | 'registers:correct';
  questions: (answers: Answers, context: FormContext) => readonly Question[];
  build: (answers: Answers, context: FormContext) => BuiltGroup;
  /** What holds of the unit from then on, in this order and before the group. */
  changes?: (answers: Answers, context: FormContext) => readonly UnitChange[];
  /** It is told by the register alone: no group is posted, nothing stands in the log. */
  onlyRegister?: true;
  /** What has happened is true but moves no mass and states nothing: the key of the sentence that says so. */
  nothingToPost?: (answers: Answers, context: FormContext) => string | null;
}
