import {
  added,
  again,
  at,
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
  says,
} from './build.ts';
import type { Scenario, ScenarioStart } from './scenario.ts';

const start: ScenarioStart = {
  cylinders: { C1: cylinder('9500') },
  units: { U: newUnit('1250', '1390'), U2: knownUnit('2000', '2000') },
  history: [
    group('open', 'extraCharge', at(2, '10:00'), {
      unitId: 'U',
      openWeighIn: true,
      readings: [reading('C1', 'before', '9500')],
    }),
  ],
};
const closing = post('a', 'extraCharge', at(2, '10:00'), {
  unitId: 'U',
  closesGroupId: 'open',
  readings: [reading('C1', 'after', '9362')],
  entries: [mass('C1 -> U', '138')],
});

export const openWeighIn: Scenario = {
  id: 'S5',
  title: 'Open weigh-in',
  cases: [
    {
      id: 'S5.1',
      title: 'closed by the next reading, 9,362 in the evening',
      start,
      steps: [
        {
          step: 'a',
          entered: 'open weigh-in closed: 9,500 to 9,362, dated 10:00',
          does: closing,
          posted: [line('C1 -> U', '138')],
          books: books({ C1: '9362', U: '1388' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S5.2',
      title: 'another technician uses the cylinder first; the weigh-in is closed afterwards',
      start,
      steps: [
        {
          step: 'b',
          entered: '12:00, refill of U2: 9,362 to 9,302, full',
          does: post('b', 'refill', at(2, '12:00'), {
            unitId: 'U2',
            readings: readings('C1', '9362', '9302'),
            entries: [mass('C1 -> U2', '60')],
            statements: [says('U2', 'full')],
          }),
          posted: [
            added('C1 -> cylinderDifference', '138'),
            added('U2 -> atmosphere:inferred', '60'),
            line('C1 -> U2', '60'),
          ],
          books: books({ C1: '9302', U: '1250', U2: '2000' }),
          open: [flag('cylinderNotExplained', 'C1', '-138')],
        },
        {
          step: 'a',
          entered: 'then closed: 9,500 to 9,362, dated 10:00',
          does: closing,
          posted: [line('C1 -> U', '138'), again('b', 'cylinderDifference -> C1', '138')],
          books: books({ C1: '9302', U: '1388', U2: '2000' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '60')], counted: [{ unit: 'U2', massG: '60' }], places: {} },
    },
  ],
};
