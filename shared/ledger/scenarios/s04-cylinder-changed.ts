import { at, books, cylinder, emitted, hoseLost, line, mass, newUnit, post, readings } from './build.ts';
import type { Scenario } from './scenario.ts';

export const cylinderChanged: Scenario = {
  id: 'S4',
  title: 'Cylinder changed in the middle',
  cases: [
    {
      id: 'S4.1',
      title: 'first hose lost at the change, second emptied into the unit',
      start: {
        cylinders: { C1: cylinder('240'), C2: cylinder('11340') },
        units: { U: newUnit('1250', '1560') },
      },
      steps: [
        {
          step: 'a',
          entered: 'C1 240 to 12, hose lost at the change; C2 11,340 to 11,230',
          does: post('a', 'extraCharge', at(2), {
            unitId: 'U',
            readings: [...readings('C1', '240', '12'), ...readings('C2', '11340', '11230')],
            entries: [mass('C1 -> U', '200'), mass('C2 -> U', '110'), hoseLost('C1')],
          }),
          posted: [line('C1 -> U', '200'), line('C2 -> U', '110'), line('C1 -> atmosphere:hose', '28')],
          books: books({ C1: '12', C2: '11230', U: '1560' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('hose', '28')], counted: [], places: {} },
    },
  ],
};
