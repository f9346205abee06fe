import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { equationOf } from './equation.ts';
import { type BookKind, balancesOf, flowsOf, type MonthSum } from './flows.ts';
import { BOOK_KINDS, differencesOverPeriod, placesOverPeriod } from './places.ts';

const g = (mass: number): bigint => BigInt(Math.round(mass * 1e6));
const sum = (fromKind: BookKind, toKind: BookKind, massG: number, reversedG = 0): MonthSum => ({
  fromKind,
  toKind,
  massMicrograms: g(massG),
  reversalMicrograms: g(reversedG),
  entryCount: 1,
});
const figures = (sums: MonthSum[], startG = 0) => {
  const { cameIn, wentOut, totalMicrograms } = equationOf(flowsOf(sums), g(startG));
  const byPart = (parts: readonly { part: string; massMicrograms: bigint }[]) =>
    Object.fromEntries(parts.map(({ part, massMicrograms }) => [part, Number(massMicrograms) / 1e6]));
  return { cameIn: byPart(cameIn), wentOut: byPart(wentOut), totalG: Number(totalMicrograms) / 1e6 };
};

describe('On hand, bought and recovered', () => {
  it('are what went into units, was sent, was lost, differs, and is on hand', () => {
    const month = [
      sum('supplier', 'cylinder', 34_000),
      sum('unit', 'cylinder', 11_200),
      sum('cylinder', 'unit', 41_900),
      sum('cylinder', 'reclaimer', 10_000),
      sum('cylinder', 'atmosphere:hose', 28),
      sum('cylinder', 'cylinderDifference', 130),
      sum('cylinder', 'cylinder', 5_000),
    ];
    expect(figures(month, 96_400)).toEqual({
      cameIn: { onHandStart: 96_400, bought: 34_000, recovered: 11_200 },
      wentOut: { onHandEnd: 89_542, intoUnits: 41_900, toReclaimer: 10_000, lost: 28, cylinderDifference: 130 },
      totalG: 141_600,
    });
  });

  it('count a reversed purchase as not bought, not as returned, and a reversed charge as no recovery', () => {
    const month = [
      sum('supplier', 'cylinder', 22_600),
      sum('cylinder', 'supplier', 11_340, 11_340),
      sum('cylinder', 'unit', 180),
      sum('unit', 'cylinder', 90, 90),
    ];
    expect(figures(month)).toEqual({
      cameIn: { onHandStart: 0, bought: 11_260 },
      wentOut: { onHandEnd: 11_170, intoUnits: 90 },
      totalG: 11_260,
    });
  });

  it('take a real return off what went out, not off what was bought', () => {
    const month = [sum('supplier', 'cylinder', 11_340), sum('cylinder', 'supplier', 2_000)];
    expect(figures(month)).toMatchObject({ cameIn: { bought: 11_340 }, wentOut: { returned: 2_000 } });
  });

  it('show a surplus as a difference below zero', () => {
    expect(figures([sum('cylinderDifference', 'cylinder', 3)], 60).wentOut).toEqual({
      onHandEnd: 63,
      cylinderDifference: -3,
    });
  });

  it('are equal on both sides to the microgram whatever moved', () => {
    const kind = fc.constantFrom(...BOOK_KINDS);
    const any = fc
      .record({
        from: kind,
        to: kind,
        mass: fc.bigInt({ min: 1n, max: 10n ** 15n }),
        part: fc.double({ min: 0, max: 1, noNaN: true }),
      })
      .map(({ from, to, mass, part }) => ({
        ...sum(from, to, 0),
        massMicrograms: mass,
        reversalMicrograms: (mass * BigInt(Math.round(part * 100))) / 100n,
      }));
    fc.assert(
      fc.property(fc.array(any, { maxLength: 40 }), fc.bigInt({ min: 0n, max: 10n ** 15n }), (sums, start) => {
        const { wentOut, totalMicrograms } = equationOf(flowsOf(sums), start);
        expect(wentOut.reduce((mass, { massMicrograms }) => mass + massMicrograms, 0n)).toBe(totalMicrograms);
        const end = wentOut.find(({ part }) => part === 'onHandEnd')?.massMicrograms ?? 0n;
        expect(end - start).toBe(balancesOf(sums).get('cylinder') ?? 0n);
        const places = placesOverPeriod([], flowsOf(sums));
        expect(places.reduce((mass, { endMicrograms }) => mass + endMicrograms, 0n)).toBe(0n);
        for (const { kind: name, endMicrograms } of places)
          expect(endMicrograms).toBe(balancesOf(sums).get(name) ?? 0n);
      }),
    );
  });
});

describe('Each kind of difference', () => {
  it('says what statements put there, what was settled and what stands', () => {
    const before = [sum('cylinder', 'cylinderDifference', 40)];
    const month = [
      sum('cylinder', 'cylinderDifference', 130),
      sum('cylinderDifference', 'cylinder', 30),
      sum('cylinderDifference', 'atmosphere:measured', 100),
      sum('cylinderDifference', 'missing', 15),
      sum('cylinder', 'missing', 6_000),
      sum('missing', 'cylinder', 5_400),
    ];
    const inGrams = differencesOverPeriod(before, flowsOf(month)).map((row) => [
      row.kind,
      ...[row.startMicrograms, row.shownMicrograms, row.settledMicrograms, row.endMicrograms].map(
        (m) => Number(m) / 1e6,
      ),
    ]);
    expect(inGrams).toEqual([
      ['cylinderDifference', 40, 100, 115, 25],
      ['missing', 0, 600, -15, 615],
    ]);
  });
});
