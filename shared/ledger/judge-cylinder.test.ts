import { describe, expect, it } from 'vitest';
import { BLANK_COLLAR, emptyCylinderState } from './cylinder-state.ts';
import { cylinderBookBeforeMasses, replayCylinder } from './judge-cylinder.ts';
import { cylinderRegister, day, FIVE_GRAM_SCALE, filledWith, g, group, moved, read } from './judged-group-builder.ts';
import { placeKey } from './place.ts';

const C1 = cylinderRegister('C1');
const addedOf = (replay: ReturnType<typeof replayCylinder>) =>
  replay.added.map(({ groupId, counterPlace, massMicrograms }) => [groupId, placeKey(counterPlace), massMicrograms]);
const codes = (replay: ReturnType<typeof replayCylinder>) =>
  [...replay.flags, ...replay.state.standing].map(({ code, massMicrograms }) => [code, massMicrograms]);

describe('a reading of a cylinder', () => {
  it('counts the full hose at the start and never at the end, where the entries say what became of it', () => {
    const hose = { hoseFullMicrograms: g(28) };
    const weighIn = group('a', 2, {
      readings: [read('C1', 'before', 9_472, hose), read('C1', 'after', 9_382, hose)],
      masses: [moved('C1 -> U', 90), moved('C1 -> atmosphere:hose', 28, { howKnown: 'estimated' })],
    });
    expect(addedOf(replayCylinder(C1, [filledWith('C1', 9_500), weighIn]))).toEqual([]);
  });
  it('without a moment stands after what the group brings in, before what it only takes out', () => {
    const found = group('in', 2, { readings: [read('C1', 'only', 5_400)], masses: [moved('missing -> C1', 5_400)] });
    expect(addedOf(replayCylinder(C1, [found]))).toEqual([]);
    const sent = group('out', 2, { readings: [read('C1', 'only', 5_240)], masses: [moved('C1 -> reclaimer', 5_240)] });
    expect(addedOf(replayCylinder(C1, [filledWith('C1', 5_240), sent]))).toEqual([]);
    const both = group('both', 2, {
      readings: [read('C1', 'only', 900)],
      masses: [moved('C1 -> U', 300), moved('R1 -> C1', 200)],
    });
    expect(addedOf(replayCylinder(C1, [filledWith('C1', 1_000), both]))).toEqual([]);
  });
  it('below the tare says that nothing is in it, never less than nothing', () => {
    const weighed = group('a', 2, { readings: [read('C1', 'only', -20)] });
    const replay = replayCylinder(C1, [filledWith('C1', 50), weighed]);
    expect(replay.state.book).toEqual({});
    expect(codes(replay)).toContainEqual(['readingBelowTare', g(-20)]);
  });
  it('is within the scales up to 2 u, to be looked at again up to 3 u, not explained beyond', () => {
    const differing = (byG: number) =>
      codes(
        replayCylinder(C1, [filledWith('C1', 9_500), group('a', 2, { readings: [read('C1', 'only', 9_500 + byG)] })]),
      );
    expect(differing(4)).toEqual([]);
    expect(differing(5)).toEqual([['cylinderLookAgain', g(5)]]);
    expect(differing(-7)).toEqual([['cylinderNotExplained', g(-7)]]);
  });
  it('uses the tare of its day, and the first tare before any', () => {
    const revised = cylinderRegister('C1', {
      tares: [
        { validFrom: day(10), tareMicrograms: g(7_060) },
        { validFrom: day(2), tareMicrograms: g(7_700) },
      ],
    });
    const early = group('early', 1, { readings: [read('C1', 'only', 100)] });
    const late = group('late', 10, { readings: [read('C1', 'only', 100 - 640)] });
    const replay = replayCylinder(revised, [early, late]);
    expect(addedOf(replay)).toEqual([['early', 'opening', g(100)]]);
  });
  it('of a better scale finds what a coarser one would not', () => {
    const fine = { ...FIVE_GRAM_SCALE, resolutionG: 1 };
    const weighed = group('a', 2, { readings: [read('C1', 'only', 9_497, { scale: fine })] });
    expect(addedOf(replayCylinder(C1, [filledWith('C1', 9_500), weighed]))).toEqual([
      ['a', 'cylinderDifference', g(-3)],
    ]);
  });
  it('zeroed states nothing', () => {
    const weighIn = group('a', 2, {
      readings: [read('C1', 'before', 0, { mode: 'zeroed', grossMicrograms: 0n })],
      masses: [moved('C1 -> U', 90)],
    });
    expect(addedOf(replayCylinder(C1, [filledWith('C1', 9_500), weighIn]))).toEqual([]);
  });
});

