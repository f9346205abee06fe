import type { ScalePlan, ToolPlan } from '../firm-plan.ts';
import { HT } from './firm.ts';

/** One scale a van, each with its own habits: hundredths of a pound, tenths of an ounce, five grams. */
const onVan = { repeatabilityG: 2, spanErrorRelative: 0.0004, offsetG: 2 };

export const SCALES: readonly ScalePlan[] = [
  {
    name: 'Charging scale, van 1',
    serial: 'CS-1187',
    unit: 'oz',
    step: 0.1,
    hoseSteps: 10,
    accuracy: { resolutionG: 2.834952, ...onVan },
    heldBy: HT.dov.id,
    checkedDaysAgo: 96,
  },
  {
    name: 'Charging scale, van 2',
    serial: 'CS-1203',
    unit: 'g',
    step: 5,
    hoseSteps: 6,
    accuracy: { resolutionG: 5, ...onVan },
    heldBy: HT.pia.id,
    checkedDaysAgo: 201,
  },
  {
    name: 'Charging scale, van 3',
    serial: 'CS-1204',
    unit: 'lb',
    step: 0.01,
    hoseSteps: 6,
    accuracy: { resolutionG: 4.535924, ...onVan },
    heldBy: HT.bram.id,
    checkedDaysAgo: 143,
  },
  {
    name: 'Charging scale, van 4',
    serial: 'CS-0992',
    unit: 'oz',
    step: 0.1,
    hoseSteps: 10,
    accuracy: { resolutionG: 2.834952, ...onVan },
    heldBy: HT.junia.id,
    checkedDaysAgo: 339,
  },
  {
    name: 'Platform scale, shop',
    serial: 'PS-0410',
    unit: 'lb',
    step: 0.01,
    hoseSteps: 6,
    accuracy: { resolutionG: 4.535924, repeatabilityG: 3, spanErrorRelative: 0.0004, offsetG: 3 },
    heldBy: null,
    checkedDaysAgo: 58,
  },
];

export const TOOLS: readonly ToolPlan[] = [
  { kind: 'vacuumGauge', name: 'Vacuum gauge, van 1', serial: 'VG-2201', heldBy: HT.dov.id, checkedDaysAgo: 120 },
  { kind: 'vacuumGauge', name: 'Vacuum gauge, van 2', serial: 'VG-2202', heldBy: HT.pia.id, checkedDaysAgo: 118 },
  { kind: 'torqueWrench', name: 'Torque wrench, van 2', serial: 'TW-071', heldBy: HT.pia.id, checkedDaysAgo: 260 },
  { kind: 'gauge', name: 'Manifold gauge, van 3', serial: 'MG-550', heldBy: HT.bram.id, checkedDaysAgo: 75 },
  { kind: 'detector', name: 'Leak detector, van 4', serial: 'LD-1440', heldBy: HT.junia.id, checkedDaysAgo: 33 },
  { kind: 'recoveryMachine', name: 'Recovery machine 1', serial: 'RM-318', heldBy: HT.dov.id, checkedDaysAgo: 188 },
  { kind: 'recoveryMachine', name: 'Recovery machine 2', serial: 'RM-402', heldBy: HT.bram.id, checkedDaysAgo: 90 },
];
