import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { averageIn, type MonthStock, monthlyAverages, worthOf } from './cost.ts';

const month = (name: string, stock: Partial<MonthStock>): MonthStock => {
  return { month: name, pricedG: 0, value: 0, otherG: 0, ...stock };
};

/** Worked by hand. */
describe('The average price of a month', () => {
  it('weighs what is on hand at the last average with what was bought at its own price', () => {
    const averages = monthlyAverages([
      month('2026-01', { pricedG: 10_000, value: 200, otherG: -4_000 }),
      // 6 kg at 20 and 12 kg for 360: 480 / 18.
      month('2026-02', { pricedG: 12_000, value: 360, otherG: -10_000 }),
      month('2026-03', { otherG: -5_000 }),
    ]);
    expect([...averages]).toEqual([
      ['2026-01', 20],
      ['2026-02', expect.closeTo(26.666667, 6)],
      ['2026-03', expect.closeTo(26.666667, 6)],
    ]);
  });

  it('is not changed by what came in without a price, nor by what went out', () => {
    const averages = monthlyAverages([
      month('2026-01', { pricedG: 10_000, value: 200, otherG: 3_000 }),
      month('2026-02', { otherG: 500 }),
      // 13.5 kg at 20 and 1.5 kg for 60: 330 / 15.
      month('2026-03', { pricedG: 1_500, value: 60 }),
    ]);
    expect([...averages.values()]).toEqual([20, 20, 22]);
  });

  it('of months before the first price is the first price; without any there is none', () => {
    expect(
      monthlyAverages([month('2026-01', { otherG: 9_500 }), month('2026-02', { pricedG: 1_000, value: 30 })]),
    ).toEqual(
      new Map([
        ['2026-01', 30],
        ['2026-02', 30],
      ]),
    );
    expect(monthlyAverages([month('2026-01', { otherG: 9_500 })]).size).toBe(0);
  });

  it('forgets a purchase that is reversed', () => {
    const averages = monthlyAverages([
      month('2026-01', { pricedG: 10_000, value: 200 }),
      month('2026-02', { pricedG: 10_000, value: 400 }),
      month('2026-03', { pricedG: -10_000, value: -400 }),
    ]);
    expect(averages.get('2026-03')).toBe(20);
  });

  it('stays where nothing is on hand to weigh, and holds on in months in which nothing moved', () => {
    const averages = monthlyAverages([
      month('2026-01', { pricedG: 1_000, value: 20, otherG: -3_000 }),
      month('2026-04', { pricedG: 1_000, value: 50 }),
    ]);
    expect(averages.get('2026-04')).toBe(50);
    expect(averageIn(averages, '2026-03')).toBe(20);
    expect(averageIn(averages, '2025-12')).toBe(20);
    expect(averageIn(new Map(), '2025-12')).toBeNull();
  });

  it('makes start and purchases worth what left and what is on hand, as long as there is something on hand', () => {
    const move = fc.record({
      pricedG: fc.integer({ min: 1, max: 20_000 }),
      perKg: fc.integer({ min: 5, max: 90 }),
      leaves: fc.double({ min: 0, max: 1, noNaN: true }),
    });
    fc.assert(
      fc.property(fc.array(move, { minLength: 1, maxLength: 24 }), (moves) => {
        let stockG = 0;
        const months = moves.map(({ pricedG, perKg, leaves }, index) => {
          const otherG = -Math.floor((stockG + pricedG) * leaves);
          stockG += pricedG + otherG;
          return month(String(2000 + index), { pricedG, value: worthOf(pricedG, perKg), otherG });
        });
        const averages = monthlyAverages(months);
        const at = (name: string) => averages.get(name) as number;
        const bought = months.reduce((sum, { value }) => sum + value, 0);
        const left = months.reduce((sum, { month: name, otherG }) => sum - worthOf(otherG, at(name)), 0);
        expect(left + worthOf(stockG, at((months.at(-1) as MonthStock).month))).toBeCloseTo(bought, 4);
      }),
    );
  });
});
