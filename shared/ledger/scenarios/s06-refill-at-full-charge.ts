import type { UnitCondition } from '../entry-group.schema.ts';
import { added, at, books, cylinder, emitted, flag, knownUnit, line, mass, post, readings, says } from './build.ts';
import type { Scenario, ScenarioAct } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
  units: { U: knownUnit('1290', '1290') },
};
const refill = (answer: UnitCondition | null): ScenarioAct =>
  post('a', 'refill', at(2), {
    unitId: 'U',
    readings: readings('C1', '9500', '9200'),
    entries: [mass('C1 -> U', '300')],
    statements: answer ? [says('U', answer)] : [],
  });
const counted = [{ unit: 'U', massG: '300' }];
const after = books({ C1: '9200', U: '1290' });

export const refillAtFullCharge: Scenario = {
  id: 'S6',
  title: 'Refill of 300 on a book at full charge',
  cases: [
    {
      id: 'S6.1',
      title: "full (by the manual's method)",
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300',
          does: refill('full'),
          posted: [added('U -> atmosphere:inferred', '300'), line('C1 -> U', '300')],
          books: after,
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '300')], counted, places: {} },
    },
    {
      id: 'S6.2',
      title: 'not full',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300',
          does: refill('notFull'),
          posted: [added('U -> atmosphere:inferred', '300', { atLeast: true }), line('C1 -> U', '300')],
          books: after,
          open: [flag('unitShort', 'U')],
        },
      ],
      end: { emissions: [emitted('inferred', '300', { atLeastG: '300' })], counted, places: {} },
    },
    {
      id: 'S6.3',
      title: 'not answered, which counts as not known; then answered so',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300',
          does: refill(null),
          posted: [added('U -> atmosphere:inferred', '300'), line('C1 -> U', '300')],
          books: after,
          open: [flag('askIfFull', 'U')],
        },
        {
          step: 'answered',
          entered: 'answered later: not known',
          does: { act: 'answer', recordId: 'answered', of: 'a', statement: says('U', 'notKnown') },
          posted: [],
          books: after,
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '300')], counted, places: {} },
    },
    {
      id: 'S6.4',
      title: 'more than full',
      start,
      steps: [
        {
          step: 'a',
          entered: 'refill 300',
          does: refill('moreThanFull'),
          posted: [line('C1 -> U', '300')],
          books: books({ C1: '9200', U: '1590' }),
          open: [flag('bookAboveFullCharge', 'U', '300')],
        },
      ],
      end: { emissions: [], counted, places: {} },
    },
    {
      id: 'S6.5',
      title: 'by weight: recovered, repaired, weighed back in',
      start,
      steps: [
        {
          step: 'a',
          entered: 'recovery 990, completed',
          does: post('a', 'recovery', at(2), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('R1', '0', '990'),
            entries: [mass('U -> R1', '990')],
            statements: [says('U', 'empty', 'recovery')],
          }),
          posted: [added('U -> atmosphere:inferred', '300'), line('U -> R1', '990')],
          books: books({ C1: '9500', R1: '990', U: '0' }),
          open: [flag('lossAtRecovery', 'U', '300')],
        },
        {
          step: 'b',
          entered: 'put back 990, and 300 from C1; book equals full charge, nothing asked',
          does: post('b', 'putBack', at(2, '14:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: [...readings('R1', '990', '0'), ...readings('C1', '9500', '9200')],
            entries: [mass('R1 -> U', '990'), mass('C1 -> U', '300')],
          }),
          posted: [line('R1 -> U', '990'), line('C1 -> U', '300')],
          books: books({ C1: '9200', R1: '0', U: '1290' }),
          open: [flag('lossAtRecovery', 'U', '300')],
        },
      ],
      end: { emissions: [emitted('inferred', '300')], counted, places: {} },
    },
  ],
};
