import type { UnitCondition } from '../entry-group.schema.ts';
import {
  added,
  at,
  book,
  books,
  cylinder,
  emitted,
  flag,
  line,
  mass,
  post,
  readings,
  says,
  sumOnly,
  unknownUnit,
} from './build.ts';
import type { Scenario, ScenarioAct } from './scenario.ts';

const start = { cylinders: { C1: cylinder('9500') }, units: { U: unknownUnit('1290') } };
const firstRefill = (answer: UnitCondition): ScenarioAct =>
  post('a', 'refill', at(2), {
    unitId: 'U',
    readings: readings('C1', '9500', '9200'),
    entries: [mass('C1 -> U', '300')],
    statements: [says('U', answer)],
  });

export const bookNotKnown: Scenario = {
  id: 'S8',
  title: 'Refill on a book that is not known',
  cases: [
    {
      id: 'S8.1',
      title: 'full at the first visit, refill at the second',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300, full',
          does: firstRefill('full'),
          posted: [
            line('C1 -> U', '300'),
            added('opening -> U', '990'),
            added('opening -> atmosphere:beforeOurCare', '300'),
          ],
          books: books({ C1: '9200', U: '1290' }),
          open: [flag('unitOpenedAt', 'U', '990')],
        },
        {
          step: 'b',
          entered: 'refill 150, full',
          does: post('b', 'refill', at(60), {
            unitId: 'U',
            readings: readings('C1', '9200', '9050'),
            entries: [mass('C1 -> U', '150')],
            statements: [says('U', 'full')],
          }),
          posted: [added('U -> atmosphere:inferred', '150'), line('C1 -> U', '150')],
          books: books({ C1: '9050', U: '1290' }),
          open: [flag('unitOpenedAt', 'U', '990')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '150'), emitted('beforeOurCare', '300')],
        counted: [
          { unit: 'U', massG: '300' },
          { unit: 'U', massG: '150' },
        ],
        places: {},
      },
    },
    {
      id: 'S8.2',
      title: 'not full, then full',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300, not full',
          does: firstRefill('notFull'),
          posted: [line('C1 -> U', '300')],
          books: { C1: book('9200'), U: sumOnly('300') },
          open: [flag('bookNotKnown', 'U', '300'), flag('unitShort', 'U')],
        },
        {
          step: 'b',
          entered: 'refill 200, full',
          does: post('b', 'refill', at(60), {
            unitId: 'U',
            readings: readings('C1', '9200', '9000'),
            entries: [mass('C1 -> U', '200')],
            statements: [says('U', 'full')],
          }),
          posted: [
            line('C1 -> U', '200'),
            added('opening -> U', '790'),
            added('opening -> atmosphere:beforeOurCare', '500'),
          ],
          books: books({ C1: '9000', U: '1290' }),
          open: [flag('unitOpenedAt', 'U', '790')],
        },
      ],
      end: {
        emissions: [emitted('beforeOurCare', '500')],
        counted: [
          { unit: 'U', massG: '300' },
          { unit: 'U', massG: '200' },
        ],
        places: {},
      },
    },
    {
      id: 'S8.3',
      title: 'not known, then found flat',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300, not known',
          does: firstRefill('notKnown'),
          posted: [line('C1 -> U', '300')],
          books: { C1: book('9200'), U: sumOnly('300') },
          open: [flag('bookNotKnown', 'U', '300')],
        },
        {
          step: 'b',
          entered: 'found flat; vacuum on the whole circuit',
          does: post('b', 'vacuum', at(60), { unitId: 'U', statements: [says('U', 'empty', 'foundFlat')] }),
          posted: [
            added('U -> atmosphere:inferred', '300', { atLeast: true }),
            added('opening -> atmosphere:beforeOurCare', '1290'),
          ],
          books: books({ C1: '9200', U: '0' }),
          open: [flag('oursGoneAtLeast', 'U', '300')],
        },
        {
          step: 'c',
          entered: 'full recharge 1,290',
          does: post('c', 'fullRecharge', at(60, '15:00'), {
            unitId: 'U',
            readings: readings('C1', '9200', '7910'),
            entries: [mass('C1 -> U', '1290')],
          }),
          posted: [line('C1 -> U', '1290')],
          books: books({ C1: '7910', U: '1290' }),
          open: [flag('oursGoneAtLeast', 'U', '300')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '300', { atLeastG: '300' }), emitted('beforeOurCare', '1290')],
        counted: [
          { unit: 'U', massG: '300' },
          { unit: 'U', massG: '1290' },
        ],
        places: {},
      },
    },
    {
      id: 'S8.4',
      title: 'full charge not known either: full settles nothing',
      start: { cylinders: { C1: cylinder('9500') }, units: { U: unknownUnit(null) } },
      steps: [
        {
          step: 'a',
          entered: 'refill 300, full',
          does: firstRefill('full'),
          posted: [line('C1 -> U', '300')],
          books: { C1: book('9200'), U: sumOnly('300') },
          open: [flag('bookNotKnown', 'U', '300'), flag('fullChargeNotDetermined', 'U')],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
  ],
};
