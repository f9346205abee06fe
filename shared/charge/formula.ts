import type { FactoryFunctionMap, MathNode } from 'mathjs';
import { create, parseDependencies } from 'mathjs/number';
import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { type CompiledFormula, FORMULA_PATH, MAX_EXPRESSION_LENGTH } from './formula-contract.ts';
import { buildFormula, FormulaRefused, NoNumber } from './formula-tree.ts';

/**
 * The manual's formula for the line part, in a closed language: numbers, the declared names, + - * / ^, a minus sign,
 * parentheses, min, max, round, ceil, floor. The parser turns the text into a tree; the tree is walked against a list
 * of what may stand in it and rebuilt from our own functions. Nothing of the parser's library ever evaluates anything.
 *
 * Whatever the text, the answer is a formula or a refusal at `/basis/rate/expression`, never a throw.
 */
const { parse } = create(parseDependencies as FactoryFunctionMap) as { parse(text: string): MathNode };

/** Letters, digits and signs of the language. Keeps out strings, brackets, assignments, comments and look-alikes. */
const FOREIGN = /[^A-Za-z0-9_.,+\-*/^() \t]/u;
/** `0x1F`, `0b1`: numbers to the parser, but to nobody who copies a manual. */
const PREFIXED_NUMBER = /\b0[xXbBoO][0-9A-Fa-f]/;
const DIGITS_AROUND_COMMA = /\d+,\d+/;
const MAX_NESTING = 40;
/** A firm has a few dozen formulas; the bound is against a stranger who tries many. */
const MAX_REMEMBERED = 500;

const remembered = new WeakMap<ReadonlySet<string>, Map<string, Outcome<CompiledFormula>>>();

/** Compiles once for each text: the same formula is calculated at every key stroke of a form. */
export function compileFormula(expression: string, declared: ReadonlySet<string>): Outcome<CompiledFormula> {
  if (expression.length > MAX_EXPRESSION_LENGTH) {
    return refusal('formulaTooLong', expression.length, MAX_EXPRESSION_LENGTH);
  }
  let formulas = remembered.get(declared);
  if (!formulas) {
    formulas = new Map();
    remembered.set(declared, formulas);
  }
  const known = formulas.get(expression);
  if (known) return known;
  const compiled = compile(expression, declared);
  if (formulas.size >= MAX_REMEMBERED) formulas.clear();
  formulas.set(expression, compiled);
  return compiled;
}

function compile(expression: string, declared: ReadonlySet<string>): Outcome<CompiledFormula> {
  const foreign = FOREIGN.exec(expression)?.[0] ?? PREFIXED_NUMBER.exec(expression)?.[0];
  if (foreign !== undefined) return refusal('formulaNotAllowed', foreign, null);
  // Before parsing, which descends a dozen calls for each parenthesis.
  if (nesting(expression) > MAX_NESTING) return refusal('formulaTooComplex', null, MAX_NESTING);

  let tree: MathNode;
  try {
    tree = parse(expression);
  } catch (error) {
    const at = (error as { char?: unknown }).char;
    const position = typeof at === 'number' ? at : expression.length;
    return refusal('formulaSyntax', position, null);
  }
  try {
    const names = new Set<string>();
    const evaluate = buildFormula(tree, declared, names);
    return done({
      names,
      digitsAroundComma: DIGITS_AROUND_COMMA.exec(expression)?.[0] ?? null,
      evaluate: (values) => {
        try {
          return evaluate(values);
        } catch (error) {
          if (error instanceof NoNumber) return null;
          throw error;
        }
      },
    });
  } catch (error) {
    if (error instanceof FormulaRefused) return refusal(error.code, error.given, error.allowed);
    throw error;
  }
}

function nesting(expression: string): number {
  let depth = 0;
  let deepest = 0;
  for (const sign of expression) {
    if (sign === '(') deepest = Math.max(deepest, ++depth);
    else if (sign === ')') depth--;
  }
  return deepest;
}

function refusal(
  code: FormulaRefused['code'] | 'formulaTooLong' | 'formulaSyntax',
  given: string | number | null,
  allowed: FormulaRefused['allowed'],
): Outcome<never> {
  const params: Refusal['params'] = {};
  if (given !== null) params.given = given;
  if (allowed !== null) params.allowed = typeof allowed === 'object' ? allowed.join(', ') : allowed;
  return refused({ code, path: FORMULA_PATH, given, allowed, params });
}
