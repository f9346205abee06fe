import { describe, expect, it } from 'vitest';
import { charge, extraG, pipe, refusalsOf, refused, warningsOf } from './charge-request.fixture.ts';

/** Exact by definition (international yard and pound, 1959). */
const OZ_G = 28.349523125;
const FT_M = 0.3048;
const OZ_PER_FT = OZ_G / FT_M;

/** Worked values: installation manuals' forms A1 to A6, worked by hand before the program existed. */
describe('A flat rate', () => {
  it('charges the pipe beyond the pre-charged length (A1: 23 m, 7.5 m, 20 g/m)', () => {
    expect(extraG({}, [pipe(23)])).toBe(310);
  });

  it('charges 90 g for 12.0 m of the invented unit, 1,290 g in all', () => {
    const result = charge({}, [pipe(12)]);
    expect(result).toMatchObject({ extraG: 90, totalG: 1290, weighInG: 90, recoverG: 0 });
    expect(result.steps.map(({ code, expression, value, unit }) => [code, expression, value, unit])).toEqual([
      ['lengthBeyond', '12.0 m - 7.5 m', 4.5, 'm'],
      ['lineCharge', '4.5 m x 20 g/m', 90, 'g'],
      ['total', '1200 g + 90 g', 1290, 'g'],
      ['co2e', '1.29 kg x 675 / 1000', 0.87075, 't'],
      ['pipeContent', '17.72 mm2 x 893.04 kg/m3 / 1000', 15.825, 'g/m'],
    ]);
  });

  it('adds nothing at 7.5 m and below', () => {
    expect(extraG({}, [pipe(7.5)])).toBe(0);
    expect(extraG({}, [pipe(3)])).toBe(0);
    expect(charge({}, [pipe(0)])).toMatchObject({ extraG: 0, totalG: 1200 });
  });

  it('charges every metre where nothing is pre-charged, also over mixed sizes', () => {
    expect(extraG({ precharge: null }, [pipe(12)])).toBe(240);
    expect(extraG({ precharge: null, rate: { kind: 'flat', gPerM: 15 } }, [pipe(4, 9.52), pipe(6)])).toBe(150);
  });

  it('keeps oz/ft as exact as they were typed (A6: 75 ft of 1/2 in, 1.2 oz/ft, less 15 ft x 0.6 oz/ft: 81 oz)', () => {
    const basis = {
      rate: { kind: 'flat', gPerM: 1.2 * OZ_PER_FT },
      precharge: { scope: 'mass', massG: 15 * 0.6 * OZ_G },
      shortLine: 'remove',
    } as const;
    expect(extraG(basis, [pipe(75 * FT_M, 12.7)])).toBeCloseTo(81 * OZ_G, 3);
    expect(extraG(basis, [pipe(75 * FT_M, 12.7)])).toBe(2296.311);
  });
});

describe('A rate by liquid pipe size', () => {
  /** A printed example of one VRF manual, reproduced (A5): 5.575 kg of pipe and 3.30 kg for units make 8.875 kg. */
  it('adds up sizes and allowances without any free length', () => {
    const basis = {
      precharge: null,
      rate: {
        kind: 'byLiquidPipe',
        sizes: [
          { liquidOdMm: 6.35, gPerM: 20 },
          { liquidOdMm: 9.52, gPerM: 60 },
          { liquidOdMm: 12.7, gPerM: 125 },
        ],
      },
      allowances: [
        { label: 'cassette', gEach: 450, count: 4 },
        { label: 'duct', gEach: 450, count: 2 },
        { label: 'wall', gEach: 350, count: 1 },
        { label: 'floor', gEach: 250, count: 1 },
      ],
    } as const;
    const pipes = [pipe(35, 6.35), pipe(50, 9.52), pipe(15, 12.7)];
    expect(extraG({ ...basis, allowances: [...basis.allowances], rate: sized(basis.rate) }, pipes)).toBe(8875);
  });

  it('takes 9.5, 9.525 and 9.53 mm for one nominal, within 0.15 mm', () => {
    const rate = sized({ kind: 'byLiquidPipe', sizes: [{ liquidOdMm: 9.53, gPerM: 30 }] });
    expect(extraG({ precharge: null, rate }, [pipe(1, 9.5), pipe(1, 9.525), pipe(1, 9.37)])).toBe(90);
    expect(refused({ precharge: null, rate }, [pipe(1, 9.36)])).toEqual([
      'sizeWithoutRate /lineSet/branches/0/liquidOdMm',
    ]);
  });

  it('refuses a size that the manual gives no rate for, and names those it does', () => {
    const rate = sized({
      kind: 'byLiquidPipe',
      sizes: [
        { liquidOdMm: 6.35, gPerM: 15 },
        { liquidOdMm: 9.52, gPerM: 30 },
      ],
    });
    expect(refusalsOf({ precharge: null, rate }, [pipe(4), pipe(6, 12.7)])).toEqual([
      {
        code: 'sizeWithoutRate',
        path: '/lineSet/branches/1/liquidOdMm',
        given: 12.7,
        allowed: [6.35, 9.52],
        params: { branch: 'B', given: 12.7, allowed: '6.35, 9.52' },
      },
    ]);
  });

  it('refuses a table that names one size twice or no size at all', () => {
    const rate = sized({
      kind: 'byLiquidPipe',
      sizes: [
        { liquidOdMm: 6.35, gPerM: 15 },
        { liquidOdMm: 6.4, gPerM: 16 },
        { liquidOdMm: 7, gPerM: 18 },
      ],
    });
    expect(refused({ precharge: null, rate }, [pipe(4)])).toEqual([
      'sizeTwice /basis/rate/sizes/1/liquidOdMm',
      'odNotNominal /basis/rate/sizes/2/liquidOdMm',
    ]);
  });
});

