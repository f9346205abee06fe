import type { MessageParams } from '../calculations/say-messages.ts';
import { roundTo, snap12, snapSum } from '../units/round.ts';
import type { ChargeStep, SourceCode, StepCode, StepUnit } from './charge-result.ts';

/**
 * The arithmetic as a person would write it down. Figures in an expression carry up to six decimals, so that working
 * the line with a pencil gives the value beside it, which is rounded to the decimals of its unit.
 */
const DECIMALS: Record<StepUnit, number> = { m: 3, g: 3, 'g/m': 3, t: 5, '': 6 };
const NONE: MessageParams = {};

/**
 * The same values as `snap12`, `roundTo` and `snapSum` give (a property test holds them together), without their detour
 * over text for what people type: whole numbers, and up to six decimals below 100,000. A calculation snaps some thirty
 * times, and that detour was half of its time.
 */
const SHORT_BELOW = 1e5;

/** The nearest number of at most six decimals. Below 100,000 it has at most twelve digits. */
const sixDecimals = (value: number): number => Math.round(value * 1e6) / 1e6;

const isShort = (value: number): boolean => Math.abs(value) < SHORT_BELOW && sixDecimals(value) === value;

export function snapped(value: number): number {
  if (Math.abs(value) < SHORT_BELOW) {
    const short = sixDecimals(value);
    // Nearer than half a unit of the twelfth digit, whatever the leading digit is.
    if (Math.abs(value - short) < Math.abs(value) * 0.5e-12) return short + 0;
  }
  return snap12(value);
}

export function rounded(value: number, decimals: number): number {
  const scale = 10 ** decimals;
  if (Math.abs(value) < SHORT_BELOW && Math.round(value * scale) / scale === value) return value + 0;
  return roundTo(value, decimals);
}

/** The sum without binary noise, also where the terms nearly cancel. */
export function total(terms: readonly number[]): number {
  let sum = 0;
  for (const term of terms) {
    sum += term;
    if (!isShort(term) || Math.abs(sum) >= SHORT_BELOW) return snapSum(...terms);
  }
  return sixDecimals(sum) + 0;
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
