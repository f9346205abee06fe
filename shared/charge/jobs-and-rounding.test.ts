import { describe, expect, it } from 'vitest';
import { charge, extraG, lineSetOf, pipe, refused, warningsOf } from './charge-request.fixture.ts';

const rounding = (toG: number, direction: 'nearest' | 'up' | 'down') => ({ toG, direction });
const flat = (gPerM: number) => ({ kind: 'flat' as const, gPerM });

describe('The documented example', () => {
  /** HTTP API, calculations: R-410A, 1,250 g, 7.5 m, 20 g/m, one allowance of 50 g, 12 m of 6.35 mm. */
  it('gives 140 g extra, 1,390 g in all, 2.90163 t and a plausible band of 6.9 to 29.4 g/m', () => {
    const result = charge(
      {
        refrigerant: 'R-410A',
        factoryChargeG: 1250,
        metering: 'unknown',
        allowances: [{ label: 'large indoor unit', gEach: 50, count: 1, factor: 1 }],
        limits: {
          minLengthM: 3,
          maxLengthM: 25,
          maxBranchM: null,
          maxRiseM: 10,
          maxDropM: null,
          maxTotalChargeG: null,
        },
        rounding: rounding(1, 'nearest'),
        shortLine: 'none',
      },
      [pipe(12, 6.35, { riseM: 3, bends: 0, equivalentMPerBend: 0 })],
      { gwpSet: 'EU-2024-573' },
    );
    expect(result).toMatchObject({
      extraG: 140,
      totalG: 1390,
      weighInG: 140,
      recoverG: 0,
      co2eT: 2.90163,
      gwpSet: 'EU-2024-573',
      ratePlausibility: [{ branch: 'A', lowGPerM: 6.9, highGPerM: 29.4, verdict: 'plausible' }],
      warnings: [],
    });
    expect(Object.keys(result).sort()).toEqual(
      [
        'extraG',
        'totalG',
        'weighInG',
        'recoverG',
        'co2eT',
        'gwpSet',
        'ratePlausibility',
        'steps',
        'warnings',
        'cautions',
        'versions',
      ].sort(),
    );
    expect(result.versions).toEqual({
      chargeRules: '1',
      refrigerants: '2026-12-01',
      tubes: '2026-12-01',
      gwp: '2026-12-01',
      'saturation/R-410A': '2026-12-01',
    });
  });
});

describe('A new install', () => {
  it('weighs in what is above zero and recovers what is below', () => {
    expect(charge({}, [pipe(12)])).toMatchObject({ extraG: 90, weighInG: 90, recoverG: 0, totalG: 1290 });
    expect(charge({ shortLine: 'remove' }, [pipe(5)])).toMatchObject({
      extraG: -50,
      weighInG: 0,
      recoverG: 50,
      totalG: 1150,
    });
  });

  it('does not use an old line set, and says so', () => {
    const more = { previousLineSet: lineSetOf([pipe(20)]) };
    expect(extraG({}, [pipe(12)], more)).toBe(90);
    expect(warningsOf({}, [pipe(12)], more)).toEqual(['previousLineSetNotUsed']);
  });

  it('refuses to leave less than nothing in the unit', () => {
    expect(refused({ factoryChargeG: 40, shortLine: 'remove' }, [pipe(5)])).toEqual([
      'totalBelowZero /basis/factoryChargeG',
    ]);
    expect(charge({ factoryChargeG: 50, shortLine: 'remove' }, [pipe(5)])).toMatchObject({ totalG: 0, recoverG: 50 });
  });
});

describe('A full recharge', () => {
  it('weighs in factory charge and extra', () => {
    expect(charge({}, [pipe(12)], { job: 'fullRecharge' })).toMatchObject({
      extraG: 90,
      totalG: 1290,
      weighInG: 1290,
      recoverG: 0,
    });
    expect(charge({ shortLine: 'remove' }, [pipe(5)], { job: 'fullRecharge' })).toMatchObject({
      extraG: -50,
      totalG: 1150,
      weighInG: 1150,
      recoverG: 0,
    });
  });
});

