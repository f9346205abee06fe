import { describe, expect, it } from 'vitest';
import { extraG, lineSetOf, pipe, refusalsOf, refused, warningsOf } from './charge-request.fixture.ts';

describe('A length limit', () => {
  it('refuses a line set that is too long, naming value and limit, and gives no figure', () => {
    expect(refusalsOf({ limits: { maxLengthM: 25 } }, [pipe(15), pipe(10.1)])).toEqual([
      {
        code: 'lineTooLong',
        path: '/lineSet/branches',
        given: 25.1,
        allowed: 25,
        params: { given: 25.1, allowed: 25, pipeM: 25.1, bendsM: 0 },
      },
    ]);
  });

  it('refuses a line set that is too short', () => {
    expect(refusalsOf({ limits: { minLengthM: 3 } }, [pipe(2.99)])).toMatchObject([
      { code: 'lineTooShort', path: '/lineSet/branches', given: 2.99, allowed: 3 },
    ]);
  });

  it('lets a value pass that equals the limit, whatever binary noise says', () => {
    expect(extraG({ limits: { minLengthM: 3, maxLengthM: 3 } }, [pipe(3)])).toBe(0);
    expect(0.1 + 0.2).toBeGreaterThan(0.3);
    expect(extraG({ limits: { maxLengthM: 0.3, minLengthM: 0.3 } }, [pipe(0.1), pipe(0.2)])).toBe(0);
    expect(6.4 + 9.8 + 3.8).toBeGreaterThan(20);
    expect(extraG({ limits: { maxLengthM: 20 } }, [pipe(6.4), pipe(9.8), pipe(3.8)])).toBe(250);
  });

  it('adds bends to the longest lengths, never to the shortest and never to the charge', () => {
    const bent = pipe(12, 6.35, { bends: 4, equivalentMPerBend: 0.3 });
    expect(refusalsOf({ limits: { maxLengthM: 13 } }, [bent])).toMatchObject([
      { code: 'lineTooLong', given: 13.2, allowed: 13, params: { pipeM: 12, bendsM: 1.2 } },
    ]);
    expect(extraG({ limits: { maxLengthM: 13.2 } }, [bent])).toBe(90);
    expect(refused({ limits: { minLengthM: 13 } }, [bent])).toEqual(['lineTooShort /lineSet/branches']);
    expect(refused({ limits: { maxBranchM: 13 } }, [bent])).toEqual(['branchTooLong /lineSet/branches/0/lengthM']);
  });
});

describe('The longest branch', () => {
  const tree = [
    pipe(20, 9.52, { name: 'main', bends: 2, equivalentMPerBend: 0.5 }),
    pipe(8, 6.35, { name: 'A', parent: 'box' }),
    pipe(5, 6.35, { name: 'box', parent: 'main' }),
    pipe(9, 6.35, { name: 'B' }),
  ];

  it('is the path from the outdoor unit, wherever its parents stand in the list', () => {
    expect(refusalsOf({ limits: { maxBranchM: 30 } }, tree)).toEqual([
      {
        code: 'branchTooLong',
        path: '/lineSet/branches/1/lengthM',
        given: 34,
        allowed: 30,
        params: { branch: 'A', pipeM: 33, bendsM: 1, given: 34, allowed: 30 },
      },
    ]);
    expect(extraG({ limits: { maxBranchM: 34 } }, tree)).toBe((42 - 7.5) * 20);
  });

  it('names each branch that is too long', () => {
    expect(refused({ limits: { maxBranchM: 8 } }, tree)).toEqual([
      'branchTooLong /lineSet/branches/1/lengthM',
      'branchTooLong /lineSet/branches/3/lengthM',
    ]);
  });
});

describe('A height limit', () => {
  const at = (riseM: number | null, name: string, parent?: string) =>
    pipe(5, 6.35, { riseM, name, ...(parent ? { parent } : {}) });

  it('holds upwards and downwards, and adds rises along the path', () => {
    expect(refusalsOf({ limits: { maxRiseM: 10 } }, [at(10.1, 'A'), at(-10.5, 'B'), at(-10, 'C')])).toMatchObject([
      { code: 'riseTooHigh', path: '/lineSet/branches/0/riseM', given: 10.1, allowed: 10 },
      { code: 'riseTooHigh', path: '/lineSet/branches/1/riseM', given: -10.5, allowed: 10 },
    ]);
    expect(refused({ limits: { maxRiseM: 10 } }, [at(6, 'main'), at(5, 'A', 'main'), at(-3, 'B', 'main')])).toEqual([
      'riseTooHigh /lineSet/branches/1/riseM',
    ]);
  });

  it('between indoor units is held from the highest to the lowest, at the lowest', () => {
    expect(refusalsOf({ limits: { maxDropM: 7 } }, [at(4, 'A'), at(-4, 'B'), at(0, 'C')])).toEqual([
      {
        code: 'dropTooHigh',
        path: '/lineSet/branches/1/riseM',
        given: 8,
        allowed: 7,
        params: { highest: 'A', lowest: 'B', given: 8, allowed: 7 },
      },
    ]);
    expect(extraG({ limits: { maxDropM: 8 } }, [at(4, 'A'), at(-4, 'B'), at(0, 'C')])).toBe(150);
    expect(extraG({ limits: { maxDropM: 1 } }, [at(9, 'main'), at(1, 'A', 'main'), at(0, 'B', 'main')])).toBe(150);
  });

  it('that cannot be checked is said, and still refuses what is known to break it', () => {
    expect(warningsOf({ limits: { maxRiseM: 10 } }, [pipe(12)])).toEqual(['riseNotChecked']);
    expect(warningsOf({ limits: { maxRiseM: 10 } }, [at(3, 'A')])).toEqual([]);
    expect(warningsOf({ limits: { maxDropM: 10 } }, [pipe(12)])).toEqual([]);
    expect(refused({ limits: { maxRiseM: 10 } }, [at(null, 'main'), at(11, 'A', 'main')])).toEqual([
      'riseTooHigh /lineSet/branches/1/riseM',
    ]);
  });
});

