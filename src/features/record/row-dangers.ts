import { type Answers, type FormContext, refrigerantIn } from './answers.ts';
import type { Question } from './form.ts';
import { gramsOf, isBelowZero } from './typed-mass.ts';
import { massInto } from './weighed-rows.ts';

/** Why refrigerant must not go into this cylinder. Planning it is stopped; what has happened is recorded with its reason. */
export type RowDanger = { row: number; tag: string } & (
  | { is: 'refill' }
  | { is: 'pressure' }
  | { is: 'otherRefrigerant'; holds: string; comes: string }
  | { is: 'overLimit'; wouldHoldG: number; limitG: number }
);

/** Cylinders that the answers fill, with what comes into them. */
export function rowDangers(question: Question, answers: Answers, context: FormContext): RowDanger[] {
  if (question.is !== 'rows' || (question.direction !== 'into' && question.direction !== 'transfer')) return [];
  const isTransfer = question.direction === 'transfer';
  const comes = isTransfer
    ? refrigerantIn(context.cylinder(answers.rows[0]?.cylinderId ?? ''))
    : (context.unit?.refrigerant ?? '');
  return answers.rows.flatMap((row, index): RowDanger[] => {
    const cylinder = context.cylinder(row.cylinderId);
    if (!cylinder || (isTransfer && index === 0)) return [];
    const at = { row: index, tag: cylinder.tag };
    const mass = massInto(row, context);
    const wouldHoldG = cylinder.contentG + (mass && !isBelowZero(mass) ? gramsOf(mass) : 0);
    const other = cylinder.byRefrigerant.find(({ massG, refrigerant }) => massG > 0 && refrigerant !== comes);
    const isFilled = mass !== null && !isBelowZero(mass);
    return [
      ...(cylinder.kind === 'nonRefillable' ? [{ ...at, is: 'refill' as const }] : []),
      ...(other && comes ? [{ ...at, is: 'otherRefrigerant' as const, holds: other.refrigerant, comes }] : []),
      ...(cylinder.pressureRatingHolds === false ? [{ ...at, is: 'pressure' as const }] : []),
      ...(cylinder.limitG !== null && isFilled && wouldHoldG > cylinder.limitG
        ? [{ ...at, is: 'overLimit' as const, wouldHoldG, limitG: cylinder.limitG }]
        : []),
    ];
  });
}
