import { snap12 } from '../units/round.ts';

/** Safety factor of the linear cap, IEC 60335-2-40 from edition 6 on. */
const CAP_FACTOR = 0.75;

export type AreaForm = 'squareRoot' | 'linearCap';

/** What the formulas need: LFL in kg/m3, release height in m, and whether the edition has the linear cap. */
export interface RoomFormula {
  lflKgM3: number;
  heightM: number;
  hasLinearCap: boolean;
}

/** The smaller of the two forms: 2.5 LFL^(5/4) h0 A^(1/2), and from edition 6 on 0.75 LFL h0 A; in g. */
export function largestChargeG(formula: RoomFormula, areaM2: number): { chargeG: number; form: AreaForm } {
  const square = squareRootG(formula, areaM2);
  const cap = linearCapG(formula, areaM2);
  return formula.hasLinearCap && cap < square
    ? { chargeG: cap, form: 'linearCap' }
    : { chargeG: square, form: 'squareRoot' };
}

/** The larger of the two inversions, in m2. */
export function smallestAreaM2(formula: RoomFormula, chargeG: number): { areaM2: number; form: AreaForm } {
  const square = (chargeG / squareRootG(formula, 1)) ** 2;
  const cap = chargeG / linearCapG(formula, 1);
  return formula.hasLinearCap && cap > square
    ? { areaM2: cap, form: 'linearCap' }
    : { areaM2: square, form: 'squareRoot' };
}

/** Below this the linear cap is the smaller form: 6.156 m2 for R-32, whatever the height. */
export const capGovernsBelowM2 = ({ lflKgM3 }: RoomFormula) => snap12(((2.5 * lflKgM3 ** 0.25) / CAP_FACTOR) ** 2);

const squareRootG = ({ lflKgM3, heightM }: RoomFormula, areaM2: number) =>
  2.5 * lflKgM3 ** 1.25 * heightM * Math.sqrt(areaM2) * 1000;

const linearCapG = ({ lflKgM3, heightM }: RoomFormula, areaM2: number) =>
  CAP_FACTOR * lflKgM3 * heightM * areaM2 * 1000;
