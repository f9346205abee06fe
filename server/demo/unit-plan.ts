import type { z } from 'zod';
import type { createUnitRequest } from '../../shared/unit-register/unit.schema.ts';
import type { DemoModel } from './demo-model.ts';
import type { Typed } from './demo-scale.ts';

/** Lengths of the branches one way, as measured, and how far the indoor units stand above the outdoor unit. */
export interface PipeRun {
  lengths: readonly number[];
  rise: number;
  unit: 'ft' | 'm';
}

/** A unit as the firm came to know it. */
export interface UnitPlan {
  tag: string;
  name: string;
  siteKey: string;
  /** Of the catalogue; null: a machine that was there before, of which only the nameplate is known. */
  model: DemoModel | null;
  refrigerant: string;
  applianceKind: z.input<typeof createUnitRequest>['applianceKind'];
  subsector?: z.input<typeof createUnitRequest>['subsector'];
  /** As determined; null: not known. */
  fullCharge: Typed | null;
  /** `installed`: ours, on its day; `taken over`: in order on the first day; `not known`: what it holds, nobody knows. */
  beginning:
    | { kind: 'installed'; daysAgo: number; by: string; pipe: PipeRun }
    | { kind: 'taken over' }
    | { kind: 'not known'; heldG: number; daysAgo?: number };
  nameplateReadable?: boolean;
  /** How often it gives trouble, against the others. */
  trouble: number;
}

/** A unit of the plan with what is really in it. */
export interface FieldUnit extends UnitPlan {
  id: string;
  /** What it shall hold. */
  fullG: number;
  contentG: number;
  isThere: boolean;
  /** Working days ago on which somebody is there, planned or done. */
  visits: number[];
}