describe('the gap of a reading', () => {
  it('opens a cylinder that nothing explains, once', () => {
    const first = group('first', 2, { readings: [read('C1', 'only', 9_500)] });
    const second = group('second', 3, { readings: [read('C1', 'only', 9_400)] });
    expect(addedOf(replayCylinder(C1, [first, second]))).toEqual([
      ['first', 'opening', g(9_500)],
      ['second', 'cylinderDifference', g(-100)],
    ]);
  });
  it('goes to the supplier at the first weighing after each purchase', () => {
    const bought = (id: string, onDay: number) => group(id, onDay, { masses: [moved('supplier -> C1', 5_000)] });
    const weighed = (id: string, onDay: number, netG: number) =>
      group(id, onDay, { readings: [read('C1', 'only', netG)] });
    const groups = [
      bought('p1', 2),
      weighed('w1', 3, 4_900),
      weighed('w2', 4, 4_800),
      bought('p2', 5),
      weighed('w3', 6, 9_700),
    ];
    expect(addedOf(replayCylinder(C1, groups))).toEqual([
      ['w1', 'supplierShortFill', g(-100)],
      ['w2', 'cylinderDifference', g(-100)],
      ['w3', 'supplierShortFill', g(-100)],
    ]);
  });
  it('is posted whole at the end reading too, where the masses took the book below zero', () => {
    const closed = group('a', 2, { readings: [read('C1', 'after', 1)], masses: [moved('C1 -> U', 62)] });
    const replay = replayCylinder(C1, [filledWith('C1', 60), closed]);
    expect(addedOf(replay)).toEqual([['a', 'cylinderDifference', g(3)]]);
    expect(replay.state.book).toEqual({ 'R-410A': g(1) });
  });
});

describe('a mixed cylinder', () => {
  const R1 = cylinderRegister('R1');
  const mixed = [
    filledWith('R1', 4_000),
    group('mix', 2, { masses: [moved('U -> R1', 1_000, { refrigerant: 'R-22' })] }),
  ];
  it('is a danger from the second refrigerant on until it is empty', () => {
    expect(codes(replayCylinder(R1, mixed))).toEqual([['cylinderMixed', null]]);
    const sent = group('sent', 3, {
      masses: [moved('R1 -> reclaimer', 4_000), moved('R1 -> reclaimer', 1_000, { refrigerant: 'R-22' })],
    });
    expect(codes(replayCylinder(R1, [...mixed, sent]))).toEqual([]);
  });
  it('gives what left it as entered where a late second refrigerant changes the shares', () => {
    const sent = group('sent', 3, { readings: [read('R1', 'only', 4_000)], masses: [moved('R1 -> reclaimer', 4_000)] });
    expect(replayCylinder(R1, [...mixed, sent]).state.book).toEqual({});
  });
  it('does not lend a refrigerant that its book never held', () => {
    const wrong = group('wrong', 3, {
      readings: [read('C1', 'before', 9_500)],
      masses: [moved('C1 -> U', 90, { refrigerant: 'R-32' })],
    });
    expect(replayCylinder(C1, [filledWith('C1', 9_500), wrong]).state.book['R-32']).toBe(g(-90));
  });
  it('is split by its book after the reading that stands before the masses', () => {
    const { state } = replayCylinder(R1, mixed);
    const open = { ...moved('R1 -> reclaimer', 4_950), refrigerant: null };
    const sent = { ...group('sent', 3, { readings: [read('R1', 'only', 4_950)] }), masses: [open] };
    expect(cylinderBookBeforeMasses(R1, state, sent)).toEqual({ 'R-410A': g(3_960), 'R-22': g(990) });
    expect(cylinderBookBeforeMasses(R1, emptyCylinderState, { ...sent, readings: [] })).toEqual({});
  });
});

