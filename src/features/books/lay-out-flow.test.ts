import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { flowSides } from './flow-parts.ts';
import { layOutFlow } from './lay-out-flow.ts';

const SPACE = {
  width: 900,
  labelWidths: { left: 120, right: 170 },
  labelHeight: 44,
  beamHeight: 260,
  beamWidth: 60,
  figures: 4,
};

const part = (name: string, massG: number) => ({ part: name as never, massG, entryCount: 1 });
const sidesOf = (cameIn: [string, number][], wentOut: [string, number][]) =>
  flowSides({
    cameIn: cameIn.map(([name, massG]) => part(name, massG)),
    wentOut: wentOut.map(([name, massG]) => part(name, massG)),
    totalG: 0,
  });

describe('the sides of the flow picture', () => {
  it('draw what is below zero at the other side, so that both sides stay equal', () => {
    const { left, right } = sidesOf(
      [
        ['onHandStart', 1000],
        ['recovered', -50],
      ],
      [
        ['onHandEnd', 970],
        ['cylinderDifference', -20],
      ],
    );
    expect(left.map(({ key, massG, turned }) => [key, massG, turned])).toEqual([
      ['onHandStart', 1000, false],
      ['cylinderDifference', 20, true],
    ]);
    expect(right.map(({ key, massG }) => [key, massG])).toEqual([
      ['onHandEnd', 970],
      ['recovered', 50],
    ]);
  });

  it('leave out what is nothing: an empty stock at the start has no ribbon', () => {
    expect(
      sidesOf(
        [
          ['onHandStart', 0],
          ['bought', 5],
        ],
        [['onHandEnd', 5]],
      ).left.map(({ key }) => key),
    ).toEqual(['bought']);
  });
});

describe('the layout of the flow picture', () => {
  const masses = fc.array(fc.double({ min: 0.001, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 9 });

  it('keeps words at least their height apart and inside, whatever the masses', () => {
    fc.assert(
      fc.property(masses, masses, (lefts, rights) => {
        const named = (values: number[]) => values.map((massG, index) => [`p${index}`, massG] as [string, number]);
        const layout = layOutFlow(sidesOf(named(lefts), named(rights)), 1000, SPACE);
        for (const side of ['left', 'right'] as const) {
          const labels = layout.ribbons.filter((ribbon) => ribbon.side === side).map(({ labelY }) => labelY);
          labels.forEach((y, index) => {
            expect(y).toBeGreaterThanOrEqual(SPACE.labelHeight / 2 - 1e-6);
            expect(y).toBeLessThanOrEqual(layout.height - SPACE.labelHeight / 2 + 1e-6);
            const before = labels[index - 1];
            if (before !== undefined) expect(y - before).toBeGreaterThanOrEqual(SPACE.labelHeight - 1e-6);
          });
        }
      }),
    );
  });

  it('draws all ribbons to the scale of the beam, and the least so that it is seen', () => {
    const layout = layOutFlow(
      sidesOf(
        [
          ['onHandStart', 75_000],
          ['bought', 25_000],
        ],
        [
          ['onHandEnd', 99_999.9],
          ['cylinderDifference', 0.1],
        ],
      ),
      1000,
      SPACE,
    );
    expect(layout.ribbons.map(({ outer }) => outer.height)).toEqual([195, 65, expect.closeTo(260, 2), 2.5]);
  });

  it('has the same way to the beam on both sides, however long the words are', () => {
    const { beam, ribbons } = layOutFlow(sidesOf([['onHandStart', 5]], [['onHandEnd', 5]]), 1000, SPACE);
    const [left, right] = ribbons.map(({ outer }) => outer.x);
    expect(beam.left - (left ?? 0)).toBe((right ?? 0) - beam.right);
  });

  it('sets round figures on the beam, zero at its foot', () => {
    const layout = layOutFlow(sidesOf([['onHandStart', 100_000]], [['onHandEnd', 100_000]]), 1000, SPACE);
    const majors = layout.ticks.filter(({ major }) => major);
    expect(majors.map(({ value }) => value)).toEqual([0, 20, 40, 60, 80, 100]);
    expect(majors[0]?.y).toBe(layout.beam.bottom);
    expect(majors.at(-1)?.y).toBeCloseTo(layout.beam.top);
  });

  it('draws nothing to divide by where there is nothing', () => {
    const layout = layOutFlow(sidesOf([['onHandStart', 0]], [['onHandEnd', 0]]), 1000, SPACE);
    expect(layout.ribbons).toEqual([]);
    expect(layout.ticks).toEqual([]);
  });
});
