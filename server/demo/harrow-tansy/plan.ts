import type { FirmPlan } from '../firm-plan.ts';
import { CYLINDERS } from './cylinders.ts';
import { HT, harrowTansy } from './firm.ts';
import { CUSTOMERS, PARTIES, SITES } from './places.ts';
import { SCALES, TOOLS } from './tools.ts';
import { UNITS } from './units.ts';

/** Three years of working days, and a first day on which everything is entered. */
export const FIRST_DAY = 781;

export const HARROW_TANSY: FirmPlan = {
  demo: harrowTansy,
  firstDay: FIRST_DAY,
  town: 'Wexcombe',
  customers: CUSTOMERS,
  sites: SITES,
  parties: PARTIES,
  scales: SCALES,
  tools: TOOLS,
  cylinders: CYLINDERS,
  units: UNITS,
  onEveryVan: 'R-410A',
  office: HT.ilse.id,
  storekeeper: HT.calder.id,
  holderOf: (personId) => (personId === HT.teo.id ? HT.dov.id : personId),
};
