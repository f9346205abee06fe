import { reachesLevel, requiredLevel } from '../../../shared/reference/evacuation-level.ts';
import type { Answers, FormContext } from './answers.ts';

export const isCompleted = ({ choice }: Answers): boolean => choice === 'completed';

/** The law's level, where the site lies under it and the refrigerant is known. */
export function levelAsked(answers: Answers, context: FormContext) {
  if (context.jurisdiction !== 'US' || !context.unit) return null;
  const { machineAge } = answers;
  const madeOn =
    context.machineMadeOn ?? (machineAge === 'older' ? '1993-11-14' : machineAge === 'newer' ? '1993-11-15' : null);
  return requiredLevel(context.unit.refrigerant, context.unit.fullCharge?.massG ?? null, madeOn);
}

/** The level reached as a number, or null while it is not one. A comma counts as a point. */
export function levelOf(answers: Answers): number | null {
  const text = answers.levelReached.trim().replace(',', '.');
  return /^\d+(\.\d+)?$/.test(text) ? Number(text) : null;
}

/** Completed, and the level that the law asks for was not reached, nor another one claimed. */
export function fallsShort(answers: Answers, context: FormContext): boolean {
  const required = levelAsked(answers, context);
  const reached = levelOf(answers);
  return required !== null && reached !== null && answers.levelException === '' && !reachesLevel(required, reached);
}
