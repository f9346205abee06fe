import { describe, expect, it } from 'vitest';
import { type AddedEntry, changesAgainst, netted, postedAsAdded } from './added-entry.ts';
import { g, place } from './judged-group-builder.ts';

const entry = (over: Partial<AddedEntry> = {}): AddedEntry => ({
  groupId: 'a',
  judgedPlace: place('U'),
  place: place('U'),
  counterPlace: place('atmosphere:inferred'),
  refrigerant: 'R-410A',
  massMicrograms: g(-300),
  atLeast: false,
  takenBack: false,
  ...over,
});
const NOTHING_POSTED: ReadonlySet<string> = new Set();

describe('the change alone', () => {
  it('is everything where nothing is posted yet, in the group itself', () => {
    expect(changesAgainst([], [entry()], new Set(['a']))).toMatchObject([
      {
        from: place('U'),
        to: place('atmosphere:inferred'),
        massMicrograms: g(300),
        correctsGroupId: null,
        groupId: 'a',
      },
    ]);
  });
  it('is the difference where another mass is posted, naming the group that it corrects', () => {
    expect(changesAgainst([entry()], [entry({ massMicrograms: g(-120) })], NOTHING_POSTED)).toMatchObject([
      { from: place('atmosphere:inferred'), to: place('U'), massMicrograms: g(180), correctsGroupId: 'a' },
    ]);
  });
  it('takes back what is no longer said, and is nothing where all is as it should be', () => {
    expect(changesAgainst([entry()], [], NOTHING_POSTED)).toMatchObject([
      { from: place('atmosphere:inferred'), massMicrograms: g(300) },
    ]);
    expect(changesAgainst([entry()], [entry()], NOTHING_POSTED)).toEqual([]);
  });
  it('turns a loss into one of at least that much by two entries', () => {
    expect(changesAgainst([entry()], [entry({ atLeast: true })], NOTHING_POSTED)).toMatchObject([
      { to: place('atmosphere:inferred'), atLeast: true, massMicrograms: g(300) },
      { from: place('atmosphere:inferred'), atLeast: false, massMicrograms: g(300) },
    ]);
  });
  it('reads back from what it posted, whichever end is the judged place, or neither', () => {
    const desired = [
      entry(),
      entry({ counterPlace: place('opening'), massMicrograms: g(990) }),
      entry({ place: place('opening'), counterPlace: place('atmosphere:beforeOurCare'), massMicrograms: g(-300) }),
    ];
    const readBack = changesAgainst([], desired, new Set(['a'])).map((change) => postedAsAdded(change));
    expect(changesAgainst(readBack, desired, NOTHING_POSTED)).toEqual([]);
    const corrected = changesAgainst(readBack, [], NOTHING_POSTED);
    const both = [...readBack, ...corrected.map((change) => postedAsAdded({ ...change, groupId: 'later' }))];
    expect(netted(both)).toEqual([]);
  });
});

it('netting sums one key and leaves out what comes to nothing', () => {
  expect(netted([entry(), entry({ massMicrograms: g(300) })])).toEqual([]);
  expect(netted([entry(), entry({ massMicrograms: g(-50) })])).toMatchObject([{ massMicrograms: g(-350) }]);
  expect(netted([entry(), entry({ groupId: 'b' })])).toHaveLength(2);
});
