import { describe, expect, it } from 'vitest';
import { heldBetween } from './holders.ts';

const history = [
  { personId: 'brandt', from: 100 },
  { personId: 'oduya', from: 200 },
  { personId: null, from: 300 },
];

describe('A difference between two readings', () => {
  it('is charged to whoever held the cylinder in between, in order, with their times', () => {
    expect(heldBetween(history, 150, 250)).toEqual([
      { personId: 'brandt', from: 150, to: 200 },
      { personId: 'oduya', from: 200, to: 250 },
    ]);
  });

  it('is not charged to the one who holds it when it is found', () => {
    expect(heldBetween(history, 120, 200)).toEqual([{ personId: 'brandt', from: 120, to: 200 }]);
  });

  it('is charged to nobody for the time in which it was assigned to nobody', () => {
    expect(heldBetween(history, 310, 400)).toEqual([{ personId: null, from: 310, to: 400 }]);
  });

  it('without an earlier reading goes back to the first who is known to have held it', () => {
    expect(heldBetween(history, null, 150)).toEqual([{ personId: 'brandt', from: 100, to: 150 }]);
    expect(heldBetween(history, null, 90)).toEqual([]);
    expect(heldBetween([], 10, 20)).toEqual([]);
  });

  it('counts a span once, though the register was written twice', () => {
    const twice = [...history.slice(0, 1), { personId: 'brandt', from: 150 }];
    expect(heldBetween(twice, 120, 180)).toEqual([{ personId: 'brandt', from: 120, to: 180 }]);
  });
});
