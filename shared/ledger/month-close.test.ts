import { describe, expect, it } from 'vitest';
import type { AddedEntry } from './added-entry.ts';
import { g, place } from './judged-group-builder.ts';
import { type Settlement, settlementsToUndo } from './month-close.ts';

const settled = (massG: number, settledTo = 'atmosphere:measured'): Settlement => ({
  groupId: 'B',
  judgedPlace: place('C1'),
  difference: place('cylinderDifference'),
  settledTo: place(settledTo),
  refrigerant: 'R-410A',
  massMicrograms: g(massG),
});
/** The judge still posts this much from C1 into its difference. */
const judged = (massG: number): AddedEntry => ({
  groupId: 'B',
  judgedPlace: place('C1'),
  place: place('C1'),
  counterPlace: place('cylinderDifference'),
  refrigerant: 'R-410A',
  massMicrograms: g(-massG),
  atLeast: false,
  takenBack: false,
});

describe('what month close made of a difference', () => {
  it('stands while the difference does', () => {
    expect(settlementsToUndo([settled(90)], [judged(90)])).toEqual([]);
  });
  it('is reversed with the difference that is explained, in part or whole', () => {
    expect(settlementsToUndo([settled(90)], [judged(50)])).toMatchObject([
      { from: place('atmosphere:measured'), to: place('cylinderDifference'), massMicrograms: g(40) },
    ]);
    expect(settlementsToUndo([settled(90)], [])).toMatchObject([{ massMicrograms: g(90) }]);
  });
  it('is reversed from the last settlement first', () => {
    const undone = settlementsToUndo([settled(60), settled(30, 'missing')], [judged(70)]);
    expect(undone).toMatchObject([{ from: place('missing'), massMicrograms: g(20) }]);
  });
  it('is reversed whole where the difference has turned round, and works the same for a surplus', () => {
    expect(settlementsToUndo([settled(90)], [judged(-20)])).toMatchObject([{ massMicrograms: g(90) }]);
    expect(settlementsToUndo([settled(-90, 'supplier')], [judged(-50)])).toMatchObject([
      { from: place('cylinderDifference'), to: place('supplier'), massMicrograms: g(40) },
    ]);
  });
});
