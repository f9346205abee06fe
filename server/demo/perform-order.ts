import { addChargeBasisRequest, createChargeSheetRequest } from '../../shared/charge-sheets/charge-sheet.schema.ts';
import { createCustomerRequest } from '../../shared/customers/customers.schema.ts';
import {
  addTareRequest,
  createCylinderRequest,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import { createJobRequest, updateJobRequest } from '../../shared/jobs/jobs.schema.ts';
import { answerRequest, entryGroupRequest, reversalRequest } from '../../shared/ledger/entry-group.schema.ts';
import { createPartyRequest } from '../../shared/parties/parties.schema.ts';
import { createSiteRequest } from '../../shared/sites/sites.schema.ts';
import { createToolRequest } from '../../shared/tools/tools.schema.ts';
import {
  addFullChargeRequest,
  addLineSetRequest,
  addUnitRefrigerantRequest,
  createUnitRequest,
} from '../../shared/unit-register/unit.schema.ts';
import { createChargeSheet } from '../charge-sheets/charge-sheet.service.ts';
import { createCustomer } from '../customers/customer.service.ts';
import { addTare, createCylinder, updateCylinder } from '../cylinders/cylinder.service.ts';
import { answerGroup } from '../entries/answer-group.service.ts';
import { postEntryGroup } from '../entries/entry-group.service.ts';
import { reverseGroup } from '../entries/reverse-group.service.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { createJob, updateJob } from '../jobs/job.service.ts';
import { createParty } from '../parties/party.service.ts';
import { createSite } from '../sites/site.service.ts';
import { createTool } from '../tools/tool.service.ts';
import { createUnit } from '../units/unit.service.ts';
import { addChargeBasis, addFullCharge, addLineSet, addRefrigerant } from '../units/unit-history.service.ts';
import type { DemoOrder } from './demo-order.ts';

/** Versions of the rows that change, as a screen would know them from its last answer. */
export type Versions = Map<string, number>;

/** Does what a person asked for as their request would: checked by its schema, then handed to the same service. */
export async function performOrder(parts: Parts, actor: Actor, order: DemoOrder, versions: Versions): Promise<void> {
  const versionOf = (id: string): number => versions.get(id) ?? 1;
  switch (order.call) {
    case 'createCustomer':
      return ignore(createCustomer(parts, actor, createCustomerRequest.parse(order.request)));
    case 'createSite':
      return ignore(createSite(parts, actor, createSiteRequest.parse(order.request)));
    case 'createParty':
      return ignore(createParty(parts, actor, createPartyRequest.parse(order.request)));
    case 'createTool':
      return ignore(createTool(parts, actor, createToolRequest.parse(order.request)));
    case 'createCylinder':
      return ignore(createCylinder(parts, actor, createCylinderRequest.parse(order.request)));
    case 'updateCylinder': {
      const { id, request } = order;
      const changed = await updateCylinder(parts, actor, id, versionOf(id), updateCylinderRequest.parse(request));
      versions.set(id, changed.version);
      return;
    }
    case 'addTare':
      return ignore(addTare(parts, actor, order.id, addTareRequest.parse(order.request)));
    case 'createUnit':
      return ignore(createUnit(parts, actor, createUnitRequest.parse(order.request)));
    case 'addFullCharge':
      return ignore(addFullCharge(parts, actor, order.id, addFullChargeRequest.parse(order.request)));
    case 'addRefrigerant':
      return ignore(addRefrigerant(parts, actor, order.id, addUnitRefrigerantRequest.parse(order.request)));
    case 'addLineSet':
      return ignore(addLineSet(parts, actor, order.id, addLineSetRequest.parse(order.request)));
    case 'addChargeBasis':
      return ignore(addChargeBasis(parts, actor, order.id, addChargeBasisRequest.parse(order.request)));
    case 'createChargeSheet':
      return ignore(createChargeSheet(parts, actor, order.id, createChargeSheetRequest.parse(order.request)));
    case 'createJob':
      return ignore(createJob(parts, actor, createJobRequest.parse(order.request)));
    case 'updateJob': {
      const { id, request } = order;
      const changed = await updateJob(parts, actor, id, versionOf(id), updateJobRequest.parse(request));
      versions.set(id, changed.version);
      return;
    }
    case 'postGroup':
      return ignore(postEntryGroup(parts, actor, entryGroupRequest.parse(order.request)));
    case 'reverseGroup':
      return ignore(reverseGroup(parts, actor, order.id, reversalRequest.parse(order.request)));
    case 'answerGroup':
      return ignore(answerGroup(parts, actor, order.id, answerRequest.parse(order.request)));
  }
}

async function ignore(answer: Promise<unknown>): Promise<void> {
  await answer;
}
