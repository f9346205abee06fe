import { refrigerantIn, typedOf } from '../answers.ts';
import type { RecordForm } from '../form.ts';
import { GroupDraft } from '../group-draft.ts';
import { typedGrams } from '../typed-mass.ts';
import { contentOf } from '../weighed-rows.ts';

/** S12: the new outdoor unit brings its factory charge. The old one was recovered from before. */
export const warrantyReplacement: RecordForm = {
  kind: 'warrantyReplacement',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: () => [
    { is: 'unit', id: 'unit', cautions: [{ signal: 'warning', key: 'record.caution.capacitors' }] },
    { is: 'mass', id: 'factoryCharge' },
    { is: 'moment', id: 'fittedAt' },
  ],
  build: (answers, context) =>
    new GroupDraft('warrantyReplacement', answers, context)
      .mass(
        {
          id: answers.ids.entry,
          refrigerant: context.unit?.refrigerant ?? '',
          mass: typedOf(answers.mass, context),
          from: { place: 'factory' },
          to: { place: 'unit', id: answers.unitId },
          howKnown: 'factory',
        },
        'mass',
      )
      .built(),
};

/** S16.1: the charge travels behind its valves and no mass moves; the unit stands at its new site from then on. */
export const relocation: RecordForm = {
  kind: 'relocation',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: ({ choice }, { unit }) => [
    { is: 'unit', id: 'unit' },
    {
      is: 'choice',
      id: 'chargeTravels',
      options: ['behindValves', 'recovered'],
      wrong:
        choice === 'recovered' && unit && unit.book.byRefrigerant.some(({ massG }) => massG > 0)
          ? { field: 'choice', key: 'record.wrong.recoverFirst' }
          : undefined,
      cautions: [
        { signal: 'danger', key: 'record.caution.noPumpDown' },
        { signal: 'warning', key: 'record.caution.stopCompressor' },
      ],
    },
    { is: 'site', id: 'movedTo' },
    { is: 'document', id: 'workOrder', required: true, dated: true },
    { is: 'text', id: 'movedNote', required: false },
    { is: 'moment', id: 'movedAt' },
  ],
  build: (answers, context) => {
    const draft = new GroupDraft('relocation', answers, context).document('other');
    if (answers.choice) draft.note(context.say(`record.note.${answers.choice}`));
    return draft.built();
  },
  changes: ({ ids, siteId, at }, { instant }) => [
    { is: 'site', body: { id: ids.change, siteId, validFrom: instant(at) } },
  ],
};

/** A known book goes with the unit to its customer; one that is not known is handed over by the register alone. */
export const handOver: RecordForm = {
  kind: 'handOver',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: () => [
    { is: 'unit', id: 'unit' },
    { is: 'party', id: 'customer', of: 'customer' },
    { is: 'moment', id: 'handedOverAt' },
  ],
  build: (answers, context) => {
    const draft = new GroupDraft('handOver', answers, context);
    const { unit } = context;
    const held = unit?.book.known ? unit.book.byRefrigerant.filter(({ massG }) => massG > 0) : [];
    held.slice(0, 2).forEach(({ refrigerant, massG }, index) => {
      draft.mass(
        {
          id: index === 0 ? answers.ids.entry : answers.ids.entry2,
          refrigerant,
          mass: typedGrams(massG),
          from: { place: 'unit', id: answers.unitId },
          to: { place: 'customer', id: answers.partyId || unit?.customerId || '' },
          howKnown: 'estimated',
        },
        'unitId',
      );
    });
    return draft.built();
  },
  nothingToPost: (_, { unit }) => (unit && !unit.book.known ? 'record.nothing.bookNotKnown' : null),
};

/** S20.5: what its book holds is missing, or was let go. */
export const loss: RecordForm = {
  kind: 'loss',
  about: 'cylinder',
  rows: 1,
  permission: 'entries:post',
  questions: () => [
    { is: 'rows', id: 'lostCylinder', direction: 'once', many: false, hose: false, byBook: true },
    {
      is: 'choice',
      id: 'lostHow',
      options: ['lost', 'stolen', 'burst'],
      cautions: [{ signal: 'danger', key: 'record.caution.burst' }],
    },
    { is: 'reason', id: 'lossReason' },
    { is: 'moment', id: 'noticedAt' },
  ],
  build: (answers, context) => {
    const draft = new GroupDraft('loss', answers, context);
    const [row] = answers.rows;
    if (!row) return draft.built();
    const to =
      answers.choice === 'burst'
        ? { place: 'atmosphere' as const, as: 'measured' as const }
        : { place: 'missing' as const };
    return draft
      .mass(
        {
          id: row.ids.mass,
          refrigerant: refrigerantIn(context.cylinder(row.cylinderId)),
          mass: contentOf({ ...row, mode: 'book' }, context),
          from: { place: 'cylinder', id: row.cylinderId },
          to,
          howKnown: 'estimated',
        },
        'rows.0.cylinderId',
      )
      .built({ unitId: null });
  },
};

/** S20.5: found again, as it weighs now. */
export const found: RecordForm = {
  kind: 'found',
  about: 'cylinder',
  rows: 1,
  permission: 'entries:post',
  questions: () => [
    { is: 'rows', id: 'foundCylinder', direction: 'once', many: false, hose: false },
    { is: 'moment', id: 'foundAt' },
  ],
  build: (answers, context) => {
    const draft = new GroupDraft('found', answers, context);
    const [row] = answers.rows;
    if (!row) return draft.built();
    return draft
      .reading(row, 'only', 'rows.0')
      .mass(
        {
          id: row.ids.mass,
          refrigerant: context.cylinder(row.cylinderId)?.refrigerant ?? '',
          mass: contentOf({ ...row, mode: 'gross' }, context),
          from: { place: 'missing' },
          to: { place: 'cylinder', id: row.cylinderId },
          howKnown: 'weighed',
        },
        'rows.0.before',
      )
      .built({ unitId: null });
  },
};
