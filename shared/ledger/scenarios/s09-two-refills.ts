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
import type { Scenario } from './scenario.ts';

const start = { cylinders: { C1: cylinder('9500') }, units: { U: knownUnit('1290', '1290') } };

export const twoRefills: Scenario = {
  id: 'S9',
  title: "Two refills in a row; customer's refrigerant; another contractor",
  cases: [
    {
      id: 'S9.1',
      title: 'not full, then full',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300, not full',
          does: post('a', 'refill', at(2), {
            unitId: 'U',
            readings: readings('C1', '9500', '9200'),
            entries: [mass('C1 -> U', '300')],
            statements: [says('U', 'notFull')],
          }),
          posted: [added('U -> atmosphere:inferred', '300', { atLeast: true }), line('C1 -> U', '300')],
          books: books({ C1: '9200', U: '1290' }),
          open: [flag('unitShort', 'U')],
        },
        {
          step: 'b',
          entered: '30 days later: refill 200, full',
          does: post('b', 'refill', at(32), {
            unitId: 'U',
            readings: readings('C1', '9200', '9000'),
            entries: [mass('C1 -> U', '200')],
            statements: [says('U', 'full')],
          }),
          posted: [added('U -> atmosphere:inferred', '200'), line('C1 -> U', '200')],
          books: books({ C1: '9000', U: '1290' }),
          open: [flag('secondAdditionIn30Days', 'U', '200')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '500', { atLeastG: '300' })],
        counted: [
          { unit: 'U', massG: '300' },
          { unit: 'U', massG: '200' },
        ],
        places: {},
      },
    },
    {
      id: 'S9.2',
      title: "the customer's own cylinder, weighed on our scale",
      start,
      steps: [
        {
          step: 'a',
          entered: "refill 180 from the customer's, full",
          does: post('a', 'refill', at(2), {
            unitId: 'U',
            entries: [mass('customer -> U', '180')],
            statements: [says('U', 'full')],
          }),
          posted: [added('U -> atmosphere:inferred', '180'), line('customer -> U', '180')],
          books: books({ C1: '9500', U: '1290' }),
          open: [],
        },
      ],
      end: {
        emissions: [emitted('inferred', '180')],
        counted: [{ unit: 'U', massG: '180' }],
        places: { customer: book('-180') },
      },
    },
    {
      id: 'S9.3',
      title: 'another contractor added 400, told by invoice',
      start,
      steps: [
        {
          step: 'a',
          entered: '400, dated by the invoice, no answer',
          does: post('a', 'otherContractor', at(2), {
            unitId: 'U',
            entries: [mass('otherContractor -> U', '400', { howKnown: 'invoice' })],
            documents: [
              {
                kind: 'invoice',
                number: '118',
                date: '2026-03-02',
                refrigerant: 'R-410A',
                mass: { value: '400', unit: 'g' },
              },
            ],
          }),
          posted: [added('U -> atmosphere:inferred', '400'), line('otherContractor -> U', '400')],
          books: books({ C1: '9500', U: '1290' }),
          open: [flag('askIfFull', 'U')],
        },
      ],
      end: {
        emissions: [emitted('inferred', '400')],
        counted: [{ unit: 'U', massG: '400', on: '2026-03-02' }],
        places: { otherContractor: book('-400') },
      },
    },
  ],
};