describe('A rate in brackets', () => {
  /** A4: up to 10 m 0 g, above 10 to 20 m 200 g, above 20 to 30 m 400 g, upper bound inclusive. */
  const steps = [
    { upToM: 10, extraG: 0 },
    { upToM: 20, extraG: 200 },
    { upToM: 30, extraG: 400 },
  ];
  const basis = { precharge: null, rate: { kind: 'stepped' as const, steps } };

  it('gives a length that equals the upper bound to its bracket (A4: 20.0 m and 20.1 m)', () => {
    expect(extraG(basis, [pipe(20)])).toBe(200);
    expect(extraG(basis, [pipe(20.1)])).toBe(400);
    expect(extraG(basis, [pipe(10)])).toBe(0);
  });

  it('looks at the total length, without binary noise', () => {
    expect(6.4 + 9.8 + 3.8).toBeGreaterThan(20);
    expect(extraG(basis, [pipe(6.4), pipe(9.8), pipe(3.8)])).toBe(200);
  });

  it('refuses a length beyond the last bracket and names both', () => {
    expect(refusalsOf(basis, [pipe(30), pipe(0.5)])).toEqual([
      {
        code: 'bracketsEndShort',
        path: '/lineSet/branches',
        given: 30.5,
        allowed: 30,
        params: { given: 30.5, allowed: 30 },
      },
    ]);
    expect(extraG(basis, [pipe(30)])).toBe(400);
  });

  it('refuses brackets that do not ascend, and a pre-charge beside brackets', () => {
    const unordered = [steps[1], steps[0], steps[2], steps[2]] as typeof steps;
    expect(refused({ precharge: null, rate: { kind: 'stepped', steps: unordered } })).toEqual([
      'bracketsNotAscending /basis/rate/steps/1/upToM',
      'bracketsNotAscending /basis/rate/steps/3/upToM',
    ]);
    expect(refused({ rate: { kind: 'stepped', steps } })).toEqual(['prechargeWithBrackets /basis/precharge']);
  });

  it('clamps a bracket that removes, unless the manual says remove', () => {
    const rate = { kind: 'stepped' as const, steps: [{ upToM: 10, extraG: -80 }] };
    expect(extraG({ precharge: null, rate }, [pipe(4)])).toBe(0);
    expect(warningsOf({ precharge: null, rate }, [pipe(4)])).toContain('clampedAtZero');
    expect(charge({ precharge: null, rate, shortLine: 'remove' }, [pipe(4)])).toMatchObject({
      extraG: -80,
      recoverG: 80,
      totalG: 1120,
    });
  });
});

describe("The maker's fixed mass", () => {
  it('is the line part, whatever the length', () => {
    const basis = { precharge: null, rate: { kind: 'fixedMass' as const, extraG: 310 } };
    expect(extraG(basis, [pipe(3)])).toBe(310);
    expect(charge({ ...basis, allowances: [{ label: 'receiver', gEach: 40, count: 2 }] }, [pipe(80)])).toMatchObject({
      extraG: 390,
      totalG: 1590,
    });
  });

  it('does not use a pre-charged length and says so; a credited mass contradicts it and is refused', () => {
    const rate = { kind: 'fixedMass' as const, extraG: 310 };
    expect(extraG({ rate })).toBe(310);
    expect(warningsOf({ rate })).toEqual(['prechargeNotUsed']);
    expect(refused({ rate, precharge: { scope: 'mass', massG: 100 } })).toEqual([
      'prechargeWithFixedMass /basis/precharge',
    ]);
  });
});

