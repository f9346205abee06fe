import type { GroupKind } from '../../../../shared/ledger/entry-group.schema.ts';
import { type Answers, type FormContext, refrigerantIn, typedOf } from '../answers.ts';
import type { RecordForm, SaidCaution } from '../form.ts';
import { type BuiltGroup, GroupDraft } from '../group-draft.ts';
import { hoseOf, massOutOf } from '../weighed-rows.ts';

const CHARGING: readonly SaidCaution[] = [
  { signal: 'caution', key: 'record.caution.frostbite' },
  { signal: 'caution', key: 'record.caution.liquidBlend' },
];

/** Out of any number of cylinders into a unit, with what became of each hose. The one question comes with the preview. */
export function buildAddition(kind: GroupKind, answers: Answers, context: FormContext): BuiltGroup {
  const draft = new GroupDraft(kind, answers, context);
  answers.rows.forEach((row, index) => {
    draft.reading(row, 'before', `rows.${index}`).reading(row, 'after', `rows.${index}`);
  });
  answers.rows.forEach((row, index) => {
    const from = { place: 'cylinder' as const, id: row.cylinderId };
    const refrigerant = refrigerantIn(context.cylinder(row.cylinderId));
    const mass = massOutOf(row, context);
    const to = { place: 'unit' as const, id: answers.unitId };
    draft.mass({ id: row.ids.mass, refrigerant, mass, from, to, howKnown: 'weighed' }, `rows.${index}.after`);
  });
  answers.rows.forEach((row, index) => {
    const hose = hoseOf(row, context);
    if (!hose || row.hoseEnd === 'emptied') return;
    const from = { place: 'cylinder' as const, id: row.cylinderId };
    const refrigerant = refrigerantIn(context.cylinder(row.cylinderId));
    const hoseTo =
      row.hoseEnd === 'recovered'
        ? { place: 'cylinder' as const, id: row.hoseInto }
        : { place: 'atmosphere' as const, as: 'hose' as const };
    draft.mass(
      { id: row.ids.hose, refrigerant, mass: hose, from, to: hoseTo, howKnown: 'estimated' },
      `rows.${index}.hose`,
    );
  });
  return draft.states(answers.answer).built();
}

const addition = (kind: 'refill' | 'putBack' | 'traceCharge'): RecordForm => ({
  kind,
  about: 'unit',
  rows: 1,
  permission: 'entries:post',
  questions: () => [
    {
      is: 'unit',
      id: 'unit',
      cautions: kind === 'putBack' ? [] : [{ signal: 'warning', key: 'record.caution.findTheLeak' }],
    },
    { is: 'rows', id: 'takenFrom', direction: 'outOf', many: true, hose: true, cautions: CHARGING },
    { is: 'moment', id: 'moment' },
  ],
  build: (answers, context) => buildAddition(kind, answers, context),
});

/** S6, S7, S8, S9.1 */
export const refill = addition('refill');
/** S6.5, S10: the same job's recovery is what it is counted against. */
export const putBack = addition('putBack');
/** S11.1 */
export const traceCharge = addition('traceCharge');

/** S9.2: out of a cylinder that is not in our books, weighed on our scale. */
export const customerRefrigerant: RecordForm = {
  kind: 'customerRefrigerant',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: () => [
    { is: 'unit', id: 'unit', cautions: [{ signal: 'warning', key: 'record.caution.findTheLeak' }] },
    { is: 'party', id: 'customer', of: 'customer' },
    { is: 'mass', id: 'customersMass', cautions: CHARGING },
    { is: 'moment', id: 'moment' },
  ],
  build: (answers, context) => {
    const { ids, unitId } = answers;
    const customerId = answers.partyId || context.unit?.customerId || '';
    return new GroupDraft('refill', answers, context)
      .mass(
        {
          id: ids.entry,
          refrigerant: context.unit?.refrigerant ?? '',
          mass: typedOf(answers.mass, context),
          from: { place: 'customer', id: customerId },
          to: { place: 'unit', id: unitId },
          howKnown: 'weighed',
        },
        'mass',
      )
      .states(answers.answer)
      .built();
  },
};

/** S9.3: dated by the invoice. */
export const otherContractor: RecordForm = {
  kind: 'otherContractor',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: () => [
    { is: 'unit', id: 'unit' },
    { is: 'party', id: 'otherContractor', of: 'otherContractor' },
    { is: 'document', id: 'contractorsInvoice', required: true, dated: true },
    { is: 'mass', id: 'invoicedMass' },
    { is: 'moment', id: 'workMoment' },
  ],
  build: (answers, context) => {
    const refrigerant = context.unit?.refrigerant ?? '';
    const mass = typedOf(answers.mass, context);
    return new GroupDraft('otherContractor', answers, context)
      .mass(
        {
          id: answers.ids.entry,
          refrigerant,
          mass,
          from: { place: 'otherContractor', id: answers.partyId },
          to: { place: 'unit', id: answers.unitId },
          howKnown: 'invoice',
        },
        'mass',
      )
      .document('invoice', mass ? { refrigerant, mass } : {})
      .states(answers.answer)
      .built();
  },
};
