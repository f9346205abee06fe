import { type Answers, type FormContext, typedOf } from '../answers.ts';
import type { RecordForm } from '../form.ts';
import { type BuiltGroup, GroupDraft } from '../group-draft.ts';
import { gramsOf, typedGrams } from '../typed-mass.ts';

/** S19.3: papers that agree complete the pick-up; papers that do not withdraw it and post it as invoiced. */
export const invoice: RecordForm = {
  kind: 'invoice',
  about: 'cylinder',
  rows: 1,
  permission: 'entries:post',
  questions: () => [
    { is: 'purchase', id: 'purchase' },
    { is: 'document', id: 'invoicePaper', required: true, dated: true },
    { is: 'mass', id: 'invoicedMass' },
  ],
  build: buildInvoice,
};

/** Compared to the microgram, as the books hold it. */
export function agrees(answers: Answers, context: FormContext): boolean | null {
  const mass = typedOf(answers.mass, context);
  if (!mass || !context.purchase) return null;
  return typedGrams(context.purchase.massG).value === typedGrams(gramsOf(mass)).value;
}

function buildInvoice(answers: Answers, context: FormContext): BuiltGroup {
  const draft = new GroupDraft('purchase', answers, context);
  const { purchase } = context;
  const mass = typedOf(answers.mass, context);
  const over = { occurredAt: purchase?.occurredAt ?? '', unitId: null };
  if (!purchase || agrees(answers, context) !== false) {
    return draft.document('invoice', purchase && mass ? { refrigerant: purchase.refrigerant, mass } : {}).built(over);
  }
  const built = draft
    .mass(
      {
        id: answers.ids.entry,
        refrigerant: purchase.refrigerant,
        mass,
        from: { place: 'supplier', id: purchase.supplierId },
        to: { place: 'cylinder', id: answers.rows[0]?.cylinderId ?? '' },
        howKnown: 'invoice',
      },
      'mass',
    )
    .document('invoice')
    .built(over);
  return {
    ...built,
    places: built.places.map(([pointer, field]) => [`/replacement${pointer}`, field] as const),
    reverses: {
      groupId: purchase.groupId,
      reversalId: answers.ids.reversal,
      reason: context.say('record.note.invoiceDiffers', { number: answers.documentNumber.trim() }),
    },
  };
}