describe('A formula', () => {
  const formula = (expression: string) => ({ kind: 'formula' as const, expression });

  it('is the whole line part over L, N and Lp', () => {
    expect(extraG({ rate: formula('max(0, L - Lp) * 20') }, [pipe(12)])).toBe(90);
    const perBranch = { scope: 'systemPerBranch' as const, lengthM: 7.5 };
    const basis = { precharge: perBranch, rate: formula('(L - Lp) * 15 + N * 10') };
    expect(extraG(basis, [pipe(12), pipe(9), pipe(15), pipe(6)])).toBe(180 + 40);
  });

  it('reads metres by nominal liquid size; a size that is not used is 0', () => {
    const rate = formula('L635 * 15 + L952 * 30 + L1588 * 170');
    expect(extraG({ precharge: null, rate }, [pipe(4), pipe(6, 9.525), pipe(2)])).toBe(6 * 15 + 6 * 30);
  });

  it('takes Lp as 0 without pre-charge, and as every branch together where each has its own', () => {
    expect(extraG({ precharge: null, rate: formula('L * 20 - Lp * 20') })).toBe(240);
    const branch = { scope: 'branch' as const, lengthM: 5 };
    expect(extraG({ precharge: branch, rate: formula('Lp') }, [pipe(12), pipe(9)])).toBe(10);
    const tree = [pipe(12, 9.52, { name: 'main' }), pipe(9, 6.35, { name: 'A', parent: 'main' })];
    expect(extraG({ precharge: branch, rate: formula('Lp') }, tree)).toBe(10);
    expect(extraG({ precharge: { scope: 'systemPerBranch', lengthM: 5 }, rate: formula('Lp') }, tree)).toBe(5);
  });

  it('takes a credited mass off, which no name in it could bring in', () => {
    const basis = { precharge: { scope: 'mass' as const, massG: 100 }, rate: formula('L * 20') };
    expect(extraG(basis, [pipe(12)])).toBe(140);
  });

  it('never steps from binary noise: (12.3 - 7.5) x 20 is 96, not a little more', () => {
    expect(Math.ceil((12.3 - 7.5) * 20)).toBe(97);
    expect(extraG({ rate: formula('ceil((L - Lp) * 20)') }, [pipe(12.3)])).toBe(96);
    expect(extraG({ precharge: null, rate: formula('floor(L * 100)') }, [pipe(0.29)])).toBe(29);
  });

  it('refuses an unknown name and names the known ones', () => {
    const [refusal] = refusalsOf({ rate: formula('L * r') });
    expect(refusal).toMatchObject({ code: 'formulaUnknownName', path: '/basis/rate/expression', given: 'r' });
    expect(refusal?.allowed).toEqual(expect.arrayContaining(['L', 'N', 'Lp', 'L635', 'L952', 'L1588']));
    expect(refused({ rate: formula('L953 * 30') })).toEqual(['formulaUnknownName /basis/rate/expression']);
  });

  it('refuses a formula that gives no number for this line set', () => {
    expect(refused({ rate: formula('100 / (L - 12)') }, [pipe(12)])).toEqual([
      'formulaNoNumber /basis/rate/expression',
    ]);
    expect(extraG({ rate: formula('100 / (L - 12)') }, [pipe(14)])).toBe(50);
  });

  it('says which pipe adds nothing and which pre-charged length is not asked for', () => {
    const basis = { rate: formula('L952 * 30') };
    expect(warningsOf(basis, [pipe(4), pipe(6, 9.52)])).toEqual(['prechargeNotUsed', 'sizeNotInFormula']);
    expect(warningsOf({ precharge: null, rate: formula('L * 12 + L952 * 30') }, [pipe(4), pipe(6, 9.52)])).toEqual([]);
  });

  it('refuses a pipe of no nominal size where sizes count, since its length would be lost', () => {
    expect(refused({ precharge: null, rate: formula('L635 * 20') }, [pipe(4), pipe(3, 7)])).toEqual([
      'odNotNominal /lineSet/branches/1/liquidOdMm',
    ]);
    expect(extraG({ precharge: null, rate: formula('L * 20') }, [pipe(4), pipe(3, 7)])).toBe(140);
  });
});

/** Fixtures are written `as const`; the request type wants plain arrays. */
function sized(rate: { kind: 'byLiquidPipe'; sizes: readonly { liquidOdMm: number; gPerM: number }[] }) {
  return { kind: rate.kind, sizes: [...rate.sizes] };
}
