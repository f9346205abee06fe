import type { DemoModel } from '../demo-model.ts';
import type { Typed } from '../demo-scale.ts';
import type { UnitPlan } from '../unit-plan.ts';
import { HT, type HtKey } from './firm.ts';
import { MODELS } from './models.ts';

const ductless = (
  site: string,
  tag: string,
  name: string,
  model: DemoModel,
  beginning: UnitPlan['beginning'],
  trouble: number,
  fullCharge: Typed | null = model.factoryCharge,
): UnitPlan => ({
  tag,
  name,
  siteKey: site,
  model,
  refrigerant: model.basis.refrigerant,
  applianceKind: 'comfortCooling',
  fullCharge,
  beginning,
  trouble,
});

const takenOver = { kind: 'taken over' } as const;
const installed = (daysAgo: number, by: HtKey, lengths: readonly number[], rise = 8): UnitPlan['beginning'] => ({
  kind: 'installed',
  daysAgo,
  by: HT[by].id,
  pipe: { lengths, rise, unit: 'ft' },
});

/** Refrigeration, rooftops and other machines that were there before. */
const plant = (
  site: string,
  tag: string,
  name: string,
  refrigerant: string,
  fullCharge: Typed | null,
  more: Partial<UnitPlan> & Pick<UnitPlan, 'trouble'>,
): UnitPlan => ({
  tag,
  name,
  siteKey: site,
  model: null,
  refrigerant,
  applianceKind: 'comfortCooling',
  subsector: 'other',
  fullCharge,
  beginning: takenOver,
  ...more,
});
const lb = (value: string): Typed => ({ value, unit: 'lb' });
const cold = { applianceKind: 'commercialRefrigeration', subsector: null } as const;

const { nv09, nv12, tm18, tm24, br27, br36 } = MODELS;
const flat = (number: number) => `Apartment ${number}`;

const LANTERN_ROW: UnitPlan[] = [
  ...[101, 102, 103, 104].map((number) => ductless('lanternA', `A${number}`, flat(number), nv09, takenOver, 1.2)),
  ...[201, 202, 203, 204].map((number) => ductless('lanternA', `A${number}`, flat(number), tm18, takenOver, 1.1)),
  ductless('lanternB', 'B101', flat(101), nv09, installed(701, 'dov', [31]), 0.8),
  ductless('lanternB', 'B102', flat(102), nv09, installed(696, 'pia', [38]), 1.2),
  ductless('lanternB', 'B103', flat(103), nv09, installed(690, 'dov', [22]), 0.6),
  ductless('lanternB', 'B104', flat(104), tm18, installed(655, 'junia', [47]), 1),
  ductless('lanternB', 'B201', flat(201), tm18, installed(640, 'bram', [58], 16), 0.9),
  ductless('lanternB', 'B202', flat(202), tm18, installed(612, 'pia', [36], 16), 0.9),
  ductless('lanternB', 'B203', flat(203), nv12, installed(570, 'dov', [41], 16), 0.9),
  ductless('lanternB', 'B204', flat(204), nv12, installed(560, 'junia', [29], 16), 0.7),
  ductless('lanternC', 'C101', flat(101), tm24, installed(205, 'dov', [34]), 0.5),
  ductless('lanternC', 'C102', flat(102), tm24, installed(198, 'pia', [28]), 0.6),
  ductless('lanternC', 'C103', flat(103), tm24, installed(171, 'bram', [52]), 0.7),
  ductless('lanternC', 'C104', flat(104), nv12, installed(150, 'junia', [45]), 0.5),
  ductless('lanternC', 'C201', flat(201), tm24, installed(112, 'dov', [61], 18), 0.4),
  ductless('lanternC', 'C202', flat(202), nv12, installed(84, 'pia', [33], 18), 0.4),
  ductless('lanternC', 'C203', flat(203), tm24, installed(41, 'bram', [44], 18), 0),
  ductless('lanternC', 'C204', flat(204), nv12, installed(19, 'junia', [37], 18), 0),
];

