import { describe, expect, it } from 'vitest';
import type { ChargeBasis } from './charge.schema.ts';
import { charge, extraG, pipe, refusalsOf, refused, warningsOf } from './charge-request.fixture.ts';

const flat = (gPerM: number) => ({ kind: 'flat' as const, gPerM });
const bySize = (...rows: readonly (readonly [liquidOdMm: number, gPerM: number])[]) => ({
  kind: 'byLiquidPipe' as const,
  sizes: rows.map(([liquidOdMm, gPerM]) => ({ liquidOdMm, gPerM })),
});
const shared = (
  lengthM: number,
  allocation: 'proportional' | 'largestFirst' | 'smallestFirst' | null = null,
): ChargeBasis['precharge'] => ({ scope: 'system', lengthM, allocation });

/** 12, 9, 15 and 6 m: the branches of the worked values for A2N and A3. */
const four = [pipe(12), pipe(9), pipe(15), pipe(6)];

describe('A pre-charged length of the whole system', () => {
  it('is shared by all branches (A2)', () => {
    expect(extraG({ precharge: shared(30), rate: flat(15) }, four)).toBe(180);
    expect(extraG({ precharge: shared(42), rate: flat(15) }, four)).toBe(0);
  });

  it('adds nothing to a line that is shorter, and takes off only where the manual says remove', () => {
    expect(extraG({ precharge: shared(5) }, [pipe(3)])).toBe(0);
    expect(charge({ precharge: shared(5), shortLine: 'remove' }, [pipe(3)])).toMatchObject({
      extraG: -40,
      weighInG: 0,
      recoverG: 40,
      totalG: 1160,
    });
  });

  it('needs no order for one size, nor for a flat rate over several', () => {
    expect(extraG({ precharge: shared(15), rate: bySize([6.35, 15], [9.52, 30]) }, [pipe(10), pipe(12)])).toBe(105);
    expect(extraG({ precharge: shared(15), rate: flat(15) }, [pipe(10, 9.52), pipe(12)])).toBe(105);
    const ordered = { precharge: shared(15, 'largestFirst'), rate: flat(15) };
    expect(extraG({ ...ordered, shortLine: 'remove' }, [pipe(4, 9.52), pipe(6)])).toBe(-75);
  });
});

describe('A shared pre-charged length over different sizes', () => {
  /** Worked value 4: 10 m of 3/8 at 30 g/m and 12 m of 1/4 at 15 g/m, 15 m shared. */
  const rate = bySize([9.52, 30], [6.35, 15]);
  const pipes = [pipe(10, 9.52), pipe(12, 6.35)];

  it('is used up on the largest first: 105 g', () => {
    expect(extraG({ precharge: shared(15, 'largestFirst'), rate }, pipes)).toBe(105);
    expect(extraG({ precharge: shared(8, 'largestFirst'), rate }, pipes)).toBe(2 * 30 + 12 * 15);
  });

  it('is used up on the smallest first: 210 g', () => {
    expect(extraG({ precharge: shared(15, 'smallestFirst'), rate }, pipes)).toBe(210);
    expect(extraG({ precharge: shared(8, 'smallestFirst'), rate }, pipes)).toBe(10 * 30 + 4 * 15);
  });

  it('is used up in proportion to length: 152.7 g', () => {
    expect(extraG({ precharge: shared(15, 'proportional'), rate }, pipes)).toBe(152.727);
    expect(extraG({ precharge: shared(11, 'proportional'), rate }, pipes)).toBe(5 * 30 + 6 * 15);
  });

  it('orders by nominal size, not by the order of the pipes or of the table', () => {
    const three = [pipe(4), pipe(3, 12.7), pipe(2, 9.525), pipe(4)];
    const rates = bySize([12.7, 100], [6.35, 10], [9.52, 50]);
    expect(extraG({ precharge: shared(4, 'largestFirst'), rate: rates }, three)).toBe(50 + 80);
    expect(extraG({ precharge: shared(9, 'smallestFirst'), rate: rates }, three)).toBe(50 + 300);
  });

  it('is refused without the manual’s order, and gives no figure', () => {
    const [refusal, ...others] = refusalsOf({ precharge: shared(15), rate }, pipes);
    expect(refusal).toMatchObject({
      code: 'allocationMissing',
      path: '/basis/precharge/allocation',
      allowed: ['proportional', 'largestFirst', 'smallestFirst'],
    });
    expect(others).toEqual([]);
    const perBranch = { scope: 'systemPerBranch' as const, lengthM: 5 };
    expect(refused({ precharge: perBranch, rate }, pipes)).toEqual(['allocationMissing /basis/precharge/allocation']);
  });

  it('needs no order where nothing is pre-charged or one of the sizes has no length', () => {
    expect(extraG({ precharge: shared(0), rate }, pipes)).toBe(480);
    expect(extraG({ precharge: shared(5), rate }, [pipe(10, 9.52), pipe(0, 6.35)])).toBe(150);
  });

  it('adds nothing when it is longer than the line; remove cannot be divided and is refused', () => {
    expect(extraG({ precharge: shared(30, 'proportional'), rate }, pipes)).toBe(0);
    const basis = { rate, shortLine: 'remove' as const };
    expect(refusalsOf({ ...basis, precharge: shared(30, 'proportional') }, pipes)).toEqual([
      {
        code: 'allocationBeyondLine',
        path: '/basis/precharge/lengthM',
        given: 30,
        allowed: 22,
        params: { given: 30, allowed: 22 },
      },
    ]);
    expect(extraG({ ...basis, precharge: shared(22, 'largestFirst') }, pipes)).toBe(0);
  });
});

