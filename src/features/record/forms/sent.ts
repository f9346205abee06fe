import type { GroupKind } from '../../../../shared/ledger/entry-group.schema.ts';
import type { PlaceFields } from '../../../../shared/ledger/place.ts';
import { type Answers, type FormContext, refrigerantIn, typedOf } from '../answers.ts';
import type { Question, RecordForm, SaidCaution } from '../form.ts';
import { type BuiltGroup, GroupDraft } from '../group-draft.ts';
import { difference, isBelowZero, withoutSign } from '../typed-mass.ts';
import { contentOf } from '../weighed-rows.ts';

const ON_THE_ROAD: readonly SaidCaution[] = [{ signal: 'warning', key: 'record.caution.transport' }];

/** The whole content of each cylinder, weighed once or by its book (S18, S22.3). */
function contentsTo(kind: GroupKind, to: PlaceFields, answers: Answers, context: FormContext): BuiltGroup {
  const draft = new GroupDraft(kind, answers, context);
  answers.rows.forEach((row, index) => {
    if (row.mode !== 'book') draft.reading(row, 'only', `rows.${index}`);
  });
  answers.rows.forEach((row, index) => {
    draft.mass(
      {
        id: row.ids.mass,
        refrigerant: refrigerantIn(context.cylinder(row.cylinderId)),
        mass: contentOf(row, context),
        from: { place: 'cylinder', id: row.cylinderId },
        to,
        howKnown: row.mode === 'book' ? 'estimated' : 'weighed',
      },
      `rows.${index}.before`,
    );
  });
  if (answers.documentNumber.trim()) draft.document('deliveryNote');
  return draft.built({ unitId: null });
}

const sent = (
  kind: 'reclaim' | 'destruction' | 'return' | 'lend',
  groupKind: GroupKind,
  party: Extract<Question, { is: 'party' }> | null,
  to: (answers: Answers) => PlaceFields,
): RecordForm => ({
  kind,
  about: 'cylinder',
  rows: 1,
  permission: 'entries:post',
  questions: () => [
    {
      is: 'rows',
      id: 'sentCylinders',
      direction: 'once',
      many: true,
      hose: false,
      byBook: true,
      cautions: ON_THE_ROAD,
    },
    ...(party ? [party] : []),
    { is: 'document', id: 'shippingPapers', required: false, dated: true },
    { is: 'moment', id: 'handedOverAt' },
  ],
  build: (answers, context) => contentsTo(groupKind, to(answers), answers, context),
});

export const reclaim = sent('reclaim', 'reclaim', { is: 'party', id: 'reclaimer', of: 'reclaimer' }, ({ partyId }) => ({
  place: 'reclaimer',
  id: partyId,
}));
export const destruction = sent('destruction', 'destruction', null, () => ({ place: 'destroyed' }));
export const returned = sent('return', 'return', { is: 'party', id: 'supplier', of: 'supplier' }, ({ partyId }) => ({
  place: 'supplier',
  id: partyId,
}));
/** A cylinder that is lent or handed to a customer with what is in it: the place is that party. */
export const lend = sent('lend', 'handOver', { is: 'party', id: 'customer', of: 'customer' }, ({ partyId }) => ({
  place: 'customer',
  id: partyId,
}));

/** S18: what was certified less what was sent, for each refrigerant, so that the reclaimer shows what it certified. */
export const certificate: RecordForm = {
  kind: 'certificate',
  about: 'papers',
  rows: 0,
  permission: 'registers:correct',
  questions: () => [
    { is: 'party', id: 'reclaimer', of: 'reclaimer' },
    { is: 'certified', id: 'certified' },
    { is: 'document', id: 'certificatePaper', required: false, dated: true },
    { is: 'moment', id: 'certifiedAt' },
  ],
  build: (answers, context) => {
    const draft = new GroupDraft('certificate', answers, context);
    const reclaimer: PlaceFields = { place: 'reclaimer', id: answers.partyId };
    const unaccounted: PlaceFields = { place: 'reclaimerDifference' };
    answers.certified.forEach((row, index) => {
      const was = typedOf(row.sent, context);
      const is = typedOf(row.certified, context);
      const gap = was && is && difference(was, is);
      const more = gap !== null && isBelowZero(gap);
      draft.mass(
        {
          id: row.ids.entry,
          refrigerant: row.refrigerant,
          mass: gap && withoutSign(gap),
          from: more ? unaccounted : reclaimer,
          to: more ? reclaimer : unaccounted,
          howKnown: 'certificate',
        },
        `certified.${index}.certified`,
      );
      if (is && answers.documentNumber.trim()) {
        draft.document('certificate', { refrigerant: row.refrigerant, mass: is });
      }
    });
    return draft.built({ unitId: null });
  },
};
