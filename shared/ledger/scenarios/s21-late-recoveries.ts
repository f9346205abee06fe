import {
  added,
  again,
  at,
  book,
  books,
  cylinder,
  emitted,
  flag,
  group,
  knownUnit,
  line,
  mass,
  post,
  readings,
  says,
} from './build.ts';
import type { ScenarioCase } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null), R9: cylinder(null) },
  units: { U: knownUnit('1290', '1290') },
};
/** Makes U known at 0: all of it recovered into R9 long before. */
const emptied = group('emptied', 'recovery', '2026-02-01T10:00:00Z', {
  unitId: 'U',
  entries: [mass('U -> R9', '1290')],
  statements: [says('U', 'empty', 'recovery')],
});

export const lateRecoveries: ScenarioCase[] = [
  {
    id: 'S21.5',
    title: 'a recovery arrives after the vacuum that followed it',
    start,
    steps: [
      {
        step: 'B',
        entered: 'the 2nd: vacuum on the whole circuit',
        does: post('B', 'vacuum', at(2, '10:00'), {
          unitId: 'U',
          jobId: 'J1',
          statements: [says('U', 'empty', 'vacuum')],
        }),
        posted: [added('U -> atmosphere:inferred', '1290')],
        books: books({ C1: '9500', U: '0' }),
        open: [flag('vacuumWithoutRecovery', 'U', '1290')],
      },
      {
        step: 'C',
        entered: 'the 2nd: full recharge 1,290',
        does: post('C', 'fullRecharge', at(2, '14:00'), {
          unitId: 'U',
          jobId: 'J1',
          readings: readings('C1', '9500', '8210'),
          entries: [mass('C1 -> U', '1290')],
        }),
        posted: [line('C1 -> U', '1290')],
        books: books({ C1: '8210', U: '1290' }),
        open: [flag('vacuumWithoutRecovery', 'U', '1290')],
      },
      {
        step: 'A',
        entered: 'the 1st, same job: recovery 700, completed',
        does: post('A', 'recovery', at(1), {
          unitId: 'U',
          jobId: 'J1',
          readings: readings('R1', '0', '700'),
          entries: [mass('U -> R1', '700')],
          statements: [says('U', 'empty', 'recovery')],
        }),
        posted: [
          added('U -> atmosphere:inferred', '590'),
          line('U -> R1', '700'),
          again('B', 'atmosphere:inferred -> U', '1290'),
        ],
        books: books({ C1: '8210', R1: '700', U: '1290' }),
        open: [flag('lossAtRecovery', 'U', '590')],
      },
    ],
    end: { emissions: [emitted('inferred', '590')], counted: [{ unit: 'U', massG: '590' }], places: {} },
  },
  {
    id: 'S21.6',
    title: 'a partial recovery arrives before the recharge that filled the unit (U known 0)',
    start: { ...start, history: [emptied] },
    steps: [
      {
        step: 'A',
        entered: 'the 2nd: 990 into R1, not completed',
        does: post('A', 'recovery', at(2), {
          unitId: 'U',
          readings: readings('R1', '0', '990'),
          entries: [mass('U -> R1', '990')],
        }),
        posted: [line('U -> R1', '990'), added('unitDifference -> U', '990')],
        books: books({ C1: '9500', R1: '990', U: '0' }),
        open: [flag('moreCameOutThanWentIn', 'U', '990')],
      },
      {
        step: 'B',
        entered: 'the 1st: full recharge 1,290',
        does: post('B', 'fullRecharge', at(1), {
          unitId: 'U',
          readings: readings('C1', '9500', '8210'),
          entries: [mass('C1 -> U', '1290')],
        }),
        posted: [line('C1 -> U', '1290'), again('A', 'U -> unitDifference', '990')],
        books: { ...books({ C1: '8210', R1: '990', U: '300' }), R9: book('1290') },
        open: [],
      },
    ],
    end: { emissions: [], counted: [{ unit: 'U', massG: '1290', on: '2026-03-01' }], places: {} },
  },
];
