import { added, at, books, cylinder, emitted, flag, knownUnit, line, mass, post, readings, says } from './build.ts';
import type { Scenario } from './scenario.ts';

const start = { cylinders: { C1: cylinder('9500') }, units: { U: knownUnit('1340', '1340') } };
const vacuum = post('c', 'vacuum', at(3, '08:00'), {
  unitId: 'U',
  jobId: 'J1',
  statements: [says('U', 'empty', 'vacuum')],
});

export const foundFlat: Scenario = {
  id: 'S11',
  title: 'Found flat, trace charge, vacuum, full recharge',
  cases: [
    {
      id: 'S11.1',
      title: 'flat is recorded first',
      start,
      steps: [
        {
          step: 'a',
          entered: 'found flat',
          does: post('a', 'loss', at(2), { unitId: 'U', jobId: 'J1', statements: [says('U', 'empty', 'foundFlat')] }),
          posted: [added('U -> atmosphere:inferred', '1340')],
          books: books({ C1: '9500', U: '0' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'trace charge 50',
          does: post('b', 'traceCharge', at(2, '11:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9500', '9450'),
            entries: [mass('C1 -> U', '50')],
          }),
          posted: [line('C1 -> U', '50')],
          books: books({ C1: '9450', U: '50' }),
          open: [],
        },
        {
          step: 'c',
          entered: 'vacuum on the whole circuit',
          does: vacuum,
          posted: [added('U -> atmosphere:inferred', '50')],
          books: books({ C1: '9450', U: '0' }),
          open: [flag('vacuumWithoutRecovery', 'U', '50')],
        },
        {
          step: 'd',
          entered: 'full recharge 1,340',
          does: post('d', 'fullRecharge', at(3, '12:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9450', '8110'),
            entries: [mass('C1 -> U', '1340')],
          }),
          posted: [line('C1 -> U', '1340')],
          books: books({ C1: '8110', U: '1340' }),
          open: [flag('vacuumWithoutRecovery', 'U', '50')],
        },
      ],
      end: { emissions: [emitted('inferred', '1390')], counted: [{ unit: 'U', massG: '1390' }], places: {} },
    },
    {
      id: 'S11.2',
      title: 'only the vacuum is recorded',
      start,
      steps: [
        {
          step: 'c',
          entered: 'vacuum on the whole circuit',
          does: vacuum,
          posted: [added('U -> atmosphere:inferred', '1340')],
          books: books({ C1: '9500', U: '0' }),
          open: [flag('vacuumWithoutRecovery', 'U', '1340')],
        },
        {
          step: 'd',
          entered: 'full recharge 1,340',
          does: post('d', 'fullRecharge', at(3, '12:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9500', '8160'),
            entries: [mass('C1 -> U', '1340')],
          }),
          posted: [line('C1 -> U', '1340')],
          books: books({ C1: '8160', U: '1340' }),
          open: [flag('vacuumWithoutRecovery', 'U', '1340')],
        },
      ],
      end: { emissions: [emitted('inferred', '1340')], counted: [{ unit: 'U', massG: '1340' }], places: {} },
    },
  ],
};
