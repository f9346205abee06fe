import type { GroupKind } from '../../../../shared/ledger/entry-group.schema.ts';
import { clauseOfException } from '../../../../shared/reference/evacuation-level.ts';
import type { Answers, FormContext } from '../answers.ts';
import type { Question, RecordForm, SaidCaution } from '../form.ts';
import { type BuiltGroup, GroupDraft, type RecoveryLevelRequest } from '../group-draft.ts';
import { isCompleted, levelAsked, levelOf } from '../level.ts';
import { noVenting } from '../no-venting.ts';
import { massInto } from '../weighed-rows.ts';

const NO_PUMP_DOWN: SaidCaution = { signal: 'danger', key: 'record.caution.noPumpDown' };
const AT_THE_CYLINDERS: readonly SaidCaution[] = [
  { signal: 'danger', key: 'record.caution.recoveryLimit' },
  { signal: 'warning', key: 'record.caution.asphyxiation' },
  { signal: 'caution', key: 'record.caution.frostbite' },
];
const BEFORE_OPENING: readonly SaidCaution[] = [{ signal: 'warning', key: 'record.caution.capacitors' }];

/** Out of a unit into any number of cylinders; completed once, or not completed. */
function outOfUnit(kind: GroupKind, answers: Answers, context: FormContext): GroupDraft {
  const draft = new GroupDraft(kind, answers, context);
  const from = { place: 'unit' as const, id: answers.unitId };
  const refrigerant = context.unit?.refrigerant ?? '';
  answers.rows.forEach((row, index) => {
    draft.fills(row).reading(row, 'before', `rows.${index}`).reading(row, 'after', `rows.${index}`);
  });
  answers.rows.forEach((row, index) => {
    const to = { place: 'cylinder' as const, id: row.cylinderId };
    const mass = massInto(row, context);
    draft.mass({ id: row.ids.mass, refrigerant, mass, from, to, howKnown: 'weighed' }, `rows.${index}.after`);
  });
  return draft;
}

/** What the law asks for, with its clause, and what was reached or why another level applies. */
function levelTold(answers: Answers, context: FormContext): RecoveryLevelRequest | null {
  const required = levelAsked(answers, context);
  const reached = levelOf(answers);
  const exception = answers.levelException || null;
  if (!required || (reached === null && exception === null)) return null;
  const { unit, clause } = required;
  const other = exception === null || exception === 'other' ? '' : clauseOfException(exception);
  return {
    required: { value: String(required.value), unit },
    reached: reached === null ? null : { value: String(reached), unit },
    exception,
    clause: other ? `${clause}; ${other}` : clause,
  };
}

export function buildRecovery(answers: Answers, context: FormContext): BuiltGroup {
  const draft = outOfUnit('recovery', answers, context);
  if (isCompleted(answers)) draft.states('empty', 'recovery').level(levelTold(answers, context));
  return draft.built();
}

const level: Question = { is: 'level', id: 'level', cautions: BEFORE_OPENING };
const moment: Question = { is: 'moment', id: 'moment' };

/** S6.5, S10, S12, S13, S14, S15, S18.2: the level is told once, with the completion. */
export const recovery: RecordForm = {
  kind: 'recovery',
  about: 'unit',
  rows: 1,
  permission: 'entries:post',
  questions: (answers, context) => [
    { is: 'unit', id: 'unit', cautions: [NO_PUMP_DOWN, ...noVenting(context)] },
    { is: 'rows', id: 'recoveredInto', direction: 'into', many: true, hose: false, cautions: AT_THE_CYLINDERS },
    { is: 'choice', id: 'completed', options: ['completed', 'notCompleted'] },
    ...(isCompleted(answers) && (!context.unit || levelAsked(answers, context)) ? [level] : []),
    moment,
  ],
  build: buildRecovery,
};

const withoutStatement = (
  kind: 'partialRecovery' | 'overchargeRemoved',
  groupKind: GroupKind,
  more: readonly Question[],
): RecordForm => ({
  kind,
  about: 'unit',
  rows: 1,
  permission: 'entries:post',
  questions: (_, context) => [
    { is: 'unit', id: 'unit', cautions: noVenting(context) },
    { is: 'rows', id: 'recoveredInto', direction: 'into', many: true, hose: false, cautions: AT_THE_CYLINDERS },
    ...more,
    moment,
  ],
  build: (answers, context) => outOfUnit(groupKind, answers, context).states(answers.answer).built(),
});

/** S7.3, S10: states nothing about the unit. */
export const partialRecovery = withoutStatement('partialRecovery', 'recovery', []);
/** S3, S14.3: the answer is free. */
export const overchargeRemoved = withoutStatement('overchargeRemoved', 'overchargeRemoved', [
  { is: 'fullness', id: 'fullness' },
]);
