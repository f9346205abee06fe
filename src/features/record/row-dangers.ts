import { judgeFill } from '../../../shared/cylinder-fill/fill-judgement.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';
import type { Answers, FormContext, KnownCylinder } from './answers.ts';
import type { Question } from './form.ts';
import { gramsOf, isBelowZero } from './typed-mass.ts';
import { massInto } from './weighed-rows.ts';

/** Why refrigerant must not go into this cylinder. Planning it is stopped; what has happened is recorded with its reason. */
export type RowDanger = { row: number; tag: string } & (
  | { is: 'refill' }
  | { is: 'pressure'; comes: string }
  | { is: 'retest'; due: string }
  | { is: 'otherRefrigerant'; holds: string; comes: string }
  | { is: 'overLimit'; wouldHoldG: number; limitG: number }
);

/** Does this row of the question fill its cylinder? */
const isFilledRow = (question: Question, index: number): boolean =>
  question.is === 'rows' && (question.direction === 'into' || (question.direction === 'transfer' && index > 0));

/** What comes into the cylinders that the answers fill: of the unit, or all that is in the giver. */
function incomingInto(question: Question, answers: Answers, context: FormContext): string[] {
  if (question.is !== 'rows') return [];
  if (question.direction !== 'transfer') return context.unit ? [context.unit.refrigerant] : [];
  const giver = context.cylinder(answers.rows[0]?.cylinderId ?? '');
  const held = heldBy(giver);
  return held.length > 0 ? held : giver ? [giver.refrigerant] : [];
}

const heldBy = (cylinder: KnownCylinder | undefined): string[] =>
  (cylinder?.byRefrigerant ?? []).filter(({ massG }) => massG > 0).map(({ refrigerant }) => refrigerant);

/** Cylinders that the answers fill, each with what speaks against what comes into it. */
export function rowDangers(question: Question, answers: Answers, context: FormContext): RowDanger[] {
  const incoming = incomingInto(question, answers, context);
  return answers.rows.flatMap((row, index): RowDanger[] => {
    const cylinder = context.cylinder(row.cylinderId);
    if (!cylinder || !isFilledRow(question, index)) return [];
    const at = { row: index, tag: cylinder.tag };
    const comes = incoming.join(' + ');
    const mass = massInto(row, context);
    const isFilled = mass !== null && !isBelowZero(mass);
    const wouldHoldG = cylinder.contentG + (isFilled ? gramsOf(mass) : 0);
    const other = heldBy(cylinder).find((held) => incoming.some((refrigerant) => refrigerant !== held));
    const { limitG, bears } = judgeFill(cylinder, incoming, context.firmJurisdiction);
    const { retestDue } = cylinder;
    return [
      ...(cylinder.kind === 'nonRefillable' ? [{ ...at, is: 'refill' as const }] : []),
      ...(other ? [{ ...at, is: 'otherRefrigerant' as const, holds: other, comes }] : []),
      ...(bears === false ? [{ ...at, is: 'pressure' as const, comes }] : []),
      ...(retestDue !== null && isRetestOverdue(retestDue, dayOf(answers, context))
        ? [{ ...at, is: 'retest' as const, due: retestDue }]
        : []),
      ...(limitG !== null && isFilled && wouldHoldG > limitG
        ? [{ ...at, is: 'overLimit' as const, wouldHoldG, limitG }]
        : []),
    ];
  });
}

/** The limit of what will then be in a cylinder that is filled, with what comes into it; null: none, or not known. */
export function limitOfRow(question: Question, answers: Answers, context: FormContext, index: number): number | null {
  const cylinder = context.cylinder(answers.rows[index]?.cylinderId ?? '');
  if (!cylinder || !isFilledRow(question, index)) return null;
  return judgeFill(cylinder, incomingInto(question, answers, context), context.firmJurisdiction).limitG;
}

/** The day on which it is or was done: as told, else today. */
const dayOf = (answers: Answers, context: FormContext): string => answers.at.slice(0, 10) || context.today;
