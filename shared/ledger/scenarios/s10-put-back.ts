import { added, at, books, cylinder, emitted, knownUnit, line, mass, post, readings, says } from './build.ts';
import type { Scenario, ScenarioStep } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
  units: { U: knownUnit('1290', '1290') },
};
const partialRecovery: ScenarioStep = {
  step: 'a',
  entered: '600 into R1, not completed',
  does: post('a', 'recovery', at(2, '09:00'), {
    unitId: 'U',
    jobId: 'J1',
    readings: readings('R1', '0', '600'),
    entries: [mass('U -> R1', '600')],
  }),
  posted: [line('U -> R1', '600')],
  books: books({ C1: '9500', R1: '600', U: '690' }),
  open: [],
};

export const putBack: Scenario = {
  id: 'S10',
  title: 'Partial recovery and put-back',
  cases: [
    {
      id: 'S10.1',
      title: 'put back whole',
      start,
      steps: [
        partialRecovery,
        {
          step: 'b',
          entered: 'put back 600: book 1,290, nothing asked',
          does: post('b', 'putBack', at(2, '12:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('R1', '600', '0'),
            entries: [mass('R1 -> U', '600')],
          }),
          posted: [line('R1 -> U', '600')],
          books: books({ C1: '9500', R1: '0', U: '1290' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S10.2',
      title: 'refill before the put-back: asked when the book passes full charge, whatever the kind',
      start,
      steps: [
        partialRecovery,
        {
          step: 'b',
          entered: 'refill 300: book 990, nothing asked',
          does: post('b', 'refill', at(2, '12:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9500', '9200'),
            entries: [mass('C1 -> U', '300')],
          }),
          posted: [line('C1 -> U', '300')],
          books: books({ C1: '9200', R1: '600', U: '990' }),
          open: [],
        },
        {
          step: 'c',
          entered: 'put back 600: book would be 1,590, asked: full',
          does: post('c', 'putBack', at(2, '13:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('R1', '600', '0'),
            entries: [mass('R1 -> U', '600')],
            statements: [says('U', 'full')],
          }),
          posted: [added('U -> atmosphere:inferred', '300'), line('R1 -> U', '600')],
          books: books({ C1: '9200', R1: '0', U: '1290' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '300')], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
  ],
};
