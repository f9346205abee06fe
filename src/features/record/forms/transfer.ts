import type { GroupKind } from '../../../../shared/ledger/entry-group.schema.ts';
import { type Answers, type FormContext, refrigerantIn } from '../answers.ts';
import type { RecordForm, SaidCaution } from '../form.ts';
import { type BuiltGroup, GroupDraft } from '../group-draft.ts';
import { hoseOf, massInto } from '../weighed-rows.ts';

const AT_THE_SCALES: readonly SaidCaution[] = [
  { signal: 'danger', key: 'record.caution.recoveryLimit' },
  { signal: 'danger', key: 'record.caution.neverHeat' },
  { signal: 'caution', key: 'record.caution.frostbite' },
];

/** From one cylinder into another, weighed where it arrives; the hose's content is an entry of its own (S17). */
export function buildTransfer(kind: GroupKind, answers: Answers, context: FormContext): BuiltGroup {
  const [giver, taker] = answers.rows;
  const draft = new GroupDraft(kind, answers, context);
  if (!giver || !taker) return draft.built();
  draft.fills(taker);
  [giver, taker].forEach((row, index) => {
    draft.reading(row, 'before', `rows.${index}`).reading(row, 'after', `rows.${index}`);
  });
  const refrigerant = refrigerantIn(context.cylinder(giver.cylinderId));
  const from = { place: 'cylinder' as const, id: giver.cylinderId };
  const to = { place: 'cylinder' as const, id: taker.cylinderId };
  const mass = massInto(taker, context);
  draft.mass({ id: taker.ids.mass, refrigerant, mass, from, to, howKnown: 'weighed' }, 'rows.1.after');
  const hose = hoseOf(giver, context);
  if (hose && giver.hoseEnd === 'lost') {
    const lost = { place: 'atmosphere' as const, as: 'hose' as const };
    draft.mass({ id: giver.ids.hose, refrigerant, mass: hose, from, to: lost, howKnown: 'estimated' }, 'rows.0.hose');
  }
  return draft.built({ unitId: null });
}

const between = (kind: 'transfer' | 'heelRemoved'): RecordForm => ({
  kind,
  about: 'cylinder',
  rows: 2,
  permission: 'entries:post',
  questions: () => [
    {
      is: 'rows',
      id: kind === 'transfer' ? 'bothEnds' : 'heelEnds',
      direction: 'transfer',
      many: false,
      hose: true,
      cautions: AT_THE_SCALES,
    },
    { is: 'moment', id: 'moment' },
  ],
  build: (answers, context) => buildTransfer(kind, answers, context),
});

/** S17 */
export const transfer = between('transfer');
/** What stays in a cylinder called empty; before a non-refillable one is discarded it is taken out. */
export const heelRemoved = between('heelRemoved');