const TOWN: UnitPlan[] = [
  plant('townHall', 'TH-VRF', 'Variable flow system, council wing', 'R-410A', lb('38'), {
    subsector: 'variableRefrigerantFlow',
    trouble: 0.9,
  }),
  ductless('townHall', 'TH-2', 'Records room', nv09, takenOver, 1.4),
  ductless('townHall', 'TH-3', 'Clerk’s office', nv09, takenOver, 1.1),
  ductless('townHall', 'TH-4', 'Server closet', nv12, installed(480, 'pia', [55]), 1),
  ductless('townHall', 'TH-5', 'Meeting room', br36, installed(322, 'dov', [48, 36, 44]), 0.6),
  plant('library', 'LB-1', 'Rooftop, reading room', 'R-410A', lb('22'), { trouble: 1.2 }),
  ductless('library', 'LB-2', 'Children’s room', tm18, installed(540, 'bram', [62]), 1),
  ductless('library', 'LB-3', 'Archive', nv09, installed(420, 'junia', [35]), 1.1),
  ductless('library', 'LB-4', 'Office', nv12, installed(262, 'pia', [27]), 0.5),
  plant('fireHouse', 'FH-1', 'Split system, day room', 'R-22', lb('7.5'), {
    subsector: 'residentialLightCommercial',
    trouble: 0,
  }),
  ductless('fireHouse', 'FH-2', 'Bunk room', nv12, installed(233, 'bram', [92]), 0),
  ductless('fireHouse', 'FH-3', 'Watch office', nv09, { kind: 'not known', heldG: 720 }, 0.9),
];

const GROCERS: UnitPlan[] = [
  plant('grocerNorth', 'RK-A', 'Rack A, medium temperature', 'R-404A', lb('210'), { ...cold, trouble: 0 }),
  plant('grocerNorth', 'RK-B', 'Rack B, low temperature', 'R-448A', lb('140'), { ...cold, trouble: 0 }),
  plant('grocerNorth', 'CU-1', 'Walk-in freezer', 'R-404A', lb('18'), { ...cold, trouble: 1.6 }),
  plant('grocerNorth', 'CU-2', 'Walk-in cooler, dairy', 'R-134a', lb('12'), { ...cold, trouble: 1.1 }),
  plant('grocerNorth', 'IM-1', 'Ice machine', 'R-404A', lb('3'), { ...cold, trouble: 0.9 }),
  plant('grocerNorth', 'RT-1', 'Rooftop, sales floor', 'R-410A', lb('16'), { trouble: 1 }),
  plant('grocerSouth', 'RK-C', 'Rack C', 'R-449A', lb('96'), { ...cold, trouble: 0 }),
  plant('grocerSouth', 'CU-3', 'Walk-in cooler', 'R-134a', lb('9'), { ...cold, trouble: 1.2 }),
  plant('grocerSouth', 'CU-4', 'Walk-in freezer', 'R-404A', lb('16'), { ...cold, trouble: 1.4 }),
  plant('grocerSouth', 'IM-2', 'Ice machine', 'R-404A', null, {
    ...cold,
    beginning: { kind: 'not known', heldG: 1200 },
    trouble: 0.6,
  }),
];

const OTHERS: UnitPlan[] = [
  plant('bakery', 'BK-1', 'Walk-in cooler, dough', 'R-404A', lb('9'), { ...cold, trouble: 1.3 }),
  ductless('bakery', 'BK-2', 'Prep room', nv09, installed(515, 'dov', [33]), 1.2),
  ductless('bakery', 'BK-3', 'Shop', tm18, installed(509, 'dov', [40]), 0.8),
  ductless('dental', 'DN-1', 'Treatment rooms', br27, installed(452, 'junia', [42, 38, 51]), 0.9),
  ductless('dental', 'DN-2', 'Waiting room', nv09, installed(447, 'junia', [30]), 0.8),
  plant('school', 'SC-1', 'Rooftop, gym', 'R-410A', lb('24'), { trouble: 1.3 }),
  plant('school', 'SC-2', 'Rooftop, hall', 'R-410A', lb('19'), { trouble: 0.8 }),
  ductless('school', 'SC-3', 'Staff room', nv09, { kind: 'not known', heldG: 640 }, 0.7, null),
  ductless('school', 'SC-4', 'Computer room', nv09, { kind: 'not known', heldG: 810 }, 0, null),
  plant('inn', 'IN-1', 'Split system, dining room', 'R-407C', lb('8'), { trouble: 1.1 }),
  plant('inn', 'IN-2', 'Walk-in cooler', 'R-134a', lb('6'), { ...cold, trouble: 1 }),
  ductless('inn', 'IN-3', 'Kitchen office', nv09, installed(366, 'pia', [44]), 1),
  ductless('quillon', 'Q-1', 'Whole house', br36, installed(288, 'junia', [39, 45, 58], 12), 0.5),
  plant('tarrow', 'T-1', 'Wall unit, make not legible', 'R-410A', null, {
    subsector: 'residentialLightCommercial',
    beginning: { kind: 'not known', heldG: 900, daysAgo: 131 },
    nameplateReadable: false,
    trouble: 0,
  }),
];

/** Sixty circuits on fourteen sites. */
export const UNITS: readonly UnitPlan[] = [...LANTERN_ROW, ...TOWN, ...GROCERS, ...OTHERS];