describe('what stands before the manager for a cylinder', () => {
  it('is a fill past its limit, by how much, until it is under it again', () => {
    const limited = cylinderRegister('C1', { collar: { ...BLANK_COLLAR, stampedLimitMicrograms: g(9_000) } });
    const over = replayCylinder(limited, [filledWith('C1', 9_500)]);
    expect(codes(over)).toEqual([['cylinderOverLimit', g(500)]]);
    const used = group('a', 2, { masses: [moved('C1 -> U', 600)] });
    expect(codes(replayCylinder(limited, [filledWith('C1', 9_500), used]))).toEqual([]);
  });
  it('is a fill past the limit of what is in it, not of what the cylinder is meant for', () => {
    const collar = { ...BLANK_COLLAR, waterCapacityMicrograms: g(21_636.356) };
    const meantForR134a = cylinderRegister('R1', { refrigerant: 'R-134a', collar });
    const into = (id: string, onDay: number, massG: number, refrigerant: string) =>
      group(id, onDay, { masses: [moved('U -> R1', massG, { refrigerant })] });
    // R-410A alone 18,328.59 g; with R-32 in it 0.8 x 21,636.356 x 0.96101 = 16,634.204 g.
    const r410a = into('a', 2, 19_000, 'R-410A');
    expect(codes(replayCylinder(meantForR134a, [r410a]))).toEqual([['cylinderOverLimit', g(671.41)]]);
    const mixed = [into('a', 2, 17_000, 'R-410A'), into('b', 3, 100, 'R-32')];
    expect(codes(replayCylinder(meantForR134a, mixed.slice(0, 1)))).toEqual([]);
    expect(codes(replayCylinder(meantForR134a, mixed))).toEqual([
      ['cylinderMixed', null],
      ['cylinderOverLimit', g(465.796)],
    ]);
  });
  it('is what its service pressure does not bear at 55 °C, as long as it is in it', () => {
    const collar = { ...BLANK_COLLAR, servicePressureKPaGauge: 1_793, jurisdiction: 'US' as const };
    const low = cylinderRegister('R1', { refrigerant: 'R-134a', collar });
    const filled = group('a', 2, { masses: [moved('U -> R1', 500)] });
    const weighedAgain = group('b', 3, { readings: [read('R1', 'only', 500)] });
    const step = replayCylinder(low, [filled, weighedAgain]);
    expect(step.state.standing).toMatchObject([
      { code: 'cylinderPressureTooHigh', refrigerant: 'R-410A', groupId: 'a' },
    ]);
    const sent = group('c', 4, { masses: [moved('R1 -> reclaimer', 500)] });
    expect(codes(replayCylinder(low, [filled, weighedAgain, sent]))).toEqual([]);
    expect(codes(replayCylinder(low, [filledWith('R1', 500, 'R-134a')]))).toEqual([]);
  });
  /** Source: 49 CFR 180.205(c): what was filled before its re-test was due stays in service until it is empty. */
  it('is a fill after the month in which its re-test was due, until it is empty', () => {
    const collar = { ...BLANK_COLLAR, retestOverdueFrom: day(3) };
    const due = cylinderRegister('R1', { collar });
    const inTime = group('a', 2, { masses: [moved('U -> R1', 500)] });
    const used = group('u', 4, { masses: [moved('R1 -> U', 100)] });
    const late = group('b', 5, { masses: [moved('U -> R1', 200)] });
    const sent = group('c', 6, { masses: [moved('R1 -> reclaimer', 600)] });
    expect(codes(replayCylinder(due, [inTime, used]))).toEqual([]);
    expect(replayCylinder(due, [inTime, used, late]).state.standing).toMatchObject([
      { code: 'cylinderFilledPastRetest', groupId: 'b' },
    ]);
    expect(codes(replayCylinder(due, [inTime, used, late, sent]))).toEqual([]);
    const bought = group('p', 5, { masses: [moved('supplier -> R1', 500)] });
    expect(codes(replayCylinder(due, [bought]))).toEqual([]);
    expect(codes(replayCylinder(due, [inTime, bought]))).toEqual([['cylinderFilledPastRetest', null]]);
  });
  it('is a non-refillable cylinder filled from anything but its supplier', () => {
    const disposable = cylinderRegister('N1', { nonRefillable: true });
    const bought = group('p', 2, { masses: [moved('supplier -> N1', 5_000)] });
    const refilled = group('r', 3, { masses: [moved('R1 -> N1', 300), moved('U -> N1', 100)] });
    expect(codes(replayCylinder(disposable, [bought]))).toEqual([]);
    expect(codes(replayCylinder(disposable, [bought, refilled]))).toEqual([['nonRefillableRefilled', g(400)]]);
  });
});