describe('The largest total charge', () => {
  it('is held against the rounded total; equal passes', () => {
    const rounding = { toG: 5, direction: 'up' as const };
    expect(extraG({ limits: { maxTotalChargeG: 1290 }, rounding }, [pipe(12)])).toBe(90);
    expect(refusalsOf({ limits: { maxTotalChargeG: 1290 }, rounding }, [pipe(12.01)])).toEqual([
      {
        code: 'totalChargeTooHigh',
        path: '/basis/limits/maxTotalChargeG',
        given: 1295,
        allowed: 1290,
        params: { given: 1295, allowed: 1290 },
      },
    ]);
  });

  it('holds for the total of the new line set in a line-set change', () => {
    const more = { job: 'lineSetChange', previousLineSet: lineSetOf([pipe(60)]) } as const;
    expect(refused({ limits: { maxTotalChargeG: 1400 } }, [pipe(20)], more)).toEqual([
      'totalChargeTooHigh /basis/limits/maxTotalChargeG',
    ]);
    expect(extraG({ limits: { maxTotalChargeG: 1450 } }, [pipe(20)], more)).toBe(-800);
  });
});

describe('Refusals', () => {
  it('are all told at once', () => {
    const limits = { maxLengthM: 20, maxBranchM: 10, maxRiseM: 5, maxDropM: 2, maxTotalChargeG: 1210 };
    const pipes = [pipe(11, 6.35, { riseM: 6 }), pipe(12, 6.35, { riseM: -1 })];
    expect(refused({ limits }, pipes)).toEqual([
      'lineTooLong /lineSet/branches',
      'branchTooLong /lineSet/branches/0/lengthM',
      'branchTooLong /lineSet/branches/1/lengthM',
      'riseTooHigh /lineSet/branches/0/riseM',
      'dropTooHigh /lineSet/branches/1/riseM',
      'totalChargeTooHigh /basis/limits/maxTotalChargeG',
    ]);
  });

  it('hold for the lengths of an old line set too, since the manual gives no charge beyond them', () => {
    const more = { job: 'lineSetChange', previousLineSet: lineSetOf([pipe(26, 6.35, { riseM: 40 })]) } as const;
    expect(refused({ limits: { maxLengthM: 25, maxRiseM: 10 } }, [pipe(20, 6.35, { riseM: 2 })], more)).toEqual([
      'lineTooLong /previousLineSet/branches',
    ]);
  });

  it('name an unknown refrigerant beside what else is wrong', () => {
    expect(refused({ refrigerant: 'R-999', limits: { maxLengthM: 5 } }, [pipe(12)])).toEqual([
      'unknownRefrigerant /basis/refrigerant',
      'lineTooLong /lineSet/branches',
    ]);
  });
});

describe('A pipe tree', () => {
  it('refuses a parent that does not exist and a name that stands twice', () => {
    const pipes = [
      pipe(5, 6.35, { name: 'A' }),
      pipe(5, 6.35, { name: 'A' }),
      pipe(5, 6.35, { name: 'B', parent: 'M' }),
    ];
    expect(refusalsOf({}, pipes)).toMatchObject([
      { code: 'branchNameTwice', path: '/lineSet/branches/1/name', given: 'A' },
      { code: 'branchParentUnknown', path: '/lineSet/branches/2/parent', given: 'M', allowed: ['A', 'A'] },
    ]);
  });

  it('refuses pipes that lead in a ring, at each pipe of the ring', () => {
    const pipes = [
      pipe(5, 6.35, { name: 'A', parent: 'B' }),
      pipe(5, 6.35, { name: 'B', parent: 'A' }),
      pipe(5, 6.35, { name: 'C', parent: 'B' }),
    ];
    expect(refused({}, pipes)).toEqual([
      'branchParentRing /lineSet/branches/0/parent',
      'branchParentRing /lineSet/branches/1/parent',
    ]);
    expect(refused({}, [pipe(5, 6.35, { name: 'A', parent: 'A' })])).toEqual([
      'branchParentRing /lineSet/branches/0/parent',
    ]);
  });
});
