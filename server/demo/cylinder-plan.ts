import type { CONTENT_STATES, CYLINDER_KINDS } from '../../shared/cylinders/cylinder.schema.ts';
import type { Typed } from './demo-scale.ts';

/** A cylinder as its collar and its supplier describe it. */
export interface CylinderPlan {
  tag: string;
  kind: (typeof CYLINDER_KINDS)[number];
  refrigerant: string;
  contentState: (typeof CONTENT_STATES)[number];
  tare: Typed;
  /** What the supplier fills in; a recovery cylinder comes empty. */
  filled: Typed | null;
  waterCapacity?: Typed;
  servicePressureKPaGauge?: number;
  /** Calendar days from today to the re-test. */
  retestInDays?: number;
  batch?: string;
  /** The supplier's cylinder, on rent. */
  isRented?: boolean;
  /** Here from the beginning: who has it (null: the shop) and what is in it. Else it is bought when it is needed. */
  atStart?: { heldBy: string | null; content: Typed };
}

/** A cylinder of the plan with what is really in it, which the books may or may not know. */
export interface StockCylinder extends CylinderPlan {
  id: string;
  tareG: number;
  contentG: number;
  limitG: number | null;
  heldBy: string | null;
  /** `planned`: not bought yet; `away`: given back, to be filled again; `spent`: empty for good. */
  state: 'planned' | 'here' | 'away' | 'spent';
  /** Nobody else reaches for it before. */
  busyUntil: number;
  /** Left alone from now on, because its story is told already. */
  isSetAside: boolean;
}
