import { describe, expect, it } from 'vitest';
import { ASSUMED_SCALE, type Scale } from '../ledger/scale.ts';
import { g, reading, step, TARE_G } from './cylinder-steps.fixture.ts';
import { walkCylinder } from './walk-cylinder.ts';

const out = (massG: number, weighed = true) => ({ massMicrograms: g(-massG), weighed, otherScale: null });
/** Before and after, with what lies between taken out. */
const issue = (at: number, beforeG: number, afterG: number, postedG = 0) =>
  step(at, {
    readings: [reading('before', beforeG, at), reading('after', afterG, at + 1)],
    masses: [out(beforeG - afterG)],
    postedMicrograms: g(postedG),
  });

describe('The readings of a cylinder against its book', () => {
  it('agree where weighings follow each other, each as uncertain as two readings, and then four', () => {
    const steps = [
      step(0, { readings: [reading('only', 9_500, 0)] }),
      issue(10, 9_500, 9_400),
      step(20, { readings: [reading('only', 9_402, 20)] }),
    ];
    const { checks, bookMicrograms } = walkCylinder(steps, g(9_500));
    expect(checks.map(({ differenceMicrograms }) => differenceMicrograms)).toEqual([0n, 0n, 0n, g(2)]);
    expect(checks.map(({ verdict }) => verdict)).toEqual(Array(4).fill('withinScales'));
    expect(checks.map(({ uncertainty }) => uncertainty.independentReadings)).toEqual([2, 2, 2, 4]);
    expect(checks.map(({ previousAt }) => previousAt)).toEqual([null, 0, 10, 11]);
    expect(bookMicrograms).toBe(g(9_400));
  });

  it('show a difference at the reading that finds it, with the book of that moment, and start anew from there', () => {
    const { checks, bookMicrograms } = walkCylinder(
      [step(0, { readings: [reading('only', 9_500, 0)] }), issue(10, 9_440, 9_350, -60)],
      g(9_500),
    );
    // 2 u of two readings is 4.08 g: 60 are not explained. Afterwards the book follows the reading.
    expect(checks[1]).toMatchObject({
      bookMicrograms: g(9_500),
      contentMicrograms: g(9_440),
      differenceMicrograms: g(-60),
      postedMicrograms: g(-60),
      verdict: 'notExplained',
      previousAt: 0,
    });
    expect(checks[2]).toMatchObject({ differenceMicrograms: 0n, verdict: 'withinScales', restsOn: { at: 10 } });
    expect(checks[2]?.uncertainty).toMatchObject({ independentReadings: 2, sharedReadings: 2 });
    expect(bookMicrograms).toBe(g(9_350));
  });

  it('are told apart where one group shows a gap before and another after its masses', () => {
    const twice = step(10, {
      readings: [reading('before', 9_440, 10), reading('after', 9_300, 11)],
      masses: [out(90)],
      postedMicrograms: g(-110),
    });
    const { checks } = walkCylinder([step(0, { readings: [reading('only', 9_500, 0)] }), twice], g(9_500));
    expect(checks.map(({ postedMicrograms }) => postedMicrograms)).toEqual([0n, g(-60), g(-50)]);
    expect(checks[2]).toMatchObject({ bookMicrograms: g(9_350), differenceMicrograms: g(-50) });
  });

  it('count what was weighed on a zeroed scale as a pair of its own, and what was estimated as no weighing', () => {
    const fine: Scale = { ...ASSUMED_SCALE, resolutionG: 1 };
    const zeroed = step(10, {
      readings: [reading('after', -TARE_G - 90, 10, { mode: 'zeroed', scale: fine })],
      masses: [out(90), out(28, false)],
    });
    const { checks } = walkCylinder(
      [
        step(0, { readings: [reading('only', 9_500, 0)] }),
        zeroed,
        step(20, { readings: [reading('only', 9_382, 20)] }),
      ],
      g(9_500),
    );
    // 2 x 25/12 + 2 x 1/12
    expect(checks[1]?.uncertainty).toMatchObject({
      standardG: expect.closeTo(Math.sqrt(52 / 12), 9),
      independentReadings: 4,
      notWeighed: 1,
    });
    expect(checks[1]?.differenceMicrograms).toBe(0n);
  });

  it('take the start reading of an open weigh-in with the masses of the group that closes it', () => {
    const opened = step(10, { readings: [reading('before', 9_500, 10)] });
    const closed = step(10, {
      closesGroupId: opened.groupId,
      readings: [reading('after', 9_362, 600)],
      masses: [out(138)],
    });
    const { checks } = walkCylinder([opened, closed], g(9_500));
    expect(checks.map(({ differenceMicrograms }) => differenceMicrograms)).toEqual([0n, 0n]);
    expect(checks[1]?.uncertainty).toMatchObject({ independentReadings: 2, sharedReadings: 2 });
  });

  it('hold the first weighing of what was bought against its paper', () => {
    const bought = step(0, { masses: [{ massMicrograms: g(11_340), weighed: false, otherScale: null }] });
    const weighed = step(10, { readings: [reading('only', 11_200, 10)], postedMicrograms: g(-140) });
    const { checks } = walkCylinder([bought, weighed], 0n);
    expect(checks[0]).toMatchObject({
      differenceMicrograms: g(-140),
      verdict: 'notExplained',
      restsOn: null,
      previousAt: null,
      uncertainty: { standardG: expect.closeTo(2.0412, 3), notWeighed: 1 },
    });
  });

  it('open a book that nothing explained: that is no difference', () => {
    const opening = step(0, { readings: [reading('only', 9_500, 0)], postedMicrograms: g(9_500), opens: true });
    const { checks, bookMicrograms } = walkCylinder([opening], 0n);
    expect(checks[0]).toMatchObject({ verdict: null, differenceMicrograms: g(9_500), postedMicrograms: g(9_500) });
    expect(bookMicrograms).toBe(g(9_500));
  });

  it('never read less than nothing in a cylinder', () => {
    const { checks } = walkCylinder(
      [step(0, { readings: [reading('only', -20, 0)], postedMicrograms: g(-12) })],
      g(12),
    );
    expect(checks[0]).toMatchObject({ contentMicrograms: 0n, differenceMicrograms: g(-12) });
  });
});
