import { added, at, book, books, cylinder, emitted, flag, hoseLost, line, mass, post, readings } from './build.ts';
import type { Scenario } from './scenario.ts';

export const transfer: Scenario = {
  id: 'S17',
  title: 'Transfer weighed at both ends; non-refillable refilled',
  cases: [
    {
      id: 'S17.1',
      title: 'C2 (1,000) receives 5,000, C1 drops by 5,040, hose of 28 lost',
      start: { cylinders: { C1: cylinder('9500'), C2: cylinder('1000') }, units: {} },
      steps: [
        {
          step: 'a',
          entered: 'C1 9,500 to 4,460; C2 1,000 to 6,000; hose 28 lost',
          does: post('a', 'transfer', at(2), {
            readings: [...readings('C1', '9500', '4460'), ...readings('C2', '1000', '6000')],
            entries: [mass('C1 -> C2', '5000'), hoseLost('C1')],
          }),
          posted: [
            added('C1 -> cylinderDifference', '12'),
            line('C1 -> C2', '5000'),
            line('C1 -> atmosphere:hose', '28'),
          ],
          books: books({ C1: '4460', C2: '6000' }),
          open: [flag('cylinderNotExplained', 'C1', '-12')],
        },
      ],
      end: { emissions: [emitted('hose', '28')], counted: [], places: { cylinderDifference: book('12') } },
    },
    {
      id: 'S17.2',
      title: '400 into N1, a non-refillable cylinder: posted with its reason',
      start: { cylinders: { C1: cylinder('9500'), N1: cylinder(null, { nonRefillable: true }) }, units: {} },
      steps: [
        {
          step: 'a',
          entered: 'C1 9,500 to 9,100, N1 0 to 400',
          does: post('a', 'transfer', at(2), {
            readings: [...readings('C1', '9500', '9100'), ...readings('N1', '0', '400')],
            entries: [mass('C1 -> N1', '400')],
            reason: 'no recovery cylinder on the van',
          }),
          posted: [line('C1 -> N1', '400')],
          books: books({ C1: '9100', N1: '400' }),
          open: [flag('nonRefillableRefilled', 'N1', '400')],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
  ],
};
