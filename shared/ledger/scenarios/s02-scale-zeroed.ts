import { at, books, cylinder, emitted, hoseLost, line, mass, newUnit, post, reading, readingZeroed } from './build.ts';
import type { Scenario } from './scenario.ts';

export const scaleZeroed: Scenario = {
  id: 'S2',
  title: 'New install, scale zeroed, in ounces',
  cases: [
    {
      id: 'S2.1',
      title: 'a zeroed reading is a weighed mass, not a statement',
      start: {
        cylinders: { C1: cylinder('9500') },
        units: { U: newUnit('1250', '1340.718474') },
      },
      steps: [
        {
          step: 'a',
          entered: 'hose filled, zeroed, minus 3.2 oz; hose 28 g lost',
          does: post('a', 'extraCharge', at(2), {
            unitId: 'U',
            readings: [readingZeroed('C1', 'before', '0', 'oz'), readingZeroed('C1', 'after', '-3.2', 'oz')],
            entries: [mass('C1 -> U', '3.2', { unit: 'oz' }), hoseLost('C1')],
          }),
          posted: [line('C1 -> U', '90.718474'), line('C1 -> atmosphere:hose', '28')],
          books: books({ C1: '9381.281526', U: '1340.718474' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'weighed, 9,381 (book 9,381.281526; within)',
          does: post('b', 'weighing', at(3), { readings: [reading('C1', 'only', '9381')] }),
          posted: [],
          books: books({ C1: '9381.281526', U: '1340.718474' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('hose', '28')], counted: [], places: {} },
    },
  ],
};
