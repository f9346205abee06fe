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
  newUnit,
  post,
  reading,
  readings,
  reversal,
  says,
} from './build.ts';
import type { Scenario, ScenarioStep, SymbolicGroup } from './scenario.ts';

const refill = (step: string, day: number, beforeG: string, afterG: string, massG: string): SymbolicGroup =>
  group(step, 'refill', at(day), {
    unitId: 'U',
    readings: readings('C1', beforeG, afterG),
    entries: [mass('C1 -> U', massG)],
    statements: [says('U', 'full')],
  });

const extraCharge = (step: string, from: string): SymbolicGroup =>
  group(step, 'extraCharge', at(2), {
    unitId: 'U',
    readings: readings(from, '7400', '7310'),
    entries: [mass(`${from} -> U`, '90')],
  });

const recoveryFrom = (step: string, unit: string): SymbolicGroup =>
  group(step, 'recovery', at(2), {
    unitId: unit,
    readings: readings('R1', '4000', '5240'),
    entries: [mass(`${unit} -> R1`, '1240')],
    statements: [says(unit, 'empty', 'recovery')],
  });
const wrongUnit: ScenarioStep[] = [
  {
    step: 'a',
    entered: 'recovery 1,240 from U, completed',
    does: { act: 'post', group: recoveryFrom('a', 'U') },
    posted: [added('U -> atmosphere:inferred', '50'), line('U -> R1', '1240')],
    books: books({ R1: '5240', U: '0', U2: '1300' }),
    open: [flag('lossAtRecovery', 'U', '50')],
  },
  {
    step: 'b',
    entered: 'sent, weighed 5,240',
    does: post('b', 'reclaim', at(5), {
      readings: [reading('R1', 'only', '5240')],
      entries: [mass('R1 -> reclaimer', '5240')],
    }),
    posted: [line('R1 -> reclaimer', '5240')],
    books: books({ R1: '0', U: '0', U2: '1300' }),
    open: [flag('lossAtRecovery', 'U', '50')],
  },
];
const wrongUnitStart = {
  cylinders: { R1: cylinder('4000') },
  units: { U: knownUnit('1290', '1290'), U2: knownUnit('1300', '1300') },
};

export const reversals: Scenario = {
  id: 'S22',
  title: 'Reversals',
  cases: [
    {
      id: 'S22.1',
      title: 'extra charge on the wrong cylinder (C1 9,500 chosen, C2 7,400 on the scale)',
      start: {
        cylinders: { C1: cylinder('9500'), C2: cylinder('7400') },
        units: { U: newUnit('1250', '1340') },
      },
      steps: [
        {
          step: 'a',
          entered: '"C1" 7,400 to 7,310',
          does: { act: 'post', group: extraCharge('a', 'C1') },
          posted: [added('C1 -> cylinderDifference', '2100'), line('C1 -> U', '90')],
          books: books({ C1: '7310', C2: '7400', U: '1340' }),
          open: [flag('cylinderNotExplained', 'C1', '-2100')],
        },
        {
          step: 'b',
          entered: 'reversed, replaced: C2 7,400 to 7,310',
          does: { act: 'reverse', recordId: 'b-reversal', of: 'a', replacement: extraCharge('b', 'C2') },
          posted: [
            reversal('a', 'U -> C1', '90'),
            line('C2 -> U', '90'),
            again('a', 'cylinderDifference -> C1', '2100'),
          ],
          books: books({ C1: '9500', C2: '7310', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S22.2',
      title: 'the first of two refill groups reversed without replacement; the second is judged again',
      start: { cylinders: { C1: cylinder('9500') }, units: { U: knownUnit('1290', '1290') } },
      steps: [
        {
          step: 'a',
          entered: 'refill 300, full; 9,480 to 9,180',
          does: { act: 'post', group: refill('a', 2, '9480', '9180', '300') },
          posted: [
            added('C1 -> cylinderDifference', '20'),
            added('U -> atmosphere:inferred', '300'),
            line('C1 -> U', '300'),
          ],
          books: books({ C1: '9180', U: '1290' }),
          open: [flag('cylinderNotExplained', 'C1', '-20')],
        },
        {
          step: 'b',
          entered: 'refill 200, full; 9,180 to 8,980',
          does: { act: 'post', group: refill('b', 60, '9180', '8980', '200') },
          posted: [added('U -> atmosphere:inferred', '200'), line('C1 -> U', '200')],
          books: books({ C1: '8980', U: '1290' }),
          open: [flag('cylinderNotExplained', 'C1', '-20')],
        },
        {
          step: 'c',
          entered: 'group a reversed',
          does: { act: 'reverse', recordId: 'c', of: 'a', replacement: null },
          posted: [
            reversal('a', 'U -> C1', '300'),
            again('b', 'C1 -> cylinderDifference', '320'),
            again('a', 'cylinderDifference -> C1', '20'),
            again('a', 'atmosphere:inferred -> U', '300'),
          ],
          books: books({ C1: '8980', U: '1290' }),
          open: [flag('cylinderNotExplained', 'C1', '-320')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '200')],
        counted: [{ unit: 'U', massG: '200' }],
        places: { cylinderDifference: book('320') },
      },
    },
    {
      id: 'S22.3',
      title: 'recovery from the wrong unit, found after the cylinder was sent off',
      start: wrongUnitStart,
      steps: [
        ...wrongUnit,
        {
          step: 'c',
          entered: 'reversed, replaced: from U2',
          does: { act: 'reverse', recordId: 'c-reversal', of: 'a', replacement: recoveryFrom('c', 'U2') },
          posted: [
            reversal('a', 'R1 -> U', '1240'),
            line('U2 -> R1', '1240'),
            added('U2 -> atmosphere:inferred', '60'),
            again('a', 'atmosphere:inferred -> U', '50'),
          ],
          books: books({ R1: '0', U: '1290', U2: '0' }),
          open: [flag('lossAtRecovery', 'U2', '60')],
        },
      ],
      end: { emissions: [emitted('inferred', '60')], counted: [], places: { reclaimer: book('5240') } },
    },
    {
      id: 'S22.4',
      title: 'the same without replacement: the reading at dispatch stands, so R1 is not below zero',
      start: wrongUnitStart,
      steps: [
        ...wrongUnit,
        {
          step: 'c',
          entered: 'reversed',
          does: { act: 'reverse', recordId: 'c', of: 'a', replacement: null },
          posted: [
            reversal('a', 'R1 -> U', '1240'),
            again('b', 'cylinderDifference -> R1', '1240'),
            again('a', 'atmosphere:inferred -> U', '50'),
          ],
          books: books({ R1: '0', U: '1290', U2: '1300' }),
          open: [flag('cylinderNotExplained', 'R1', '1240')],
        },
      ],
      end: {
        emissions: [],
        counted: [],
        places: { cylinderDifference: book('-1240'), reclaimer: book('5240') },
      },
    },
  ],
};
