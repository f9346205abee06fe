import { added, at, books, cylinder, emitted, flag, knownUnit, line, mass, post, readings, says } from './build.ts';
import type { Scenario } from './scenario.ts';

const startAt = (bookG: string) => ({
  cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
  units: { U: knownUnit(bookG, '1290') },
});
const refill300 = post('a', 'refill', at(2), {
  unitId: 'U',
  readings: readings('C1', '9500', '9200'),
  entries: [mass('C1 -> U', '300')],
  statements: [says('U', 'full')],
});

export const refillOffFullCharge: Scenario = {
  id: 'S7',
  title: 'Refill, full, on a book above and below full charge',
  cases: [
    {
      id: 'S7.1',
      title: 'book 1,500',
      start: startAt('1500'),
      steps: [
        {
          step: 'start',
          entered: 'nothing: the opened book stands above full charge',
          does: { act: 'nothing' },
          posted: [],
          books: books({ C1: '9500', U: '1500' }),
          open: [flag('bookAboveFullCharge', 'U', '210')],
        },
        {
          step: 'a',
          entered: 'refill 300, full',
          does: refill300,
          posted: [added('U -> atmosphere:inferred', '510'), line('C1 -> U', '300')],
          books: books({ C1: '9200', U: '1290' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '510')], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
    {
      id: 'S7.2',
      title: 'book 800, no earlier loss: the weighed book stays',
      start: startAt('800'),
      steps: [
        {
          step: 'a',
          entered: 'refill 300, full',
          does: refill300,
          posted: [line('C1 -> U', '300')],
          books: books({ C1: '9200', U: '1100' }),
          open: [flag('saidFullBookBelow', 'U', '190')],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
    {
      id: 'S7.3',
      title: 'book 800 after an inferred loss of 150: taken back as far as it reaches',
      start: startAt('1290'),
      steps: [
        {
          step: 'a',
          entered: 'book 1,290: refill 150, not known',
          does: post('a', 'refill', at(2), {
            unitId: 'U',
            readings: readings('C1', '9500', '9350'),
            entries: [mass('C1 -> U', '150')],
            statements: [says('U', 'notKnown')],
          }),
          posted: [added('U -> atmosphere:inferred', '150'), line('C1 -> U', '150')],
          books: books({ C1: '9350', U: '1290' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'later job: 490 into R1, not completed',
          does: post('b', 'recovery', at(50), {
            unitId: 'U',
            jobId: 'J2',
            readings: readings('R1', '0', '490'),
            entries: [mass('U -> R1', '490')],
          }),
          posted: [line('U -> R1', '490')],
          books: books({ C1: '9350', R1: '490', U: '800' }),
          open: [],
        },
        {
          step: 'c',
          entered: 'later job: refill 300, full',
          does: post('c', 'refill', at(100), {
            unitId: 'U',
            jobId: 'J3',
            readings: readings('C1', '9350', '9050'),
            entries: [mass('C1 -> U', '300')],
            statements: [says('U', 'full')],
          }),
          posted: [line('C1 -> U', '300'), added('atmosphere:inferred -> U', '150', { takenBack: true })],
          books: books({ C1: '9050', R1: '490', U: '1250' }),
          open: [flag('lossTakenBack', 'U', '150'), flag('saidFullBookBelow', 'U', '40')],
        },
      ],
      end: {
        emissions: [],
        counted: [
          { unit: 'U', massG: '150' },
          { unit: 'U', massG: '300' },
        ],
        places: {},
      },
    },
    {
      id: 'S7.4',
      title: 'more goes in than full charge holds (book 100, added 1,400): the loss stops at what the unit held',
      start: startAt('100'),
      steps: [
        {
          step: 'a',
          entered: 'refill 1,400, full',
          does: post('a', 'refill', at(2), {
            unitId: 'U',
            readings: readings('C1', '9500', '8100'),
            entries: [mass('C1 -> U', '1400')],
            statements: [says('U', 'full')],
          }),
          posted: [added('U -> atmosphere:inferred', '100'), line('C1 -> U', '1400')],
          books: books({ C1: '8100', U: '1400' }),
          open: [flag('bookAboveFullCharge', 'U', '110')],
        },
      ],
      end: { emissions: [emitted('inferred', '100')], counted: [{ unit: 'U', massG: '1400' }], places: {} },
    },
  ],
};
