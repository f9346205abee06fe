import type { CylinderPlan } from '../cylinder-plan.ts';
import type { DemoModel } from '../demo-model.ts';
import type { Typed } from '../demo-scale.ts';
import type { FirmPlan } from '../firm-plan.ts';
import type { UnitPlan } from '../unit-plan.ts';
import { BK, brenhaven } from './firm.ts';

export const FIRST_DAY = 392;

const kg = (value: string): Typed => ({ value, unit: 'kg' });
const onBus = { resolutionG: 5, repeatabilityG: 2, spanErrorRelative: 0.0004, offsetG: 2 };

const WALL_UNIT: DemoModel = {
  name: 'Norrvane NV-35M',
  factoryCharge: { value: '1200', unit: 'g' },
  manual: { document: 'Norrvane NV-M series, installation manual', page: '26' },
  basis: {
    refrigerant: 'R-32',
    factoryChargeG: 1200,
    precharge: { scope: 'system', lengthM: 7.5 },
    rate: { kind: 'flat', gPerM: 20 },
    metering: 'outdoor',
    limits: { minLengthM: 3, maxLengthM: 25, maxRiseM: 10 },
    rounding: { toG: 1, direction: 'nearest' },
  },
  pipes: [{ liquidOdMm: 6.35, gasOdMm: 9.52 }],
  designPressureHighKPaGauge: 4_150,
  designPressureLowKPaGauge: 2_210,
  subsector: 'residentialLightCommercial',
  roomM2: 16,
};

const there = (unit: Omit<UnitPlan, 'model' | 'beginning' | 'trouble'>): UnitPlan => ({
  ...unit,
  model: null,
  beginning: { kind: 'taken over' },
  trouble: 1,
});
const installed = (
  tag: string,
  name: string,
  siteKey: string,
  daysAgo: number,
  by: string,
  metres: number,
): UnitPlan => ({
  tag,
  name,
  siteKey,
  model: WALL_UNIT,
  refrigerant: 'R-32',
  applianceKind: 'comfortCooling',
  fullCharge: WALL_UNIT.factoryCharge,
  beginning: { kind: 'installed', daysAgo, by, pipe: { lengths: [metres], rise: 3, unit: 'm' } },
  trouble: 1,
});

/** Two of them hold more than 5 t CO2 equivalent: 3.4 kg of R-410A and 4.6 kg of R-449A. */
const UNITS: readonly UnitPlan[] = [
  there({
    tag: 'ZK-1',
    name: 'Airconditioning, kantoor',
    siteKey: 'zilverkade',
    refrigerant: 'R-410A',
    applianceKind: 'comfortCooling',
    subsector: 'other',
    fullCharge: kg('3.4'),
  }),
  there({
    tag: 'ZK-2',
    name: 'Koelcel, expeditie',
    siteKey: 'zilverkade',
    refrigerant: 'R-449A',
    applianceKind: 'commercialRefrigeration',
    fullCharge: kg('4.6'),
  }),
  there({
    tag: 'MB-1',
    name: 'Koelmeubel',
    siteKey: 'molenbakker',
    refrigerant: 'R-134a',
    applianceKind: 'commercialRefrigeration',
    fullCharge: kg('1.1'),
  }),
  installed('MB-2', 'Winkel', 'molenbakker', 301, BK.sanne.id, 12),
  installed('OV-1', 'Woonkamer', 'overtuin', 164, BK.inaki.id, 9.5),
  installed('OV-2', 'Zolder', 'overtuin', 23, BK.inaki.id, 14.2),
];

const refillable = (
  tag: string,
  refrigerant: string,
  filled: string,
  beginning: Pick<CylinderPlan, 'atStart'> = {},
): CylinderPlan => ({
  tag,
  kind: 'refillable',
  refrigerant,
  contentState: 'virgin',
  tare: kg('8.6'),
  filled: kg(filled),
  waterCapacity: kg('14.3'),
  servicePressureKPaGauge: 4_200,
  retestInDays: 1_100,
  isRented: true,
  ...beginning,
});
const recovery = (tag: string, refrigerant: string, retestInDays: number, heldBy: string): CylinderPlan => ({
  tag,
  kind: 'recovery',
  refrigerant,
  contentState: 'recovered',
  tare: kg('9.2'),
  filled: null,
  waterCapacity: kg('14.3'),
  servicePressureKPaGauge: 4_200,
  retestInDays,
  atStart: { heldBy, content: kg('0') },
});

const CYLINDERS: readonly CylinderPlan[] = [
  refillable('B-211', 'R-32', '9', { atStart: { heldBy: BK.sanne.id, content: kg('6.35') } }),
  refillable('B-214', 'R-32', '9'),
  refillable('B-230', 'R-410A', '10'),
  refillable('B-241', 'R-449A', '10'),
  refillable('B-252', 'R-134a', '10', { atStart: { heldBy: null, content: kg('4.8') } }),
  recovery('T-07', 'R-410A', 18, BK.sanne.id),
  recovery('T-09', 'R-449A', 540, BK.inaki.id),
];

export const BRENHAVEN: FirmPlan = {
  demo: brenhaven,
  firstDay: FIRST_DAY,
  town: 'Brenhaven',
  customers: [
    { key: 'zilverkade', name: 'Zilverkade Logistiek', email: 'beheer@zilverkade.example', phone: '555-0201' },
    { key: 'molenbakker', name: 'De Molenbakker', email: 'winkel@molenbakker.example', phone: '555-0214' },
    { key: 'overtuin', name: 'Familie Overtuin', email: null, phone: '555-0233' },
  ],
  sites: [
    { key: 'zilverkade', customer: 'zilverkade', name: 'Loods en kantoor', street: 'Zilverkade 40', altitudeM: 1 },
    { key: 'molenbakker', customer: 'molenbakker', name: 'Bakkerij', street: 'Meelstraat 3', altitudeM: 2 },
    { key: 'overtuin', customer: 'overtuin', name: 'Woonhuis', street: 'Achterdijk 19', altitudeM: -1 },
  ],
  parties: [
    { key: 'gasloods', kind: 'supplier', name: 'Gasloods Brenhaven', note: null },
    { key: 'kringgas', kind: 'reclaimer', name: 'Kringgas Terugwinning', note: null },
  ],
  scales: [
    {
      name: 'Vulweegschaal, bus 1',
      serial: 'VW-31',
      unit: 'g',
      step: 5,
      hoseSteps: 6,
      accuracy: onBus,
      heldBy: BK.sanne.id,
      checkedDaysAgo: 140,
    },
    {
      name: 'Vulweegschaal, bus 2',
      serial: 'VW-32',
      unit: 'kg',
      step: 0.005,
      hoseSteps: 6,
      accuracy: onBus,
      heldBy: BK.inaki.id,
      checkedDaysAgo: 222,
    },
    {
      name: 'Weegschaal, werkplaats',
      serial: 'WW-02',
      unit: 'kg',
      step: 0.005,
      hoseSteps: 6,
      accuracy: onBus,
      heldBy: null,
      checkedDaysAgo: 61,
    },
  ],
  tools: [{ kind: 'detector', name: 'Lekzoeker, bus 1', serial: 'LZ-18', heldBy: BK.sanne.id, checkedDaysAgo: 88 }],
  cylinders: CYLINDERS,
  units: UNITS,
  onEveryVan: 'R-32',
  office: BK.marijke.id,
  storekeeper: BK.marijke.id,
  holderOf: (personId) => personId,
};
