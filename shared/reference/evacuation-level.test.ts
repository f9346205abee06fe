import { describe, expect, it } from 'vitest';
import table from '../../data/evacuation-levels.json';
import { evacuationTable, findPressureClass, reachesLevel, requiredLevel } from './evacuation-level.ts';
import { everyTable } from './every-table.ts';

const LB = 453.59237;
const NEWER = '2015-06-01';
const OLDER = '1992-06-01';
const level = (refrigerant: string, lb: number | null, madeOn: string | null) => {
  const found = requiredLevel(refrigerant, lb === null ? null : lb * LB, madeOn);
  return found && [found.value, found.unit];
};

/** Source: 40 CFR 82.156(a), Table 1. */
describe('The level required before a unit is opened', () => {
  it.each([
    ['R-410A, 150 lb, machine of 2015', 'R-410A', 150, NEWER, [0, 'inHgVacuum']],
    ['R-410A, 200 lb, machine of 2015', 'R-410A', 200, NEWER, [10, 'inHgVacuum']],
    ['R-410A, 200 lb, machine of 1992', 'R-410A', 200, OLDER, [4, 'inHgVacuum']],
    ['R-134a, 199.9 lb, machine of 2015', 'R-134a', 199.9, NEWER, [10, 'inHgVacuum']],
    ['R-134a, 199.9 lb, machine of 1992', 'R-134a', 199.9, OLDER, [4, 'inHgVacuum']],
    ['R-134a, 200 lb, machine of 2015', 'R-134a', 200, NEWER, [15, 'inHgVacuum']],
    ['R-134a, 200 lb, machine of 1992', 'R-134a', 200, OLDER, [4, 'inHgVacuum']],
    ['R-123, any', 'R-123', 500, NEWER, [25, 'mmHgAbsolute']],
    ['R-32, which is very high-pressure by the definition', 'R-32', 3, NEWER, [0, 'inHgVacuum']],
  ] as const)('is right for %s', (_, refrigerant, lb, madeOn, expected) => {
    expect(level(refrigerant, lb, madeOn)).toEqual(expected);
  });

  it('counts the newer machines from 15 November 1993', () => {
    expect(level('R-134a', 10, '1993-11-14')).toEqual([4, 'inHgVacuum']);
    expect(level('R-134a', 10, '1993-11-15')).toEqual([10, 'inHgVacuum']);
  });

  it('is the strictest that may apply where full charge or machine are not known', () => {
    expect(level('R-134a', null, null)).toEqual([15, 'inHgVacuum']);
    expect(level('R-134a', 10, null)).toEqual([10, 'inHgVacuum']);
  });

  it('is unknown for a refrigerant that no table has', () => {
    expect(requiredLevel('R-999', 1000, NEWER)).toBeNull();
  });

  it('is reached at the figure itself: from above in a vacuum, from below in absolute pressure', () => {
    expect([9.9, 10, 11].map((reached) => reachesLevel({ value: 10, unit: 'inHgVacuum' }, reached))).toEqual([
      false,
      true,
      true,
    ]);
    expect([26, 25, 20].map((reached) => reachesLevel({ value: 25, unit: 'mmHgAbsolute' }, reached))).toEqual([
      false,
      true,
      true,
    ]);
  });
});

describe('The table of evacuation levels', () => {
  it('has the form that its readers expect', () => {
    expect(evacuationTable.safeParse(table).error).toBeUndefined();
  });

  /** Source: 40 CFR 82.152, pressure classes by the saturated liquid at 104 °F; as worked out there. */
  it('classes every refrigerant by its saturation table', () => {
    const PSI = 6.894757293168;
    const saturation = everyTable.saturation as Record<string, { minTempC: number; bubbleKPaAbs: number[] }>;
    for (const { refrigerant, pressureClass, liquidSaturationKPaAbsAt40C } of table.pressureClasses) {
      const psia =
        (saturation[refrigerant]?.bubbleKPaAbs[40 - (saturation[refrigerant]?.minTempC ?? 0)] ?? Infinity) / PSI;
      const expected = psia < 45 ? 'low' : psia < 170 ? 'medium' : psia <= 355 ? 'high' : 'veryHigh';
      expect([refrigerant, pressureClass]).toEqual([refrigerant, expected]);
      if (liquidSaturationKPaAbsAt40C !== null) expect(liquidSaturationKPaAbsAt40C / PSI).toBeCloseTo(psia, 6);
    }
    expect(table.pressureClasses.map(({ refrigerant }) => refrigerant).sort()).toEqual(
      (everyTable.refrigerants as { rows: { designation: string }[] }).rows
        .map(({ designation }) => designation)
        .sort(),
    );
  });

  /** Source: published examples beside 40 CFR 82.152. */
  it('agrees with the published examples', () => {
    expect(['R-22', 'R-407A', 'R-407C', 'R-410A'].map(findPressureClass)).toEqual(['high', 'high', 'high', 'high']);
    expect([findPressureClass('R-134a'), findPressureClass('R-123')]).toEqual(['medium', 'low']);
  });
});
