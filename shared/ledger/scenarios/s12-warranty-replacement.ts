import {
  added,
  at,
  books,
  cylinder,
  emitted,
  flag,
  line,
  mass,
  NOTHING,
  newUnit,
  post,
  readings,
  says,
} from './build.ts';
import { installHistory } from './install-history.ts';
import type { Scenario } from './scenario.ts';

export const warrantyReplacement: Scenario = {
  id: 'S12',
  title: 'Outdoor unit replaced under warranty, valves shut',
  cases: [
    {
      id: 'S12.1',
      title: 'recovered, replaced with its factory charge, extra weighed in again',
      start: {
        cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
        units: { U: newUnit('1250', '1340') },
        history: [installHistory],
      },
      steps: [
        {
          step: 'a',
          entered: 'recovery 1,290, completed',
          does: post('a', 'recovery', at(40), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('R1', '0', '1290'),
            entries: [mass('U -> R1', '1290')],
            statements: [says('U', 'empty', 'recovery')],
          }),
          posted: [added('U -> atmosphere:inferred', '50'), line('U -> R1', '1290')],
          books: books({ C1: '9410', R1: '1290', U: '0' }),
          open: [flag('lossAtRecovery', 'U', '50')],
        },
        {
          step: 'b',
          entered: 'vacuum on the lines only (new outdoor unit, valves shut)',
          does: NOTHING,
          posted: [],
          books: books({ C1: '9410', R1: '1290', U: '0' }),
          open: [flag('lossAtRecovery', 'U', '50')],
        },
        {
          step: 'c',
          entered: 'new outdoor unit, factory charge 1,250',
          does: post('c', 'warrantyReplacement', at(41), {
            unitId: 'U',
            jobId: 'J1',
            entries: [mass('factory -> U', '1250', { howKnown: 'factory' })],
          }),
          posted: [line('factory -> U', '1250')],
          books: books({ C1: '9410', R1: '1290', U: '1250' }),
          open: [flag('lossAtRecovery', 'U', '50')],
        },
        {
          step: 'd',
          entered: 'extra 90',
          does: post('d', 'extraCharge', at(41, '14:00'), {
            unitId: 'U',
            jobId: 'J1',
            readings: readings('C1', '9410', '9320'),
            entries: [mass('C1 -> U', '90')],
          }),
          posted: [line('C1 -> U', '90')],
          books: books({ C1: '9320', R1: '1290', U: '1340' }),
          open: [flag('lossAtRecovery', 'U', '50')],
        },
      ],
      end: { emissions: [emitted('inferred', '50')], counted: [], places: {} },
    },
  ],
};
