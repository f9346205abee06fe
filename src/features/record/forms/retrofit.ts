import { typedOf } from '../answers.ts';
import type { RecordForm } from '../form.ts';
import { GroupDraft } from '../group-draft.ts';

/**
 * S16.2: between the recovery of the old refrigerant and the charge with the new one. The recovery was told before, the
 * charge is weighed in after; what is told here is which refrigerant the unit is for from now on, and how much of it.
 */
export const retrofit: RecordForm = {
  kind: 'retrofit',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  onlyRegister: true,
  questions: () => [
    { is: 'unit', id: 'unit' },
    { is: 'emptied', id: 'emptied', cautions: [{ signal: 'warning', key: 'record.caution.noVenting' }] },
    {
      is: 'refrigerant',
      id: 'newRefrigerant',
      cautions: [
        { signal: 'danger', key: 'record.caution.notBuiltForIt' },
        { signal: 'caution', key: 'record.caution.oilAndSeals' },
      ],
    },
    { is: 'fullCharge', id: 'newFullCharge' },
    { is: 'moment', id: 'retrofittedAt' },
  ],
  // Never posted; what a form without a group still has to say is its ids and its time.
  build: (answers, context) => new GroupDraft('vacuum', answers, context).built(),
  changes: (answers, context) => {
    const { ids, refrigerant, method } = answers;
    const jobId = answers.jobId || null;
    const validFrom = context.instant(answers.at);
    const mass = typedOf(answers.mass, context);
    const reason = context.say('record.note.retrofit', { from: context.unit?.refrigerant ?? '', to: refrigerant });
    return [
      { is: 'refrigerant', body: { id: ids.change, refrigerant, validFrom, jobId } },
      ...(mass
        ? [{ is: 'fullCharge' as const, body: { id: ids.change2, mass, method, validFrom, jobId, reason } }]
        : []),
    ];
  },
};
