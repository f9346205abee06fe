import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compileFormula } from './formula.ts';
import { FORMULA_PATH } from './formula-contract.ts';

const declared: ReadonlySet<string> = new Set(['L', 'N', 'Lp', 'L635', 'L952', 'L1588']);
const values = new Map([
  ['L', 12.3],
  ['N', 2],
  ['Lp', 7.5],
  ['L635', 10],
  ['L952', 2.3],
]);

/** The value, null for "no number", or the code of the refusal. Anything else is thrown and fails the test. */
function result(expression: string): number | string | null {
  const compiled = compileFormula(expression, declared);
  if (compiled.ok) return compiled.value.evaluate(values);
  expect(compiled.refusals).toHaveLength(1);
  expect(compiled.refusals[0]?.path).toBe(FORMULA_PATH);
  return compiled.refusals[0]?.code ?? '';
}
const CODES = [
  'formulaTooLong',
  'formulaTooComplex',
  'formulaSyntax',
  'formulaNotAllowed',
  'formulaUnknownName',
  'formulaUnknownFunction',
  'formulaArguments',
];
const isHarmless = (outcome: number | string | null) =>
  outcome === null || (typeof outcome === 'number' ? Number.isFinite(outcome) : CODES.includes(outcome));

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

describe('Hostile text', () => {
  const hostile = [
    '',
    ' ',
    'constructor',
    '__proto__',
    'prototype',
    'toString',
    'hasOwnProperty',
    'valueOf',
    'L.constructor',
    'L["constructor"]',
    'L.constructor("return process")()',
    '"".constructor.constructor("return 1")()',
    'constructor(1)',
    'toString()',
    '__proto__(1)',
    'hasOwnProperty(1)',
    'cos.constructor("return 1")()',
    'import("fs")',
    'import(1)',
    'require("child_process")',
    'process.exit()',
    'globalThis',
    'this',
    'eval("1")',
    'evaluate(1)',
    'parse(1)',
    'compile(1)',
    'createUnit(1)',
    'simplify(L)',
    'f(x) = x + 1',
    'f(x) = f(x); f(1)',
    'L = 5',
    'L; N',
    'L\nN',
    'L # comment',
    '() => 1',
    'function(){return 1}',
    '[1, 2, 3]',
    '{a: 1}',
    '1:3',
    'L ? 1 : 2',
    'L > 1',
    'L == L',
    'not L',
    'L and N',
    'L or N',
    'L xor N',
    'L to m',
    '5 %',
    '5 % 2',
    '5 mod 2',
    '5!',
    "L'",
    '2L',
    '2 (L)',
    'L N',
    '(2)(3)',
    '+L',
    'L .* 2',
    'L ./ 2',
    'L .^ 2',
    '1 & 2',
    '1 | 2',
    '~1',
    '1 << 2',
    '0x1F',
    '0b11',
    '0o7',
    '1n',
    'Infinity',
    'NaN',
    '1e999',
    'true',
    'null',
    'undefined',
    'i',
    'pi',
    'e',
    'random()',
    'sqrt(4)',
    'max',
    'max()',
    'min()',
    'round()',
    'round(1, 2, 3)',
    'ceil()',
    'ceil(1, 2)',
    'max(max)',
    'L(1)',
    'max(1)(2)',
    'max.call(1)',
    '5 m',
    '5 kg',
    'Ｌ + 1',
    'L\u200b + 1',
    'L\u0000',
    '１ + １',
    'L − 1',
    'L × 2',
    '²',
    '😀',
    '\u202eL',
    'L\\u0031',
    '`L`',
    '$(L)',
    '{{L}}',
    '<script>',
    "'; DROP TABLE entries; --",
    '((((',
    '))))',
    '1 +',
    '* 2',
    '1..2',
    '1.2.3',
    ',',
    'max(,)',
    'max(1,)',
    '$',
    '_',
    'L_',
    'L00635',
    'l',
    'ans',
    'end',
    'unit("5 m")',
    'a'.repeat(500),
    '9'.repeat(500),
  ];

  it.each(hostile)('is refused: %j', (expression) => {
    expect(CODES).toContain(result(expression));
  });

  it('changes nothing that others share', () => {
    for (const expression of hostile) result(expression);
    expect(Object.prototype).toEqual({});
    expect(result('L * 20')).toBe(246);
  });
});

describe('Generated text', () => {
  const name = fc.constantFrom('L', 'N', 'Lp', 'L635', 'L952', 'x', 'constructor', '__proto__', 'pi', 'Infinity');
  const number = fc.oneof(
    fc.double({ noNaN: true, noDefaultInfinity: true }).map(String),
    fc.integer({ min: -50, max: 50 }).map(String),
    fc.constantFrom('0', '.5', '1e308', '1e-320', '007', '1.'),
  );
  const { expression } = fc.letrec<{ expression: string }>((tie) => ({
    expression: fc.oneof(
      { maxDepth: 7, withCrossShrink: true },
      name,
      number,
      fc
        .tuple(
          tie('expression'),
          fc.constantFrom('+', '-', '*', '/', '^', ' ', '%', '==', '=', ',', '.'),
          tie('expression'),
        )
        .map(([a, sign, b]) => `${a}${sign}${b}`),
      tie('expression').map((inner) => `(${inner})`),
      tie('expression').map((inner) => `-${inner}`),
      fc
        .tuple(
          fc.constantFrom('min', 'max', 'round', 'ceil', 'floor', 'sqrt', 'import', 'toString'),
          fc.array(tie('expression'), { maxLength: 3 }),
        )
        .map(([called, parts]) => `${called}(${parts.join(', ')})`),
    ),
  }));
  const noise = fc.array(
    fc.oneof(
      fc.string({ unit: 'binary', maxLength: 4 }),
      fc.constantFrom('(', ')', 'max(', 'L', '-', '^', '*', '7', '.', ',', ' ', 'e', '[', '"', ';', '=>', '{}'),
    ),
    { maxLength: 60 },
  );

  it('of the language and beside it gives a finite number, none, or a refusal', () => {
    let numbers = 0;
    fc.assert(
      fc.property(expression, (text) => {
        const outcome = result(text.slice(0, 600));
        if (typeof outcome === 'number') numbers += 1;
        return isHarmless(outcome);
      }),
      { numRuns: 5000 },
    );
    expect(numbers).toBeGreaterThan(500);
  });

  it('of any signs gives a finite number, none, or a refusal', () => {
    fc.assert(
      fc.property(noise, (parts) => isHarmless(result(parts.join('')))),
      { numRuns: 5000 },
    );
  });
});
