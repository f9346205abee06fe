import { at, books, cylinder, flag, line, mass, newUnit, post, readings, says } from './build.ts';
import type { Scenario } from './scenario.ts';

export const overshoot: Scenario = {
  id: 'S3',
  title: 'Overshoot, then the overcharge removed',
  cases: [
    {
      id: 'S3.1',
      title: 'more than full, then 30 taken out in the same job',
      start: {
        cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
        units: { U: newUnit('1250', '1340') },
      },
      steps: [
        {
          step: 'a',
          entered: 'extra 120 instead of 90: 9,500 to 9,380; asked: more than full',
          does: post('a', 'extraCharge', at(2), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9500', '9380'),
            entries: [mass('C1 -> U', '120')],
            statements: [says('U', 'moreThanFull')],
          }),
          posted: [line('C1 -> U', '120')],
          books: books({ C1: '9380', U: '1370' }),
          open: [flag('bookAboveFullCharge', 'U', '30')],
        },
        {
          step: 'b',
          entered: 'same job: 30 into R1; no answer needed',
          does: post('b', 'overchargeRemoved', at(2, '11:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('R1', '0', '30'),
            entries: [mass('U -> R1', '30')],
          }),
          posted: [line('U -> R1', '30')],
          books: books({ C1: '9380', R1: '30', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
  ],
};
