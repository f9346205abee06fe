import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type CylinderStep, walkCylinder } from '../statements/walk-cylinder.ts';
import { replayCylinder } from './judge-cylinder.ts';
import type { JudgedGroup } from './judged-group.ts';
import { cylinderRegister, day, g, group, moved, read } from './judged-group-builder.ts';
import { weighedGroupOf } from './judged-weighing.ts';

const C1 = cylinderRegister('C1');
const weighed = (onDay: number, netG: number, over = {}) =>
  group(`weighed ${onDay}`, onDay, { kind: 'weighing', readings: [read('C1', 'only', netG, over)] });
const issue = (onDay: number, beforeG: number, afterG: number, over = {}) =>
  group(`issue ${onDay}`, onDay, {
    readings: [read('C1', 'before', beforeG, over), read('C1', 'after', afterG, over)],
    masses: [moved('C1 -> U', beforeG - afterG)],
  });
const flagged = (groups: JudgedGroup[]) =>
  replayCylinder(C1, groups).flags.map(({ code, groupId, massMicrograms }) => [code, groupId, massMicrograms]);

/** Source: GUM (JCGM 100) Type B by hand: sqrt(18) readings of 5 g, 2 u is 12.25 g, 3 u 18.37 g. */
describe('What is put before the manager of a cylinder’s reading', () => {
  const eightIssues = Array.from({ length: 8 }, (_, n) => issue(2 + n, 9_500 - n * 100, 9_400 - n * 100));
  const differingBy = (differenceG: number) => [weighed(1, 9_500), ...eightIssues, weighed(20, 8_700 + differenceG)];

  it('is nothing while everything that its book rests on explains it, though the book follows the reading', () => {
    const groups = [...differingBy(-4), weighed(25, 8_692)];
    expect(flagged(groups)).toEqual([]);
    expect(replayCylinder(C1, groups).added.map(({ massMicrograms }) => massMicrograms)).toEqual([g(9_500), g(-8)]);
  });

  it('asks to look again up to three times the uncertainty, and beyond says that it is not explained', () => {
    expect(flagged(differingBy(-12))).toEqual([]);
    expect(flagged(differingBy(-15))).toEqual([['cylinderLookAgain', 'weighed 20', g(-15)]]);
    expect(flagged(differingBy(20))).toEqual([['cylinderNotExplained', 'weighed 20', g(20)]]);
  });

  it('is of the reading that set the book last: what was issued before it counts no longer', () => {
    expect(flagged([...differingBy(-12), weighed(25, 8_680)])).toEqual([['cylinderNotExplained', 'weighed 25', g(-8)]]);
  });

  it('is the word that statement and books use for the same reading, on whatever scales, however long the timeline', () => {
    const scale = fc.record({
      resolutionG: fc.constantFrom(1, 5),
      repeatabilityG: fc.constantFrom(0, 2),
      spanErrorRelative: fc.constantFrom(0, 0.001),
      offsetG: fc.constantFrom(0, 5),
    });
    const move = fc.record({
      which: fc.constantFrom('weighed', 'issue', 'issue'),
      tool: fc.constantFrom('scale 1', 'scale 1', 'scale 2'),
      offG: fc.integer({ min: -16, max: 16 }),
      isShared: fc.boolean(),
    });
    fc.assert(
      fc.property(scale, scale, fc.array(move, { minLength: 1, maxLength: 25 }), (one, two, moves) => {
        let netG = 9_500;
        const groups = [weighed(1, netG, { scale: one, toolId: 'scale 1', at: day(1) })];
        for (const [index, { which, tool, offG, isShared }] of moves.entries()) {
          const onDay = index + 2;
          const over = { scale: tool === 'scale 1' ? one : two, toolId: tool };
          // A shared reading is one and the same figure of one scale at one moment.
          const at = isShared ? { ...over, at: day(onDay) } : over;
          const next = isShared ? { ...over, at: day(onDay + 1) } : { ...over, at: day(onDay) + 60_000 };
          netG += offG;
          if (which === 'weighed') groups.push(weighed(onDay, netG, over));
          else {
            const made = issue(onDay, netG, netG - 50);
            const [before, later] = made.readings;
            groups.push({ ...made, readings: [{ ...before, ...at } as never, { ...later, ...next } as never] });
            netG -= 50;
          }
        }
        const { flags, added } = replayCylinder(C1, groups);
        const steps = groups.map((each): CylinderStep => {
          const own = added.filter(({ groupId }) => groupId === each.id);
          return {
            ...weighedGroupOf(each, 'C1'),
            occurredAt: each.occurredAt,
            tareMicrograms: g(7_700),
            postedMicrograms: own.reduce((sum, { massMicrograms }) => sum + massMicrograms, 0n),
            opens: own.some(({ counterPlace }) => counterPlace.place === 'opening'),
          };
        });
        const beyond = walkCylinder(steps, 0n)
          .checks.filter(({ postedMicrograms, verdict }) => postedMicrograms !== 0n && verdict !== null)
          .filter(({ verdict }) => verdict !== 'withinScales')
          .map(({ groupId, verdict }) => [
            groupId,
            verdict === 'lookAgain' ? 'cylinderLookAgain' : 'cylinderNotExplained',
          ]);
        expect(flags.map(({ groupId, code }) => [groupId, code])).toEqual(beyond);
      }),
    );
  });
});
