import { describe, expect, it } from 'vitest';
import { ASSUMED_SCALE, type Scale } from '../ledger/scale.ts';
import { g, reading, step } from './cylinder-steps.fixture.ts';
import { statementFigures } from './statement-figures.ts';
import type { CylinderStep } from './walk-cylinder.ts';

const weighed = (at: number, netG: number, postedG = 0, scale?: Scale) =>
  step(at, { readings: [reading('only', netG, at, scale && { scale })], postedMicrograms: g(postedG) });
const opened = (at: number, netG: number) => ({ ...weighed(at, netG, netG), opens: true });
/** Issues of 100 g, each with its own pair of readings, the book at `fromG` before them. */
const issues = (count: number, firstAt: number, fromG: number): CylinderStep[] =>
  Array.from({ length: count }, (_, n) => {
    const [at, beforeG] = [firstAt + n * 10, fromG - n * 100];
    return step(at, {
      readings: [reading('before', beforeG, at), reading('after', beforeG - 100, at + 1)],
      masses: [{ massMicrograms: g(-100), weighed: true, otherScale: null }],
    });
  });
const onPaper = (at: number, massG: number) =>
  step(at, { masses: [{ massMicrograms: g(massG), weighed: false, otherScale: null }] });

/** Source: GUM (JCGM 100) Type B worked by hand, d = 5 g: one reading u = 1.4434 g, sqrt(18) of them 6.124 g. */
describe('The difference of a period', () => {
  it('counts from the reading that its opening book rests on, so that it never contradicts the line of its reading', () => {
    // Weighed 4 g low in between: within the scales, so that the book kept its own figure and rests on the first reading.
    const steps = [opened(0, 9_500), ...issues(8, 10, 9_500), weighed(200, 8_696), weighed(1_000, 8_692)];
    const { checks, difference } = statementFigures(steps, g(8_700), 900);
    const figures = { standardG: expect.closeTo(6.1237, 3), independentReadings: 18 };
    expect(checks).toMatchObject([{ verdict: 'withinScales', uncertainty: figures }]);
    expect(difference).toMatchObject({
      differenceMicrograms: g(-8),
      verdict: 'withinScales',
      uncertainty: figures,
      restsOnAt: 0,
    });
  });

  it('within which the book followed a reading counts from what the book rested on before that', () => {
    const steps = [opened(0, 9_500), ...issues(8, 10, 9_500), weighed(200, 8_680, -20), weighed(300, 8_678)];
    const { checks, difference } = statementFigures(steps, g(8_700), 150);
    expect(checks.map(({ verdict }) => verdict)).toEqual(['notExplained', 'withinScales']);
    expect(difference).toMatchObject({
      differenceMicrograms: g(-22),
      verdict: 'notExplained',
      uncertainty: { independentReadings: 18 },
      restsOnAt: 0,
    });
  });

  it('of a book on paper tells as many readings as its figure is made of: the paper counts as one', () => {
    const steps = [onPaper(0, 9_500), ...issues(8, 10, 9_496), weighed(200, 8_696)];
    const { difference } = statementFigures(steps, 0n, 0);
    expect(difference?.uncertainty).toMatchObject({ standardG: expect.closeTo(6.1237, 3), independentReadings: 18 });
    expect(difference).toMatchObject({ restsOnAt: null, verdict: 'withinScales', differenceMicrograms: g(-4) });
  });

  it('blames nobody for the zero of a scale: a first reading within it leaves the book on its paper', () => {
    const scale: Scale = { ...ASSUMED_SCALE, offsetG: 10 };
    const steps = [onPaper(0, 9_500), weighed(10, 9_489, 0, scale), weighed(20, 9_489, 0, scale)];
    const { checks, difference } = statementFigures(steps, 0n, 0);
    expect(checks.map(({ verdict }) => verdict)).toEqual(['withinScales', 'withinScales']);
    // 2 x 25/12 + 10^2/3
    expect(difference?.uncertainty.standardG).toBeCloseTo(Math.sqrt(50 / 12 + 100 / 3), 6);
  });
});
