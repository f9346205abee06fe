import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { g } from './judged-group-builder.ts';
import { plus, splitByBook, totalOf } from './mass-by-refrigerant.ts';

describe('a mass split by the book of a mixed cylinder', () => {
  it('goes 40 to 10 for 50 g out of 4,000 g and 1,000 g (scenario S18)', () => {
    const book = { 'R-410A': g(4_000), 'R-22': g(1_000) };
    expect(splitByBook(book, g(50))).toEqual({ 'R-410A': g(40), 'R-22': g(10) });
    expect(splitByBook(book, g(-50))).toEqual({ 'R-410A': g(-40), 'R-22': g(-10) });
  });
  it('gives the left-over microgram to the largest remainder, and of equal ones to the first in the alphabet', () => {
    expect(splitByBook({ 'R-32': 2n, 'R-22': 1n }, 10n)).toEqual({ 'R-22': 3n, 'R-32': 7n });
    expect(splitByBook({ 'R-32': 1n, 'R-22': 1n }, 3n)).toEqual({ 'R-22': 2n, 'R-32': 1n });
  });
  it('sums exactly, and no share exceeds what the book holds while the mass does not', () => {
    const masses = fc.bigInt({ min: 1n, max: 10n ** 13n });
    fc.assert(
      fc.property(masses, masses, masses, fc.bigInt({ min: 1n, max: 10n ** 13n }), (a, b, c, mass) => {
        const book = { 'R-22': a, 'R-32': b, 'R-410A': c };
        const parts = splitByBook(book, mass) ?? {};
        expect(totalOf(parts)).toBe(mass);
        if (mass > a + b + c) return;
        for (const [refrigerant, part] of Object.entries(parts)) {
          expect(part <= book[refrigerant as keyof typeof book]).toBe(true);
        }
      }),
      { seed: 20261205 },
    );
  });
  it('has no share for what the book holds below zero, and no ratio in an empty book', () => {
    expect(splitByBook({ 'R-22': -5n, 'R-32': 5n }, 3n)).toEqual({ 'R-32': 3n });
    expect(splitByBook({}, 3n)).toBeNull();
    expect(splitByBook({ 'R-22': -5n }, 3n)).toBeNull();
  });
});

it('a book keeps no refrigerant of which nothing is left', () => {
  expect(plus({ 'R-22': 5n, 'R-32': 1n }, 'R-22', -5n)).toEqual({ 'R-32': 1n });
});
