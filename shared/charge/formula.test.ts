import { describe, expect, it } from 'vitest';
import { declared, result } from './formula.fixture.ts';
import { compileFormula } from './formula.ts';

describe('A formula', () => {
  it.each([
    ['L', 12.3],
    ['-L', -12.3],
    ['(L - Lp) * 20', 96],
    ['L635*15 + L952*30', 219],
    ['L1588 * 170', 0],
    ['2 ^ 3 ^ 2', 512],
    ['-2 ^ 2', -4],
    ['7 - 4 - 2', 1],
    ['12 / 4 / 3', 1],
    ['1e2 * 2', 200],
    ['max(0, L - 20)', 0],
    ['min(L, Lp, 3)', 3],
    ['max(5)', 5],
    ['ceil(L / 5) * 5', 15],
    ['floor(L)', 12],
    ['ceil(-2.5)', -2],
    ['floor(-2.5)', -3],
    ['round(2.5)', 3],
    ['round(-2.5)', -3],
    ['round(1.005, 2)', 1.01],
    ['\t( ( L ) )', 12.3],
    ['.5 * N', 1],
    ['4 ^ 0.5', 2],
    ['L * 0', 0],
    ['-0', 0],
  ])('reads %s as %d', (expression, expected) => {
    expect(result(expression)).toBe(expected);
  });

  it('never steps from binary noise', () => {
    expect(Math.ceil((12.3 - 7.5) * 20)).toBe(97);
    expect(result('ceil((L - Lp) * 20)')).toBe(96);
    expect(Math.floor(0.29 * 100)).toBe(28);
    expect(result('floor(0.29 * 100)')).toBe(29);
    expect(Math.floor((0.7 + 0.1) * 10)).toBe(7);
    expect(result('floor((0.7 + 0.1) * 10)')).toBe(8);
    expect(result('ceil((0.3 - 0.1 - 0.2) * 1000)')).toBe(0);
    expect(result('max(0.1 + 0.2, 0.3) - 0.3')).toBe(0);
  });

  it('gives no number where there is none', () => {
    for (const expression of ['1 / 0', '0 / 0', '-1 / (N - 2)', '(-8) ^ 0.5', '0 ^ -1', '10 ^ 17', '2 ^ -17']) {
      expect([expression, result(expression)]).toEqual([expression, null]);
    }
    for (const expression of [
      '9e307 * 10',
      '1e308 + 1e308',
      '1e300 ^ 2',
      'round(L, 99)',
      'round(L, -1)',
      'round(L, 0.5)',
    ]) {
      expect([expression, result(expression)]).toEqual([expression, null]);
    }
  });

  it('tells which names stand in it', () => {
    const compiled = compileFormula('max(0, L952 - Lp) * 20', declared);
    expect(compiled.ok && [...compiled.value.names].sort()).toEqual(['L952', 'Lp']);
  });

  it('notices a comma between digits, which may have been a decimal', () => {
    const comma = (expression: string) => {
      const compiled = compileFormula(expression, declared);
      return compiled.ok && compiled.value.digitsAroundComma;
    };
    expect(comma('max(0, L-7,5)')).toBe('7,5');
    expect(comma('max(0, L - 7.5)')).toBeNull();
    expect(result('L * 1,5')).toBe('formulaSyntax');
  });

  it('is compiled once for the same text', () => {
    expect(compileFormula('L * 21', declared)).toBe(compileFormula('L * 21', declared));
  });

  it('keeps its answer for each set of names apart', () => {
    expect(compileFormula('L + X', declared).ok).toBe(false);
    expect(compileFormula('L + X', new Set(['L', 'X'])).ok).toBe(true);
    expect(compileFormula('L + X', declared).ok).toBe(false);
  });

  it('is bounded in length, parts and depth', () => {
    expect(result(`L${' '.repeat(499)}`)).toBe(12.3);
    expect(result(`L${' '.repeat(500)}`)).toBe('formulaTooLong');
    expect(result(`L${'+1'.repeat(99)}`)).toBe('formulaTooComplex');
    expect(result(`max(${'1,'.repeat(150)}1)`)).toBe(1);
    expect(result(`max(${'1,'.repeat(199)}1)`)).toBe('formulaTooComplex');
    expect(result(`${'('.repeat(30)}L${')'.repeat(30)}`)).toBe(12.3);
    expect(result(`${'('.repeat(41)}L${')'.repeat(41)}`)).toBe('formulaTooComplex');
    expect(result(`${'('.repeat(249)}L${')'.repeat(249)}`)).toBe('formulaTooComplex');
    expect(result('('.repeat(41))).toBe('formulaTooComplex');
    expect(result(`${'-'.repeat(499)}L`)).toBe('formulaTooComplex');
    expect(result(`2${'^2'.repeat(249)}`)).toBe('formulaTooComplex');
  });
});
