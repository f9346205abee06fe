/**
 * A double as a decimal of 12 significant digits. Before a value is compared with a limit or rounded it is snapped, so
 * that binary noise never moves a step: 4.8 x 20 is 96, not 95.99999999999999.
 */
export function snap12(value: number): number {
  if (!Number.isFinite(value)) throw new RangeError(`Expected a finite number, got ${value}`);
  const snapped = Number(value.toPrecision(12));
  return snapped === 0 ? 0 : snapped;
}

/**
 * A sum whose noise is judged by its largest term. `0.3 - 0.1 - 0.2` leaves 3e-17 in doubles, which no number of
 * significant digits of the result removes; twelve digits of the 0.3 do.
 */
export function snapSum(...terms: readonly number[]): number {
  let sum = 0;
  let largest = 0;
  for (const term of terms) {
    sum += term;
    largest = Math.max(largest, Math.abs(term), Math.abs(sum));
  }
  if (largest === 0) return 0;
  const decimals = 11 - Math.floor(Math.log10(largest));
  return snap12(decimals > 0 && decimals < 100 ? Number(sum.toFixed(decimals)) : sum);
}

/** x times 10^by by moving the decimal point of its shortest decimal form: exact where multiplying is not. */
export function shiftDecimalPoint(x: number, by: number): number {
  const [digits = '0', exponent = '0'] = String(x).split('e');
  return Number(`${digits}e${Number(exponent) + by}`);
}

/** Rounds to `decimals` places after snapping, half away from zero: 2.0005 to three places is 2.001. */
export function roundTo(value: number, decimals: number): number {
  const snapped = snap12(value);
  const whole = Math.round(shiftDecimalPoint(Math.abs(snapped), decimals));
  const magnitude = shiftDecimalPoint(whole, -decimals);
  return magnitude === 0 ? 0 : Math.sign(snapped) * magnitude;
}

export const ROUNDING_DIRECTIONS = ['nearest', 'up', 'down'] as const;
export type RoundingDirection = (typeof ROUNDING_DIRECTIONS)[number];

/**
 * Rounds to a multiple of `step` after snapping. `nearest` is half away from zero; `up` is towards more also below
 * zero (-7.5 to -7), `down` towards less (-7.5 to -8).
 */
export function roundToStep(value: number, step: number, direction: RoundingDirection): number {
  if (!(step > 0)) throw new RangeError(`Expected a step above zero, got ${step}`);
  const quotient = snap12(snap12(value) / step);
  const steps =
    direction === 'up'
      ? Math.ceil(quotient)
      : direction === 'down'
        ? Math.floor(quotient)
        : Math.sign(quotient) * Math.round(Math.abs(quotient));
  return snap12(steps * step);
}
