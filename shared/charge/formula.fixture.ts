import { expect } from 'vitest';
import { compileFormula } from './formula.ts';
import { FORMULA_PATH } from './formula-contract.ts';

export const declared: ReadonlySet<string> = new Set(['L', 'N', 'Lp', 'L635', 'L952', 'L1588']);
const values = new Map([
  ['L', 12.3],
  ['N', 2],
  ['Lp', 7.5],
  ['L635', 10],
  ['L952', 2.3],
]);

/** The value, null for "no number", or the code of the refusal. Anything else is thrown and fails the test. */
export function result(expression: string): number | string | null {
  const compiled = compileFormula(expression, declared);
  if (compiled.ok) return compiled.value.evaluate(values);
  expect(compiled.refusals).toHaveLength(1);
  expect(compiled.refusals[0]?.path).toBe(FORMULA_PATH);
  return compiled.refusals[0]?.code ?? '';
}
export const CODES = [
  'formulaTooLong',
  'formulaTooComplex',
  'formulaSyntax',
  'formulaNotAllowed',
  'formulaUnknownName',
  'formulaUnknownFunction',
  'formulaArguments',
];
export const isHarmless = (outcome: number | string | null) =>
  outcome === null || (typeof outcome === 'number' ? Number.isFinite(outcome) : CODES.includes(outcome));
