import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CODES, isHarmless, result } from './formula.fixture.ts';

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
