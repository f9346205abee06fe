import {
  added,
  at,
  book,
  books,
  cylinder,
  flag,
  knownUnit,
  line,
  mass,
  post,
  reading,
  readings,
  readingZeroed,
} from './build.ts';
import type { Scenario, ScenarioAct } from './scenario.ts';

const startAt = (contentG: string) => ({
  cylinders: { C1: cylinder(contentG) },
  units: { U: knownUnit('1290', '1400') },
});
const refill = (beforeG: string, afterG: string, massG: string): ScenarioAct =>
  post('a', 'refill', at(2), {
    unitId: 'U',
    readings: readings('C1', beforeG, afterG),
    entries: [mass('C1 -> U', massG)],
  });

export const readingAgainstBook: Scenario = {
  id: 'S20',
  title: 'Reading against the book; a mass without readings; stolen',
  cases: [
    {
      id: 'S20.1',
      title: 'C1 9,500, 60 beyond',
      start: startAt('9500'),
      steps: [
        {
          step: 'a',
          entered: '9,440 to 9,350',
          does: refill('9440', '9350', '90'),
          posted: [added('C1 -> cylinderDifference', '60'), line('C1 -> U', '90')],
          books: books({ C1: '9350', U: '1380' }),
          open: [flag('cylinderNotExplained', 'C1', '-60')],
        },
      ],
      end: {
        emissions: [],
        counted: [{ unit: 'U', massG: '90' }],
        places: { cylinderDifference: book('60') },
      },
    },
    {
      id: 'S20.2',
      title: 'C1 9,500, 3 within: nothing is posted, the book keeps its 3',
      start: startAt('9500'),
      steps: [
        {
          step: 'a',
          entered: '9,497 to 9,407',
          does: refill('9497', '9407', '90'),
          posted: [line('C1 -> U', '90')],
          books: books({ C1: '9410', U: '1380' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '90' }], places: {} },
    },
    {
      id: 'S20.3',
      title: 'C1 60, 3 within, but the book would fall to -2: the whole gap is posted',
      start: startAt('60'),
      steps: [
        {
          step: 'a',
          entered: '63 to 1',
          does: refill('63', '1', '62'),
          posted: [added('cylinderDifference -> C1', '3'), line('C1 -> U', '62')],
          books: books({ C1: '1', U: '1352' }),
          open: [],
        },
      ],
      end: {
        emissions: [],
        counted: [{ unit: 'U', massG: '62' }],
        places: { cylinderDifference: book('-3') },
      },
    },
    {
      id: 'S20.4',
      title: 'C1 60, a mass without readings that exceeds the book',
      start: startAt('60'),
      steps: [
        {
          step: 'a',
          entered: 'scale zeroed, 62: refused, weigh the cylinder, then post',
          does: post('a', 'refill', at(2), {
            unitId: 'U',
            readings: [readingZeroed('C1', 'before', '0', 'g'), readingZeroed('C1', 'after', '-62', 'g')],
            entries: [mass('C1 -> U', '62')],
          }),
          refused: { code: 'exceedsBook', givenG: '62', allowedG: '60' },
          posted: [],
          books: books({ C1: '60', U: '1290' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S20.5',
      title: 'C1 6,000 stolen; found again and weighed at 5,400',
      start: { cylinders: { C1: cylinder('6000') }, units: {} },
      steps: [
        {
          step: 'a',
          entered: 'stolen',
          does: post('a', 'loss', at(2), {
            entries: [mass('C1 -> missing', '6000', { howKnown: 'estimated' })],
            reason: 'stolen from the van overnight',
          }),
          posted: [line('C1 -> missing', '6000')],
          books: books({ C1: '0' }),
          open: [flag('cylinderMissing', 'C1', '6000')],
        },
        {
          step: 'b',
          entered: 'found, 5,400',
          does: post('b', 'found', at(9), {
            readings: [reading('C1', 'only', '5400')],
            entries: [mass('missing -> C1', '5400')],
          }),
          posted: [line('missing -> C1', '5400')],
          books: books({ C1: '5400' }),
          open: [flag('cylinderMissing', 'C1', '600')],
        },
      ],
      end: { emissions: [], counted: [], places: { missing: book('600') } },
    },
  ],
};
