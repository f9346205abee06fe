import {
  added,
  at,
  book,
  books,
  cylinder,
  emitted,
  flag,
  knownUnit,
  line,
  mass,
  post,
  readings,
  says,
} from './build.ts';
import type { Scenario, ScenarioAct, ScenarioStep } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
  units: { U: knownUnit('1290', '1290') },
};
const needlessTopUp: ScenarioStep = {
  step: 'a',
  entered: 'refill 150, full (misjudged)',
  does: post('a', 'refill', at(2), {
    unitId: 'U',
    readings: readings('C1', '9500', '9350'),
    entries: [mass('C1 -> U', '150')],
    statements: [says('U', 'full')],
  }),
  posted: [added('U -> atmosphere:inferred', '150'), line('C1 -> U', '150')],
  books: books({ C1: '9350', U: '1290' }),
  open: [],
};
const decommission = (step: string, massG: string): ScenarioAct =>
  post(step, 'recovery', at(90), {
    unitId: 'U',
    readings: readings('R1', '0', massG),
    entries: [mass('U -> R1', massG)],
    statements: [says('U', 'empty', 'recovery')],
  });

export const recoverySurplus: Scenario = {
  id: 'S14',
  title: 'Recovery surplus after a needless top-up',
  cases: [
    {
      id: 'S14.1',
      title: 'the inferred loss covers it',
      start,
      steps: [
        needlessTopUp,
        {
          step: 'b',
          entered: 'decommission: recovery 1,436, completed',
          does: decommission('b', '1436'),
          posted: [line('U -> R1', '1436'), added('atmosphere:inferred -> U', '146', { takenBack: true })],
          books: books({ C1: '9350', R1: '1436', U: '0' }),
          open: [flag('lossTakenBack', 'U', '146')],
        },
      ],
      end: { emissions: [emitted('inferred', '4')], counted: [{ unit: 'U', massG: '150' }], places: {} },
    },
    {
      id: 'S14.2',
      title: 'beyond all inferred losses',
      start,
      steps: [
        needlessTopUp,
        {
          step: 'b',
          entered: 'decommission: recovery 1,500, completed',
          does: decommission('b', '1500'),
          posted: [
            line('U -> R1', '1500'),
            added('atmosphere:inferred -> U', '150', { takenBack: true }),
            added('unitDifference -> U', '60'),
          ],
          books: books({ C1: '9350', R1: '1500', U: '0' }),
          open: [flag('lossTakenBack', 'U', '150'), flag('moreCameOutThanWentIn', 'U', '60')],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '150' }], places: { unitDifference: book('-60') } },
    },
    {
      id: 'S14.3',
      title: 'found overcharged at the next visit',
      start,
      steps: [
        needlessTopUp,
        {
          step: 'b',
          entered: '150 removed into R1, full',
          does: post('b', 'overchargeRemoved', at(60), {
            unitId: 'U',
            readings: readings('R1', '0', '150'),
            entries: [mass('U -> R1', '150')],
            statements: [says('U', 'full')],
          }),
          posted: [line('U -> R1', '150'), added('atmosphere:inferred -> U', '150', { takenBack: true })],
          books: books({ C1: '9350', R1: '150', U: '1290' }),
          open: [flag('lossTakenBack', 'U', '150')],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '150' }], places: {} },
    },
    {
      id: 'S14.4',
      title: 'a loss from before the unit was empty is never taken back',
      start,
      steps: [
        {
          step: 'a',
          entered: 'found flat; vacuum on the whole circuit',
          does: post('a', 'vacuum', at(2), { unitId: 'U', statements: [says('U', 'empty', 'foundFlat')] }),
          posted: [added('U -> atmosphere:inferred', '1290')],
          books: books({ C1: '9500', U: '0' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'full recharge 1,290',
          does: post('b', 'fullRecharge', at(2, '15:00'), {
            unitId: 'U',
            readings: readings('C1', '9500', '8210'),
            entries: [mass('C1 -> U', '1290')],
          }),
          posted: [line('C1 -> U', '1290')],
          books: books({ C1: '8210', U: '1290' }),
          open: [],
        },
        {
          step: 'c',
          entered: 'decommission: recovery 1,350, completed',
          does: decommission('c', '1350'),
          posted: [line('U -> R1', '1350'), added('unitDifference -> U', '60')],
          books: books({ C1: '8210', R1: '1350', U: '0' }),
          open: [flag('moreCameOutThanWentIn', 'U', '60')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '1290')],
        counted: [{ unit: 'U', massG: '1290' }],
        places: { unitDifference: book('-60') },
      },
    },
  ],
};
