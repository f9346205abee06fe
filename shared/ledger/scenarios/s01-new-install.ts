import { at, books, cylinder, emitted, hoseLost, line, mass, newUnit, post, reading, readings } from './build.ts';
import type { Scenario } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null) },
  units: { U: newUnit('1250', '1340') },
};
const filledHose = { hoseG: '28' };

export const newInstall: Scenario = {
  id: 'S1',
  title: 'New install with extra, gross readings, hose of 28 g',
  cases: [
    {
      id: 'S1.1',
      title: 'hose full at the start, lost at the end',
      start,
      steps: [
        {
          step: 'a',
          entered: '9,472 to 9,382',
          does: post('a', 'extraCharge', at(2), {
            unitId: 'U',
            readings: [reading('C1', 'before', '9472', filledHose), reading('C1', 'after', '9382')],
            entries: [mass('C1 -> U', '90'), hoseLost('C1')],
          }),
          posted: [line('C1 -> U', '90'), line('C1 -> atmosphere:hose', '28')],
          books: books({ C1: '9382', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('hose', '28')], counted: [], places: {} },
    },
    {
      id: 'S1.2',
      title: 'hose full at the start, emptied into the unit (the scale stops at 62)',
      start,
      steps: [
        {
          step: 'b',
          entered: '9,472 to 9,410',
          does: post('b', 'extraCharge', at(2), {
            unitId: 'U',
            readings: [reading('C1', 'before', '9472', filledHose), reading('C1', 'after', '9410')],
            entries: [mass('C1 -> U', '90')],
          }),
          posted: [line('C1 -> U', '90')],
          books: books({ C1: '9410', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S1.3',
      title: 'hose full at the start, recovered',
      start,
      steps: [
        {
          step: 'c',
          entered: '9,472 to 9,382',
          does: post('c', 'extraCharge', at(2), {
            unitId: 'U',
            readings: [reading('C1', 'before', '9472', filledHose), reading('C1', 'after', '9382')],
            entries: [mass('C1 -> U', '90'), mass('C1 -> R1', '28', { howKnown: 'estimated' })],
          }),
          posted: [line('C1 -> U', '90'), line('C1 -> R1', '28')],
          books: books({ C1: '9382', R1: '28', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S1.4',
      title: 'hose not yet full at the start, lost at the end: the drop of 118 holds both',
      start,
      steps: [
        {
          step: 'd',
          entered: '9,500 to 9,382',
          does: post('d', 'extraCharge', at(2), {
            unitId: 'U',
            readings: readings('C1', '9500', '9382'),
            entries: [mass('C1 -> U', '90'), hoseLost('C1')],
          }),
          posted: [line('C1 -> U', '90'), line('C1 -> atmosphere:hose', '28')],
          books: books({ C1: '9382', U: '1340' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('hose', '28')], counted: [], places: {} },
    },
  ],
};