describe('A pre-charged length for each branch, shared', () => {
  const precharge = { scope: 'systemPerBranch' as const, lengthM: 7.5 };

  it('is branches x length (A2N: (42 - 30) x 15)', () => {
    expect(extraG({ precharge, rate: flat(15) }, four)).toBe(180);
    expect(charge({ precharge, rate: flat(15) }, four).steps).toContainEqual(
      expect.objectContaining({ code: 'sharedLength', expression: '4 x 7.5 m', value: 30, unit: 'm' }),
    );
  });

  it('counts the branches without children: a main pipe is no branch of its own', () => {
    const tree = [
      pipe(20, 9.52, { name: 'main' }),
      pipe(5, 6.35, { name: 'A', parent: 'main' }),
      pipe(6, 6.35, { name: 'B', parent: 'main' }),
    ];
    expect(extraG({ precharge, rate: flat(15) }, tree)).toBe((31 - 15) * 15);
  });

  it('removes below zero where the manual says so', () => {
    expect(extraG({ precharge, rate: flat(15), shortLine: 'remove' }, [pipe(6), pipe(5)])).toBe((11 - 15) * 15);
    expect(extraG({ precharge, rate: flat(15) }, [pipe(6), pipe(5)])).toBe(0);
  });
});

describe('A pre-charged length of each branch by itself', () => {
  const precharge = { scope: 'branch' as const, lengthM: 7.5 };

  it('is not transferable (A3: 202.5 g on the branches of A2N)', () => {
    expect(extraG({ precharge, rate: flat(15) }, four)).toBe(202.5);
  });

  it('takes each branch at the rate of its size and needs no order', () => {
    const rate = bySize([9.52, 30], [6.35, 15]);
    expect(extraG({ precharge, rate }, [pipe(10, 9.52), pipe(12), pipe(4)])).toBe(2.5 * 30 + 4.5 * 15);
  });

  it('clamps no branch where the manual says remove', () => {
    expect(extraG({ precharge, rate: flat(15), shortLine: 'remove' }, four)).toBe(180);
    expect(extraG({ precharge, rate: flat(15), shortLine: 'remove' }, [pipe(4)])).toBe(-52.5);
  });

  it('gives a main pipe its own and asks to check that', () => {
    const tree = [pipe(20, 6.35, { name: 'main' }), pipe(9, 6.35, { name: 'A', parent: 'main' })];
    expect(extraG({ precharge, rate: flat(10) }, tree)).toBe(125 + 15);
    expect(warningsOf({ precharge, rate: flat(10) }, tree)).toContain('mainHasOwnPrecharge');
    expect(warningsOf({ precharge, rate: flat(10) }, four)).not.toContain('mainHasOwnPrecharge');
  });
});

describe('A credited mass', () => {
  it('is taken off the pipe’s charge', () => {
    expect(extraG({ precharge: { scope: 'mass', massG: 150 } }, [pipe(12)])).toBe(90);
    const rate = bySize([9.52, 30], [6.35, 15]);
    expect(extraG({ precharge: { scope: 'mass', massG: 100 }, rate }, [pipe(10, 9.52), pipe(12)])).toBe(380);
  });

  /** A6, a printed example: 25 ft of reused 1/4 in at 0.27 oz/ft, factory allowance 13.5 oz: -6.75 oz = -191.4 g. */
  it('may leave less than nothing: then remove, where the manual prints so', () => {
    const ozG = 28.349523125;
    const basis = {
      rate: flat((0.27 * ozG) / 0.3048),
      precharge: { scope: 'mass' as const, massG: 13.5 * ozG },
      rounding: { toG: 0.1, direction: 'nearest' as const },
    };
    const pipes = [pipe(25 * 0.3048)];
    expect(charge({ ...basis, shortLine: 'remove' }, pipes)).toMatchObject({
      extraG: -191.4,
      recoverG: 191.4,
      weighInG: 0,
    });
    expect(charge(basis, pipes)).toMatchObject({ extraG: 0, totalG: 1200 });
  });

  it('is never clamped silently', () => {
    const basis = { precharge: { scope: 'mass' as const, massG: 500 } };
    expect(charge(basis, [pipe(12)]).warnings).toContainEqual({ code: 'clampedAtZero', params: { lineG: -260 } });
    expect(warningsOf({ ...basis, shortLine: 'remove' }, [pipe(12)])).not.toContain('clampedAtZero');
  });
});

describe('Allowances', () => {
  it('are each x count x factor, added after the pipe was clamped', () => {
    const allowances = [
      { label: 'indoor', gEach: 80, count: 3, factor: 1.25 },
      { label: 'outdoor', gEach: 200, count: 1 },
      { label: 'small accumulator', gEach: -50, count: 1, factor: null },
    ];
    expect(extraG({ allowances }, [pipe(12)])).toBe(90 + 300 + 200 - 50);
    expect(extraG({ allowances, precharge: shared(100) }, [pipe(12)])).toBe(450);
  });

  it('can leave something to recover even where a short line removes nothing', () => {
    const allowances = [{ label: 'smaller coil', gEach: -70, count: 2 }];
    expect(charge({ allowances }, [pipe(5)])).toMatchObject({ extraG: -140, recoverG: 140, weighInG: 0 });
  });
});
