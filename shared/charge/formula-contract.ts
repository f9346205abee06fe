import type { Outcome } from '../problems/outcome.ts';

/**
 * What the engine asks of a formula. The parser behind it (`formula.ts`) is heavy, so the engine never imports it: the
 * server hands it in always, the browser once somebody chooses the formula rate.
 */
export interface CompiledFormula {
  /** The names that stand in it. */
  names: ReadonlySet<string>;
  /** `7,5` between digits: read as two values, which may have been meant as a decimal. */
  digitsAroundComma: string | null;
  /** null: no finite number (a division by zero, a root of a negative number, a power out of bounds). */
  evaluate(values: ReadonlyMap<string, number>): number | null;
}

/** `declared`: every name that may stand in the formula, whether the line set uses it or not. */
export type CompileFormula = (expression: string, declared: ReadonlySet<string>) => Outcome<CompiledFormula>;

export const FORMULA_PATH = '/basis/rate/expression';

/** Characters. Manuals' formulas have a few dozen. */
export const MAX_EXPRESSION_LENGTH = 500;
