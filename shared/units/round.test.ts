import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { roundTo, roundToStep, snap12, snapSum } from './round.ts';

describe('Snapping to 12 significant digits', () => {
  it('keeps binary noise from moving a step: 4.8 m x 20 g/m rounded up stays 96 g', () => {
    expect((12.3 - 7.5) * 20).not.toBe(96);
    expect(roundToStep((12.3 - 7.5) * 20, 1, 'up')).toBe(96);
  });

  it('reads 2.7 x 15 as 40.5, so that the nearest gram is 41', () => {
    expect(roundToStep((10.2 - 7.5) * 15, 1, 'nearest')).toBe(41);
    expect(roundToStep(2.7 * 15, 1, 'nearest')).toBe(41);
  });

  it('makes an exact nothing of a difference that only noise keeps from zero', () => {
    expect(0.3 - 0.1 - 0.2).not.toBe(0);
    expect(snapSum(0.3, -0.1, -0.2)).toBe(0);
    expect(snapSum(1250, 0.1, -0.001)).toBe(1250.099);
    expect(snapSum()).toBe(0);
  });

  it('never returns minus zero and refuses what is no number', () => {
    expect(Object.is(snap12(-0), 0)).toBe(true);
    expect(Object.is(roundTo(-0.0001, 3), 0)).toBe(true);
    expect(() => snap12(Number.NaN)).toThrow(RangeError);
  });
});

describe('Rounding to decimals', () => {
  it('takes halves away from zero on both sides', () => {
    expect(roundTo(1.0005, 3)).toBe(1.001);
    expect(roundTo(-1.0005, 3)).toBe(-1.001);
    expect(roundTo(2.675, 2)).toBe(2.68);
    expect(roundTo(0.5, 0)).toBe(1);
  });

  it('rounds very small and very large numbers without a NaN', () => {
    expect(roundTo(1.5e-7, 7)).toBe(2e-7);
    expect(roundTo(4e-9, 3)).toBe(0);
    expect(roundTo(1.234e21, 3)).toBe(1.234e21);
  });

  it('gives a decimal that rounding again does not change', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e8, max: 1e8, noNaN: true }),
        fc.integer({ min: 0, max: 6 }),
        (value, decimals) => {
          const once = roundTo(value, decimals);
          expect(roundTo(once, decimals)).toBe(once);
          expect(Math.abs(once - value)).toBeLessThanOrEqual(0.5 * 10 ** -decimals + Math.abs(value) * 1e-11);
        },
      ),
    );
  });
});

describe('Rounding to a step', () => {
  it('is up towards more refrigerant and down towards less, also below zero', () => {
    expect(roundToStep(-7.5, 1, 'up')).toBe(-7);
    expect(roundToStep(-7.5, 1, 'down')).toBe(-8);
    expect(roundToStep(-7.5, 1, 'nearest')).toBe(-8);
    expect(roundToStep(7.5, 5, 'nearest')).toBe(10);
    expect(roundToStep(0.3, 0.1, 'up')).toBe(0.3);
  });

  it('stays within one step, on the side that the direction names', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -1e6, max: 1e6, noNaN: true }),
        fc.constantFrom(0.1, 0.5, 1, 5, 10),
        (value, step) => {
          const noise = 1e-11 * Math.max(1, Math.abs(value));
          const up = roundToStep(value, step, 'up');
          const down = roundToStep(value, step, 'down');
          expect(up).toBeGreaterThanOrEqual(value - noise);
          expect(down).toBeLessThanOrEqual(value + noise);
          expect(up - down).toBeLessThanOrEqual(step + noise);
        },
      ),
    );
  });

  it('refuses a step that is not above zero', () => {
    expect(() => roundToStep(1, 0, 'nearest')).toThrow(RangeError);
  });
});
