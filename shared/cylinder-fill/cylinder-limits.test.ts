import { describe, expect, it } from 'vitest';
import table from '../../data/cylinder-filling.json';
import { referenceData } from '../reference/reference-data.fixture.ts';
import { liquidDensityKgM3, saturationKPaAbs } from '../reference/saturation.ts';
import { fromBase, toBase } from '../units/quantities.ts';
import { cylinderFill } from './cylinder-fill.ts';
import { cylinderLimit, pressureRatingHolds, ratingPressureKPaGauge } from './cylinder-limits.ts';
import { fillingTable } from './filling-table.ts';

const waterCapacityG = toBase('mass', 'lb', 47.7);
const lb = (micrograms: bigint | null) =>
  micrograms === null ? null : fromBase('mass', 'lb', Number(micrograms) / 1e6);
const recovery = (refrigerant: string) => ({
  kind: 'recovery' as const,
  refrigerant,
  stampedLimitMicrograms: null,
  waterCapacityMicrograms: BigInt(Math.round(waterCapacityG * 1e6)),
});

describe('The table of filling', () => {
  it('has the form that the program reads, and the figures of the saturation tables', () => {
    expect(fillingTable.parse(table)).toEqual(table);
    for (const { refrigerant, liquidDensityKgM3At25C, bubbleKPaAbsAt55C } of table.figures) {
      const saturation = referenceData.findSaturationTable(refrigerant);
      if (!saturation) throw new Error(`no saturation table of ${refrigerant}`);
      expect(liquidDensityKgM3(saturation, 25, { path: '' })).toMatchObject({ value: liquidDensityKgM3At25C });
      const hot = saturationKPaAbs(saturation, 'bubble', 55, { path: '' });
      expect(hot.ok ? hot.value : null).toBe(bubbleKPaAbsAt55C);
    }
  });
});

describe('The limit of a cylinder', () => {
  it('follows what is in it, not what it is meant for: R-410A in a cylinder for R-134a, WC 47.7 lb, 40.41 lb', () => {
    expect(lb(cylinderLimit(recovery('R-134a')))).toBeCloseTo(46.05, 2);
    expect(lb(cylinderLimit(recovery('R-134a'), ['R-410A']))).toBeCloseTo(40.41, 2);
    expect(lb(cylinderLimit(recovery('R-32'), ['R-410A']))).toBeCloseTo(40.41, 2);
  });

  it('is that of the lightest in a mixture: R-410A with R-32, WC 47.7 lb, 36.67 lb', () => {
    expect(lb(cylinderLimit(recovery('R-410A'), ['R-410A', 'R-32']))).toBeCloseTo(36.67, 2);
    expect(lb(cylinderLimit(recovery('R-410A'), ['R-32', 'R-410A']))).toBeCloseTo(36.67, 2);
  });

  it('takes what no table has for what the cylinder is meant for', () => {
    expect(lb(cylinderLimit(recovery('R-410A'), ['R-999']))).toBeCloseTo(40.41, 2);
    expect(lb(cylinderLimit(recovery('R-32'), ['R-134a', 'R-999']))).toBeCloseTo(36.67, 2);
    expect(cylinderLimit(recovery('R-999'))).toBeNull();
  });

  it('is the stamped one where there is one, and none for a non-refillable cylinder', () => {
    expect(cylinderLimit({ ...recovery('R-134a'), stampedLimitMicrograms: 5n }, ['R-32'])).toBe(5n);
    expect(cylinderLimit({ ...recovery('R-134a'), kind: 'nonRefillable' }, ['R-32'])).toBeNull();
  });

  it('is to the milligram what the calculation says, for every refrigerant', () => {
    for (const { refrigerant } of table.figures) {
      const fill = cylinderFill({ refrigerant, waterCapacityG, tareG: 0 }, referenceData);
      if (!fill.ok) throw new Error(refrigerant);
      expect(Number(cylinderLimit(recovery('R-22'), [refrigerant])) / 1e6).toBe(fill.value.maxNetG);
    }
  });
});

describe('A pressure rating', () => {
  const psig = (value: number) => toBase('pressureGauge', 'psi', value);
  const us = (service: number, ...refrigerants: string[]) => pressureRatingHolds(psig(service), refrigerants, 'US');

  /** Source: 49 CFR 173.301a(d): at 55 °C not more than 5/4 of the service pressure. */
  it('in the US bears 5/4 of the stamped pressure: 400 psig takes R-410A, R-32 and R-454B, 260 psig none of them', () => {
    for (const refrigerant of ['R-410A', 'R-32', 'R-454B']) {
      expect([refrigerant, us(400, refrigerant), us(260, refrigerant)]).toEqual([refrigerant, true, false]);
    }
    expect([us(260, 'R-134a'), us(260, 'R-22')]).toEqual([true, true]);
    expect([us(300, 'R-404A'), us(300, 'R-407C')]).toEqual([true, true]);
    expect([us(284, 'R-404A'), us(290, 'R-404A')]).toEqual([false, true]);
  });

  it('elsewhere, and where the place is not known, bears the stamped pressure itself', () => {
    for (const jurisdiction of ['EU', null] as const) {
      expect(pressureRatingHolds(psig(400), ['R-410A'], jurisdiction)).toBe(false);
      expect(pressureRatingHolds(3338, ['R-410A'], jurisdiction)).toBe(false);
      expect(pressureRatingHolds(3339, ['R-410A'], jurisdiction)).toBe(true);
    }
  });

  it('does not judge carbon dioxide, nor a cylinder whose pressure is not known', () => {
    expect(us(1_800, 'R-744')).toBeNull();
    expect(pressureRatingHolds(null, ['R-410A'], 'US')).toBeNull();
    expect(us(400, 'R-999')).toBeNull();
  });

  it('holds for a mixture only where it holds for each of it', () => {
    expect([us(260, 'R-134a', 'R-410A'), us(400, 'R-134a', 'R-410A')]).toEqual([false, true]);
    expect([us(260, 'R-999', 'R-410A'), us(400, 'R-999', 'R-410A')]).toEqual([false, null]);
  });

  it('of R-410A at 55 °C needs 3,339 kPa gauge', () => {
    expect(ratingPressureKPaGauge('R-410A')).toBeCloseTo(3338.5, 1);
    expect(ratingPressureKPaGauge('R-744')).toBeNull();
  });
});