describe('A line-set change', () => {
  const change = (lengthM: number) => ({ job: 'lineSetChange', previousLineSet: lineSetOf([pipe(lengthM)]) }) as const;

  it('weighs in the extra of the new line set less that of the old one', () => {
    expect(charge({}, [pipe(20)], change(12))).toMatchObject({
      extraG: 160,
      weighInG: 160,
      recoverG: 0,
      totalG: 1450,
    });
  });

  it('recovers when the new one is shorter, down to what the factory charge serves', () => {
    expect(charge({}, [pipe(9)], change(12))).toMatchObject({ extraG: -60, weighInG: 0, recoverG: 60, totalG: 1230 });
    expect(charge({}, [pipe(3)], change(12))).toMatchObject({ extraG: -90, recoverG: 90, totalG: 1200 });
  });

  it('rounds the difference once, not both sides', () => {
    // 66.45 - 34.05 = 32.4; 66.45 - 33.9 = 32.55. Rounded each by itself both would give 32.
    const basis = { precharge: null, rate: flat(15), rounding: rounding(1, 'up') };
    expect(charge(basis, [pipe(4.43)], change(2.27))).toMatchObject({ extraG: 33, totalG: 1267 });
    const both = { ...basis, rounding: rounding(1, 'nearest') };
    expect(charge(both, [pipe(4.43)], change(2.26))).toMatchObject({ extraG: 33, totalG: 1266 });
  });

  it('lets allowances cancel in the difference and count in the total', () => {
    const allowances = [{ label: 'indoor', gEach: 100, count: 2 }];
    expect(charge({ allowances }, [pipe(20)], change(12))).toMatchObject({ extraG: 160, totalG: 1650 });
  });

  it('needs the old line set', () => {
    expect(refused({}, [pipe(20)], { job: 'lineSetChange' })).toEqual(['previousLineSetMissing /previousLineSet']);
    expect(refused({}, [pipe(20)], { job: 'lineSetChange', previousLineSet: null })).toEqual([
      'previousLineSetMissing /previousLineSet',
    ]);
  });

  it('names places in the old line set by its own path', () => {
    const rate = { kind: 'byLiquidPipe' as const, sizes: [{ liquidOdMm: 6.35, gPerM: 15 }] };
    const more = { job: 'lineSetChange', previousLineSet: lineSetOf([pipe(4), pipe(5, 9.52)]) } as const;
    expect(refused({ precharge: null, rate }, [pipe(20)], more)).toEqual([
      'sizeWithoutRate /previousLineSet/branches/1/liquidOdMm',
    ]);
  });

  it('tells a warning or refusal of both line sets once', () => {
    const rate = { kind: 'formula' as const, expression: '20 * L / 0' };
    expect(refused({ precharge: null, rate }, [pipe(20)], change(12))).toEqual([
      'formulaNoNumber /basis/rate/expression',
    ]);
    const unused = { rate: { kind: 'formula' as const, expression: '20 * L' } };
    expect(warningsOf(unused, [pipe(20)], change(12))).toEqual(['prechargeNotUsed']);
  });
});

describe('Rounding', () => {
  it('does not step from binary noise: 4.8 m x 20 g/m rounded up is 96', () => {
    expect((12.3 - 7.5) * 20).toBeGreaterThan(96);
    expect(extraG({ rounding: rounding(1, 'up') }, [pipe(12.3)])).toBe(96);
    expect(extraG({ precharge: null, rounding: rounding(1, 'up') }, [pipe(4.8)])).toBe(96);
  });

  it('takes halves away from zero: 2.7 x 15 is 40.5, so 41; removed, -41', () => {
    const basis = { rate: flat(15), rounding: rounding(1, 'nearest') };
    expect(extraG({ ...basis, precharge: null }, [pipe(2.7)])).toBe(41);
    expect((10.2 - 7.5) * 15).toBeLessThan(40.5);
    expect(extraG(basis, [pipe(10.2)])).toBe(41);
    expect(extraG({ ...basis, shortLine: 'remove' }, [pipe(4.8)])).toBe(-41);
  });

  it('up is towards more refrigerant, also below zero', () => {
    const basis = { rate: flat(15), rounding: rounding(5, 'up') };
    expect(extraG(basis, [pipe(10)])).toBe(40);
    expect(extraG({ ...basis, shortLine: 'remove' }, [pipe(5)])).toBe(-35);
  });

  it('down is towards less, also below zero', () => {
    const basis = { rate: flat(15), rounding: rounding(5, 'down') };
    expect(extraG(basis, [pipe(10)])).toBe(35);
    expect(extraG({ ...basis, shortLine: 'remove' }, [pipe(5)])).toBe(-40);
  });

  it('leaves three decimals where the charge basis names none', () => {
    expect(extraG({ precharge: null, rate: flat(15.12345) }, [pipe(1.1)])).toBe(16.636);
    expect(extraG({ precharge: null, rate: flat(15.12345), rounding: null }, [pipe(1)])).toBe(15.123);
  });

  it('rounds to steps other than a gram, after everything is added up', () => {
    const ounce = { toG: 28.349523125, direction: 'nearest' as const };
    expect(extraG({ rounding: ounce }, [pipe(12)])).toBe(85.049);
    const allowances = [
      { label: 'a', gEach: 3, count: 1 },
      { label: 'b', gEach: 3, count: 1 },
    ];
    expect(
      extraG({ precharge: shortest, rate: flat(1), allowances, rounding: rounding(10, 'nearest') }, [pipe(3)]),
    ).toBe(10);
  });
});

const shortest = { scope: 'system' as const, lengthM: 0 };
