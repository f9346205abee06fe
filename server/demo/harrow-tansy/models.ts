import { LENGTH_FACTORS, MASS_PER_LENGTH_FACTORS, PRESSURE_FACTORS } from '../../../shared/units/factors.ts';
import { roundTo } from '../../../shared/units/round.ts';
import type { DemoModel } from '../demo-model.ts';
import { gramsOf } from '../demo-scale.ts';

const feet = (length: number): number => roundTo(length * LENGTH_FACTORS.ft.perUnit.valueOf(), 4);
const ozPerFt = (rate: number): number => roundTo(rate * MASS_PER_LENGTH_FACTORS['oz/ft'].perUnit.valueOf(), 4);
const psi = (pressure: number): number => roundTo(pressure * PRESSURE_FACTORS.psi.perUnit.valueOf(), 0);
const ounces = (mass: number): number => roundTo(gramsOf({ value: String(mass), unit: 'oz' }), 3);

const QUARTER = 6.35;
const THREE_EIGHTHS = 9.525;
const HALF = 12.7;
const FIVE_EIGHTHS = 15.875;

const toTenthOfAnOunce = { toG: ounces(0.1), direction: 'nearest' as const };
const longest = (ft: number, riseFt: number) => ({
  minLengthM: feet(10),
  maxLengthM: feet(ft),
  maxRiseM: feet(riseFt),
});
const highSide = { designPressureHighKPaGauge: psi(550), designPressureLowKPaGauge: psi(320) };

/** Invented makers, machines and manuals; each kind of rate that manuals have. */
export const MODELS = {
  nv09: {
    name: 'Norrvane NV-09',
    factoryCharge: { value: '33.5', unit: 'oz' },
    manual: { document: 'Norrvane NV series, installation manual, 3rd issue', page: '31' },
    basis: {
      refrigerant: 'R-410A',
      factoryChargeG: ounces(33.5),
      precharge: { scope: 'system', lengthM: feet(25) },
      rate: { kind: 'flat', gPerM: ozPerFt(0.22) },
      metering: 'outdoor',
      limits: longest(66, 40),
      rounding: toTenthOfAnOunce,
    },
    pipes: [{ liquidOdMm: QUARTER, gasOdMm: THREE_EIGHTHS }],
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: null,
  },
  nv12: {
    name: 'Norrvane NV-12E',
    factoryCharge: { value: '28.2', unit: 'oz' },
    manual: { document: 'Norrvane NV-E series, installation manual, 1st issue', page: '28' },
    basis: {
      refrigerant: 'R-32',
      factoryChargeG: ounces(28.2),
      precharge: { scope: 'system', lengthM: feet(25) },
      rate: { kind: 'flat', gPerM: ozPerFt(0.16) },
      metering: 'outdoor',
      limits: longest(66, 40),
      rounding: toTenthOfAnOunce,
    },
    pipes: [{ liquidOdMm: QUARTER, gasOdMm: THREE_EIGHTHS }],
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: 18,
  },
  tm18: {
    name: 'Tessamere TM-18',
    factoryCharge: { value: '52.9', unit: 'oz' },
    manual: { document: 'Tessamere TM wall units, installation, section C', page: 'C-12' },
    basis: {
      refrigerant: 'R-410A',
      factoryChargeG: ounces(52.9),
      precharge: { scope: 'system', lengthM: feet(25) },
      rate: {
        kind: 'byLiquidPipe',
        sizes: [
          { liquidOdMm: QUARTER, gPerM: ozPerFt(0.22) },
          { liquidOdMm: THREE_EIGHTHS, gPerM: ozPerFt(0.54) },
        ],
      },
      metering: 'outdoor',
      limits: longest(98, 50),
      rounding: toTenthOfAnOunce,
    },
    pipes: [{ liquidOdMm: THREE_EIGHTHS, gasOdMm: FIVE_EIGHTHS }],
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: null,
  },
  tm24: {
    name: 'Tessamere TM-24L',
    factoryCharge: { value: '61.7', unit: 'oz' },
    manual: { document: 'Tessamere TM-L wall units, installation, table 7', page: '44' },
    basis: {
      refrigerant: 'R-454B',
      factoryChargeG: ounces(61.7),
      rate: {
        kind: 'stepped',
        steps: [
          { upToM: feet(25), extraG: 0 },
          { upToM: feet(49), extraG: ounces(8.8) },
          { upToM: feet(98), extraG: ounces(17.6) },
        ],
      },
      metering: 'outdoor',
      limits: longest(98, 50),
      rounding: toTenthOfAnOunce,
    },
    pipes: [{ liquidOdMm: QUARTER, gasOdMm: HALF }],
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: 26,
  },
  br27: {
    name: 'Brindlewick BR-27 multi',
    factoryCharge: { value: '91.7', unit: 'oz' },
    manual: { document: 'Brindlewick BR multi systems, installation and service', page: '57' },
    basis: {
      refrigerant: 'R-410A',
      factoryChargeG: ounces(91.7),
      precharge: { scope: 'systemPerBranch', lengthM: feet(25) },
      rate: { kind: 'flat', gPerM: ozPerFt(0.22) },
      metering: 'outdoor',
      limits: { minLengthM: feet(30), maxLengthM: feet(230), maxBranchM: feet(82), maxRiseM: feet(49) },
      rounding: toTenthOfAnOunce,
    },
    pipes: Array.from({ length: 3 }, () => ({ liquidOdMm: QUARTER, gasOdMm: THREE_EIGHTHS })),
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: null,
  },
  br36: {
    name: 'Brindlewick BR-36L multi',
    factoryCharge: { value: '84.7', unit: 'oz' },
    manual: { document: 'Brindlewick BR-L multi systems, installation and service', page: '61' },
    basis: {
      refrigerant: 'R-32',
      factoryChargeG: ounces(84.7),
      precharge: { scope: 'systemPerBranch', lengthM: feet(25) },
      rate: { kind: 'formula', expression: 'max(0, 15 * (L635 + L952 - Lp)) + 20 * L952' },
      metering: 'outdoor',
      allowances: [{ label: 'ceiling cassette', gEach: 30, count: 1 }],
      limits: { minLengthM: feet(30), maxLengthM: feet(230), maxBranchM: feet(82), maxRiseM: feet(49) },
      rounding: toTenthOfAnOunce,
    },
    pipes: [
      { liquidOdMm: QUARTER, gasOdMm: THREE_EIGHTHS },
      { liquidOdMm: QUARTER, gasOdMm: THREE_EIGHTHS },
      { liquidOdMm: THREE_EIGHTHS, gasOdMm: FIVE_EIGHTHS },
    ],
    ...highSide,
    subsector: 'residentialLightCommercial',
    roomM2: 30,
  },
} as const satisfies Record<string, DemoModel>;
