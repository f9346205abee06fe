import type { z } from 'zod';
import type { createPartyRequest } from '../../shared/parties/parties.schema.ts';
import type { createToolRequest } from '../../shared/tools/tools.schema.ts';
import type { CylinderPlan } from './cylinder-plan.ts';
import type { DemoFirm } from './demo-firm.ts';
import type { DemoScale } from './demo-scale.ts';
import type { UnitPlan } from './unit-plan.ts';

export interface CustomerPlan {
  key: string;
  name: string;
  email: string | null;
  phone: string;
}

export interface SitePlan {
  key: string;
  customer: string;
  name: string;
  street: string;
  altitudeM: number;
}

export interface PartyPlan extends Pick<z.input<typeof createPartyRequest>, 'kind' | 'name' | 'note'> {
  key: string;
}

/** `heldBy`: a person's id; null: it stays in the shop. Calendar days since its last check. */
export type ScalePlan = Omit<DemoScale, 'id'> & { heldBy: string | null; checkedDaysAgo: number };

export interface ToolPlan extends Pick<z.input<typeof createToolRequest>, 'name' | 'kind'> {
  serial: string;
  heldBy: string;
  checkedDaysAgo: number;
}

/** What a demo firm has, before anything happens. */
export interface FirmPlan {
  demo: DemoFirm;
  /** Working days ago. */
  firstDay: number;
  town: string;
  customers: readonly CustomerPlan[];
  sites: readonly SitePlan[];
  parties: readonly PartyPlan[];
  scales: readonly ScalePlan[];
  tools: readonly ToolPlan[];
  cylinders: readonly CylinderPlan[];
  units: readonly UnitPlan[];
  /** The refrigerant that each van carries; of others one cylinder goes from hand to hand. */
  onEveryVan: string;
  /** Ids of who enters customers and sites, and who sees to cylinders. */
  office: string;
  storekeeper: string;
  /** Whose van a person loads: an apprentice rides with the one who answers for the work. */
  holderOf(personId: string): string;
}
