import { roundTo, snap12, snapSum } from '../units/round.ts';
import type { ChargeStep, MessageParams, SourceCode, StepCode, StepUnit } from './charge-result.ts';

/**
 * The arithmetic as a person would write it down. Figures in an expression carry up to six decimals, so that working
 * the line with a pencil gives the value beside it, which is rounded to the decimals of its unit.
 */
const DECIMALS: Record<StepUnit, number> = { m: 3, g: 3, 'g/m': 3, t: 5, '': 6 };
const NONE: MessageParams = {};

/** `snap12`, at no cost for whole numbers, which carry no binary noise. */
export const snapped = (value: number): number =>
  Number.isInteger(value) && Math.abs(value) < 1e12 ? value + 0 : snap12(value);

/** `roundTo`, at no cost for whole numbers. */
export const rounded = (value: number, decimals: number): number =>
  Number.isInteger(value) && Math.abs(value) < 1e12 ? value + 0 : roundTo(value, decimals);

/** The sum without binary noise, also where the terms nearly cancel. */
export function total(terms: readonly number[]): number {
  let sum = 0;
  let whole = true;
  for (const term of terms) {
    sum += term;
    if (!Number.isInteger(term)) whole = false;
  }
  return whole && Math.abs(sum) < 1e12 ? sum + 0 : snapSum(...terms);
}

export const difference = (from: number, less: number): number => total([from, -less]);

/** Up to six decimals, none that says nothing. */
export function plain(value: number): string {
  const text = String(value);
  // Eight characters hold at most six decimals.
  return text.length <= 8 && !text.includes('e') ? text : String(roundTo(value, 6));
}

/** `12.0 m`: a length always shows a decimal, so that it reads as measured. */
export function metres(value: number): string {
  const text = plain(value);
  return text.includes('.') ? `${text} m` : `${text}.0 m`;
}
export const grams = (value: number): string => `${plain(value)} g`;
export const gramsPerMetre = (value: number): string => `${plain(value)} g/m`;

/** `12.0 m + 9.0 m`, `240 g - 30 g` */
export function sumText(terms: readonly number[], show: (value: number) => string): string {
  let text = show(terms[0] ?? 0);
  for (let i = 1; i < terms.length; i++) {
    const term = terms[i] as number;
    text += term < 0 ? ` - ${show(-term)}` : ` + ${show(term)}`;
  }
  return text;
}

export interface Trace {
  steps: ChargeStep[];
  of: ChargeStep['of'];
}

/** Notes a step and hands its unrounded value on. */
export function note(
  trace: Trace,
  code: StepCode,
  expression: string,
  value: number,
  unit: StepUnit,
  source: SourceCode,
  params: MessageParams = NONE,
  sourceParams: MessageParams = NONE,
): number {
  trace.steps.push({
    code,
    params,
    of: trace.of,
    expression,
    value: rounded(value, DECIMALS[unit]),
    unit,
    source: { code: source, params: sourceParams },
  });
  return value;
}
