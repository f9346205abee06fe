import { describe, expect, it } from 'vitest';
import { cylinder, entryRow, groupView, nowhere, unit } from './entry-row.fixture.ts';
import { groupsTiedTo, groupsToAskFor, reversedEntry, tiesOf } from './ties.ts';

const wrong = entryRow({ sequence: 88, groupId: 'wrong', massG: 540, reversedByGroupId: 'reversal' });
const reversal = entryRow({
  sequence: 91,
  groupId: 'reversal',
  massG: 540,
  from: wrong.to,
  to: wrong.from,
  reversesGroupId: 'wrong',
  correctsGroupId: 'wrong',
});
const judgedAgain = entryRow({
  sequence: 93,
  groupId: 'reversal',
  massG: 20,
  from: nowhere('cylinderDifference'),
  to: cylinder('7741'),
  addedByServer: true,
  correctsGroupId: 'wrong',
  reversesGroupId: 'wrong',
});
const right = entryRow({ sequence: 92, groupId: 'right', massG: 450 });
const other = entryRow({ sequence: 94, groupId: 'other' });
const rows = [other, judgedAgain, right, reversal, wrong];

describe('Groups of the log', () => {
  it('are named by the number of what a person entered, not by what was worked out with it', () => {
    const first = entryRow({ sequence: 79, groupId: 'right', addedByServer: true });
    expect(tiesOf([...rows, first], []).numbers.get('right')?.first).toBe(92);
  });

  it('are asked for where only their view says what stands in their place, or where they are out of reach', () => {
    expect(groupsToAskFor(rows)).toEqual(['wrong']);
    expect(groupsToAskFor([wrong])).toEqual(['wrong', 'reversal']);
    expect(groupsToAskFor([other])).toEqual([]);
  });

  it('have their number also where their entries stand further down than what has been read', () => {
    const far = groupView({ id: 'wrong', entries: [wrong], replacedByGroupId: 'right' });
    const ties = tiesOf([reversal, right], [far]);
    expect(ties.numbers.get('wrong')?.first).toBe(88);
    expect(ties.corrects.get('right')).toBe('wrong');
  });

  it.each(['wrong', 'reversal', 'right'])('tie reversal, correction and original together from %s', (open) => {
    const ties = tiesOf(rows, [groupView({ id: 'wrong', entries: [wrong], replacedByGroupId: 'right' })]);
    expect([...groupsTiedTo(open, rows, ties)].sort()).toEqual(['reversal', 'right', 'wrong']);
  });
});

describe('A reversal', () => {
  it('belongs to the entry with the same mass the other way round', () => {
    const hose = entryRow({ sequence: 89, groupId: 'wrong', massG: 28, to: nowhere('atmosphere', 'hose') });
    expect(reversedEntry(reversal, [hose, wrong])?.sequence).toBe(88);
    expect(reversedEntry({ ...reversal, from: unit('0355') }, [hose, wrong])).toBeUndefined();
  });
});
