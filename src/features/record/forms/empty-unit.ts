import type { RecordForm } from '../form.ts';
import { GroupDraft } from '../group-draft.ts';
import { noVenting } from '../no-venting.ts';

/** S11, S14.4: what the book still holds is lost. */
export const foundEmpty: RecordForm = {
  kind: 'foundEmpty',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: () => [
    { is: 'unit', id: 'unit', cautions: [{ signal: 'danger', key: 'record.caution.noPumpDown' }] },
    {
      is: 'choice',
      id: 'foundHow',
      options: ['foundFlat', 'open'],
      cautions: [{ signal: 'warning', key: 'record.caution.asphyxiation' }],
    },
    { is: 'moment', id: 'foundAt' },
  ],
  build: (answers, context) =>
    new GroupDraft('loss', answers, context)
      .states(answers.choice ? 'empty' : null, answers.choice === 'open' ? 'open' : 'foundFlat')
      .built(),
};

/** S11, S16: a vacuum on the lines alone says nothing about the unit, and posts nothing. */
export const vacuum: RecordForm = {
  kind: 'vacuum',
  about: 'unit',
  rows: 0,
  permission: 'entries:post',
  questions: (_, context) => [
    { is: 'unit', id: 'unit', cautions: noVenting(context) },
    {
      is: 'choice',
      id: 'vacuumOn',
      options: ['whole', 'lines'],
      cautions: [{ signal: 'warning', key: 'record.caution.noCompressorInVacuum' }],
    },
    { is: 'moment', id: 'moment' },
  ],
  build: (answers, context) =>
    new GroupDraft('vacuum', answers, context).states(answers.choice === 'whole' ? 'empty' : null, 'vacuum').built(),
  nothingToPost: ({ choice }) => (choice === 'lines' ? 'record.nothing.linesOnly' : null),
};
