import { describe, expect, it } from 'vitest';
import { finalBalanceRefusals } from './final-balance.ts';
import { g, moved, place } from './judged-group-builder.ts';

const balance = (symbol: string, massG: number, known?: boolean) => ({
  place: place(symbol),
  refrigerant: 'R-410A',
  massMicrograms: g(massG),
  ...(known === undefined ? {} : { known }),
});

describe('a balance below zero after the whole posting', () => {
  it('is refused at the mass that takes too much, with what was taken and what the book holds', () => {
    const masses = [moved('C1 -> atmosphere:hose', 5), moved('C1 -> U', 62)];
    expect(finalBalanceRefusals([balance('C1', -7)], masses)).toMatchObject([
      { code: 'exceedsBook', path: '/entries/1/mass', given: '67', allowed: '60', params: { shortG: '7' } },
    ]);
  });
  it('is refused without a path where no mass of the request takes it, as in a reversal', () => {
    expect(finalBalanceRefusals([balance('C1', -7)])).toMatchObject([{ path: '', given: '0', allowed: '-7' }]);
  });
  it('holds for cylinders and known units; a sum, a difference and a party may stand below zero', () => {
    expect(finalBalanceRefusals([balance('U', -1, true)])).toHaveLength(1);
    expect(finalBalanceRefusals([balance('U', -1, false)])).toEqual([]);
    expect(finalBalanceRefusals([balance('cylinderDifference', -1), balance('customer', -1)])).toEqual([]);
    expect(finalBalanceRefusals([balance('C1', 0)])).toEqual([]);
  });
});
