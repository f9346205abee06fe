import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { roundTo, snap12, snapSum } from '../units/round.ts';
import type { ChargeRequest } from './charge.schema.ts';
import { charge, lineSetOf, pipe } from './charge-request.fixture.ts';
import { compileFormula } from './formula.ts';
import { grams, metres, plain, rounded, snapped, sumText, total } from './steps.ts';

const typed = fc
  .integer({ min: -9_999_999, max: 9_999_999 })
  .chain((whole) => fc.integer({ min: 0, max: 6 }).map((decimals) => whole / 10 ** decimals));
const noisy = fc.tuple(typed, typed, typed).map(([a, b, c]) => a * b - c);
const anyValue = fc.oneof(
  typed,
  noisy,
  fc.double({ noNaN: true, min: -1e15, max: 1e15 }),
  fc.constantFrom(0, -0, 1e-12, 99_999.999_999_9),
);

describe('The short ways', () => {
  it('give the very same values as the long ones', () => {
    fc.assert(
      fc.property(anyValue, fc.integer({ min: 0, max: 6 }), (value, decimals) => {
        expect(snapped(value)).toBe(snap12(value));
        expect(rounded(value, decimals)).toBe(roundTo(value, decimals));
      }),
      { numRuns: 5000 },
    );
    fc.assert(
      fc.property(fc.array(anyValue, { minLength: 1, maxLength: 6 }), (terms) => {
        expect(total(terms)).toBe(snapSum(...terms));
      }),
      { numRuns: 5000 },
    );
    // Many of them pass 1,000,000, where twelve digits hold fewer than six decimals.
    const large = fc.integer({ min: 50_000_000_000, max: 99_999_999_999 }).map((whole) => whole / 1e6);
    for (const term of [typed, large]) {
      fc.assert(
        fc.property(fc.array(term, { minLength: 1, maxLength: 60, size: 'max' }), (terms) => {
          expect(total(terms)).toBe(snapSum(...terms));
        }),
        { numRuns: 2000 },
      );
    }
  });
});

describe('A figure in an expression', () => {
  it('shows a decimal of a length always, of anything else when it says something, six at most', () => {
    expect([12, 7.5, 3.048, 0].map(metres)).toEqual(['12.0 m', '7.5 m', '3.048 m', '0.0 m']);
    expect([20, 16.5, 93.0102464731, 1e-9].map(plain)).toEqual(['20', '16.5', '93.010246', '0']);
    expect(sumText([240, -30.5, 4], grams)).toBe('240 g - 30.5 g + 4 g');
  });
});

/** What a person does with a pencil: the figures as they stand, in order, without their units. */
function workOut(expression: string): number {
  const bare = expression.replace(/ (mm2|kg\/m3|kg|g\/m|g|m)\b/g, '').replaceAll(' x ', ' * ');
  const compiled = compileFormula(bare, new Set());
  if (!compiled.ok) throw new Error(`${expression}: ${JSON.stringify(compiled.refusals)}`);
  return compiled.value.evaluate(new Map()) ?? Number.NaN;
}

describe('Every step', () => {
  const shared = (allocation: 'proportional' | 'largestFirst' | 'smallestFirst') =>
    ({ scope: 'system', lengthM: 12.7, allocation }) as const;
  const sizes = [
    { liquidOdMm: 6.35, gPerM: 15.25 },
    { liquidOdMm: 9.52, gPerM: 0.6 * 93.0102464731 },
  ];
  const bySize = { kind: 'byLiquidPipe' as const, sizes };
  const tree = [
    pipe(10.3, 9.52, { name: 'main' }),
    pipe(4.25, 6.35, { name: 'A', parent: 'main' }),
    pipe(7.3152, 6.35, { name: 'B', parent: 'main' }),
  ];
  const allowances = [
    { label: 'a', gEach: 33.3, count: 3, factor: 1.1 },
    { label: 'b', gEach: -12, count: 1 },
  ];
  const rounding = { toG: 5, direction: 'up' as const };
  const change: Partial<ChargeRequest> = { job: 'lineSetChange', previousLineSet: lineSetOf([pipe(4.4), pipe(9.1)]) };
  const cases: [string, Parameters<typeof charge>][] = [
    ['flat', [{ rounding, allowances }, [pipe(12.3)]]],
    ['flat, short', [{ rounding, allowances }, [pipe(3)]]],
    ['flat, remove', [{ rounding: { toG: 0.1, direction: 'nearest' }, shortLine: 'remove' }, [pipe(3.33)]]],
    ['largest first', [{ precharge: shared('largestFirst'), rate: bySize, allowances }, tree]],
    ['smallest first', [{ precharge: shared('smallestFirst'), rate: bySize, rounding }, tree]],
    ['proportional', [{ precharge: shared('proportional'), rate: bySize }, tree]],
    ['beyond the line', [{ precharge: { ...shared('proportional'), lengthM: 99 }, rate: bySize }, tree]],
    ['per branch, shared', [{ precharge: { scope: 'systemPerBranch', lengthM: 7.62 } }, tree]],
    ['each branch', [{ precharge: { scope: 'branch', lengthM: 5 }, rate: bySize }, tree]],
    ['each branch, remove', [{ precharge: { scope: 'branch', lengthM: 5 }, rate: bySize, shortLine: 'remove' }, tree]],
    ['mass', [{ precharge: { scope: 'mass', massG: 255.145708125 }, rounding }, tree]],
    ['change', [{ rounding: { toG: 10, direction: 'down' }, allowances }, [pipe(20.05)], change]],
    ['recharge', [{ precharge: null }, [pipe(20.05)], { job: 'fullRecharge' }]],
    ['fixed', [{ precharge: null, rate: { kind: 'fixedMass', extraG: 123.4 } }]],
  ];

  it.each(cases)('can be worked out with a pencil: %s', (_name, asked) => {
    const { steps } = charge(...asked);
    expect(steps.length).toBeGreaterThan(2);
    const decimals = { m: 3, g: 3, 'g/m': 3, t: 5, '': 6 };
    for (const { expression, value, unit } of steps) {
      expect([expression, roundTo(workOut(expression), decimals[unit])]).toEqual([expression, value]);
    }
  });

  it('of a formula or a bracket shows what went in', () => {
    const rate = { kind: 'formula' as const, expression: 'max(0, L635 - Lp) * 20 + N' };
    expect(
      charge({ rate }, tree)
        .steps.slice(0, 4)
        .map(({ expression, value }) => [expression, value]),
    ).toEqual([
      ['2', 2],
      ['7.5 m', 7.5],
      ['4.25 m + 7.3152 m', 11.565],
      ['max(0, L635 - Lp) * 20 + N', 83.304],
    ]);
    const stepped = { kind: 'stepped' as const, steps: [{ upToM: 30, extraG: 200 }] };
    expect(charge({ precharge: null, rate: stepped }, tree).steps[1]).toMatchObject({
      expression: '21.8652 m <= 30.0 m: 200 g',
      value: 200,
    });
  });

  it('of an old line set is marked as such', () => {
    const { steps } = charge({}, [pipe(20)], change);
    expect(steps.map(({ of, expression }) => [of, expression]).slice(0, 6)).toEqual([
      [null, '20.0 m - 7.5 m'],
      [null, '12.5 m x 20 g/m'],
      ['previousLineSet', '4.4 m + 9.1 m'],
      ['previousLineSet', '13.5 m - 7.5 m'],
      ['previousLineSet', '6.0 m x 20 g/m'],
      [null, '250 g - 120 g'],
    ]);
  });
});
