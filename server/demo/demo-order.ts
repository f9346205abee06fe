import type { z } from 'zod';
import type {
  addChargeBasisRequest,
  createChargeSheetRequest,
} from '../../shared/charge-sheets/charge-sheet.schema.ts';
import type { createCustomerRequest } from '../../shared/customers/customers.schema.ts';
import type {
  addTareRequest,
  createCylinderRequest,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import type { createJobRequest, updateJobRequest } from '../../shared/jobs/jobs.schema.ts';
import type { answerRequest, entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { createPartyRequest } from '../../shared/parties/parties.schema.ts';
import type { createSiteRequest } from '../../shared/sites/sites.schema.ts';
import type { createToolRequest } from '../../shared/tools/tools.schema.ts';
import type {
  addFullChargeRequest,
  addLineSetRequest,
  addUnitRefrigerantRequest,
  createUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';

export type GroupBody = z.input<typeof entryGroupRequest>;

/** What a person of a demo firm asks the server for: the body that their screen would send. */
export type DemoOrder =
  | { call: 'createCustomer'; request: z.input<typeof createCustomerRequest> }
  | { call: 'createSite'; request: z.input<typeof createSiteRequest> }
  | { call: 'createParty'; request: z.input<typeof createPartyRequest> }
  | { call: 'createTool'; request: z.input<typeof createToolRequest> }
  | { call: 'createCylinder'; request: z.input<typeof createCylinderRequest> }
  | { call: 'updateCylinder'; id: string; request: z.input<typeof updateCylinderRequest> }
  | { call: 'addTare'; id: string; request: z.input<typeof addTareRequest> }
  | { call: 'createUnit'; request: z.input<typeof createUnitRequest> }
  | { call: 'addFullCharge'; id: string; request: z.input<typeof addFullChargeRequest> }
  | { call: 'addRefrigerant'; id: string; request: z.input<typeof addUnitRefrigerantRequest> }
  | { call: 'addLineSet'; id: string; request: z.input<typeof addLineSetRequest> }
  | { call: 'addChargeBasis'; id: string; request: z.input<typeof addChargeBasisRequest> }
  | { call: 'createChargeSheet'; id: string; request: z.input<typeof createChargeSheetRequest> }
  | { call: 'createJob'; request: z.input<typeof createJobRequest> }
  | { call: 'updateJob'; id: string; request: z.input<typeof updateJobRequest> }
  | { call: 'postGroup'; request: GroupBody }
  | { call: 'reverseGroup'; id: string; request: z.input<typeof reversalRequest> }
  | { call: 'answerGroup'; id: string; request: z.input<typeof answerRequest> };

/** An order with whose it is and when it reaches the server. */
export interface DiaryLine {
  recordedAt: Date;
  /** A person's id. */
  by: string;
  order: DemoOrder;
}
