import type { ConstantNode, FunctionNode, MathNode, OperatorNode, ParenthesisNode, SymbolNode } from 'mathjs';
import { roundTo, snap12, snapSum } from '../units/round.ts';

export type Values = ReadonlyMap<string, number>;
type Evaluate = (values: Values) => number;

/** Evaluation met something that is no finite number. */
export class NoNumber extends Error {}

export class FormulaRefused extends Error {
  constructor(
    readonly code:
      | 'formulaNotAllowed'
      | 'formulaUnknownName'
      | 'formulaUnknownFunction'
      | 'formulaArguments'
      | 'formulaTooComplex',
    readonly given: string | number | null,
    readonly allowed: string | number | readonly string[] | null,
  ) {
    super(code);
  }
}

const MAX_NODES = 200;
const MAX_DEPTH = 40;
/** No manual raises a length higher than to its square; the bound keeps results within what doubles hold exactly. */
const MAX_POWER = 16;
const MAX_ROUNDING_DECIMALS = 9;

/**
 * Walks the parser's tree and rebuilds it from the functions below. What is on no list here cannot run: node kinds,
 * operators, functions and names are matched by their text, never looked up in an object.
 *
 * Each result is snapped to 12 significant digits, so that floor, ceil and round never step because of binary noise.
 */
export function buildFormula(tree: MathNode, declared: ReadonlySet<string>, names: Set<string>): Evaluate {
  let nodes = 0;

  function build(node: MathNode, depth: number): Evaluate {
    nodes += 1;
    if (nodes > MAX_NODES) throw new FormulaRefused('formulaTooComplex', null, MAX_NODES);
    if (depth > MAX_DEPTH) throw new FormulaRefused('formulaTooComplex', null, MAX_DEPTH);
    switch (node.type) {
      case 'ConstantNode':
        return buildNumber(node as ConstantNode);
      case 'SymbolNode':
        return buildName((node as SymbolNode).name, declared, names);
      case 'ParenthesisNode':
        return build((node as ParenthesisNode).content, depth + 1);
      case 'OperatorNode': {
        const { op, fn, args, implicit } = node as OperatorNode & { implicit: boolean };
        if (implicit) throw new FormulaRefused('formulaNotAllowed', node.toString().slice(0, 40), null);
        const parts = args.map((part) => build(part, depth + 1));
        return buildOperator(String(fn), String(op), parts);
      }
      case 'FunctionNode': {
        const { fn, args } = node as FunctionNode<SymbolNode>;
        const called: MathNode = fn;
        if (called.type !== 'SymbolNode') throw new FormulaRefused('formulaNotAllowed', '(', null);
        nodes += 1;
        const parts = args.map((part) => build(part, depth + 1));
        return buildFunction(fn.name, parts);
      }
      default:
        throw new FormulaRefused('formulaNotAllowed', node.type.replace(/Node$/, ''), null);
    }
  }

  return build(tree, 1);
}

function buildNumber(node: ConstantNode): Evaluate {
  const value: unknown = node.value;
  if (typeof value !== 'number' || !Number.isFinite(value)) {
    throw new FormulaRefused('formulaNotAllowed', String(value), null);
  }
  return () => value;
}

function buildName(name: string, declared: ReadonlySet<string>, names: Set<string>): Evaluate {
  if (!declared.has(name)) throw new FormulaRefused('formulaUnknownName', name, [...declared]);
  names.add(name);
  return (values) => values.get(name) ?? 0;
}

function finite(value: number): number {
  if (!Number.isFinite(value)) throw new NoNumber();
  return Number.isInteger(value) && Math.abs(value) < 1e12 ? value + 0 : snap12(value);
}

/** Terms far beyond any charge can make the sum overflow, which `snapSum` would throw at. */
function sum(a: number, b: number): number {
  const plain = a + b;
  if (!Number.isFinite(plain)) throw new NoNumber();
  return Number.isInteger(a) && Number.isInteger(b) ? finite(plain) : snapSum(a, b);
}

function buildOperator(fn: string, op: string, parts: Evaluate[]): Evaluate {
  const [a, b] = parts;
  if (a && !b && fn === 'unaryMinus') return (values) => -a(values) + 0;
  if (a && b && parts.length === 2) {
    switch (fn) {
      case 'add':
        return (values) => sum(a(values), b(values));
      case 'subtract':
        return (values) => sum(a(values), -b(values));
      case 'multiply':
        return (values) => finite(a(values) * b(values));
      case 'divide':
        return (values) => finite(a(values) / b(values));
      case 'pow':
        return (values) => power(a(values), b(values));
    }
  }
  throw new FormulaRefused('formulaNotAllowed', op, null);
}

function power(base: number, exponent: number): number {
  if (Math.abs(exponent) > MAX_POWER) throw new NoNumber();
  return finite(base ** exponent);
}

const FUNCTIONS = ['min', 'max', 'round', 'ceil', 'floor'] as const;

function buildFunction(name: string, parts: Evaluate[]): Evaluate {
  const [first, second] = parts;
  const wrongCount = (allowed: string) => new FormulaRefused('formulaArguments', name, allowed);
  switch (name) {
    case 'min':
    case 'max': {
      if (!first) throw wrongCount('1 …');
      const choose = name === 'min' ? Math.min : Math.max;
      return (values) => choose(...parts.map((part) => part(values)));
    }
    case 'ceil':
    case 'floor': {
      if (!first || second) throw wrongCount('1');
      const step = name === 'ceil' ? Math.ceil : Math.floor;
      return (values) => finite(step(first(values)));
    }
    case 'round': {
      if (!first || parts.length > 2) throw wrongCount('1, 2');
      return (values) => roundHalfAway(first(values), second ? second(values) : 0);
    }
    default:
      throw new FormulaRefused('formulaUnknownFunction', name, FUNCTIONS);
  }
}

/** Halves away from zero, as everywhere in a charge: round(2.5) is 3, round(-2.5) is -3. */
function roundHalfAway(value: number, decimals: number): number {
  if (!Number.isInteger(decimals) || decimals < 0 || decimals > MAX_ROUNDING_DECIMALS) throw new NoNumber();
  return finite(roundTo(finite(value), decimals));
}
