import { added, again, at, books, cylinder, flag, knownUnit, line, mass, post, reading, readings } from './build.ts';
import { lateRecoveries } from './s21-late-recoveries.ts';
import type { Scenario, ScenarioStep } from './scenario.ts';

const start = {
  cylinders: { C1: cylinder('9500') },
  units: { U: knownUnit('1250', '1350'), U2: knownUnit('1800', '1900') },
};
const syncsFirst = (occurredAt: string): ScenarioStep => ({
  step: 'B',
  entered: '9,410 to 9,310, syncs first',
  does: post('B', 'refill', occurredAt, {
    unitId: 'U2',
    readings: readings('C1', '9410', '9310'),
    entries: [mass('C1 -> U2', '100')],
  }),
  posted: [added('C1 -> cylinderDifference', '90'), line('C1 -> U2', '100')],
  books: books({ C1: '9310', U: '1250', U2: '1900' }),
  open: [flag('cylinderNotExplained', 'C1', '-90')],
});
const refill = (step: string, occurredAt: string, beforeG: string, afterG: string) =>
  post(step, 'refill', occurredAt, {
    unitId: 'U',
    readings: readings('C1', beforeG, afterG),
    entries: [mass('C1 -> U', String(Number(beforeG) - Number(afterG)))],
  });
const afterBoth = books({ C1: '9310', U: '1340', U2: '1900' });

export const lateEntries: Scenario = {
  id: 'S21',
  title: 'Late entries',
  cases: [
    {
      id: 'S21.1',
      title: 'it explains the whole difference',
      start,
      steps: [
        syncsFirst(at(2, '12:00')),
        {
          step: 'A',
          entered: '10:00, 9,500 to 9,410, syncs second',
          does: refill('A', at(2, '10:00'), '9500', '9410'),
          posted: [line('C1 -> U', '90'), again('B', 'cylinderDifference -> C1', '90')],
          books: afterBoth,
          open: [],
        },
      ],
      end: {
        emissions: [],
        counted: [
          { unit: 'U', massG: '90' },
          { unit: 'U2', massG: '100' },
        ],
        places: {},
      },
    },
    {
      id: 'S21.2',
      title: 'in two parts: judged again twice',
      start,
      steps: [
        syncsFirst(at(2, '12:00')),
        {
          step: 'A1',
          entered: '10:00, 9,500 to 9,460',
          does: refill('A1', at(2, '10:00'), '9500', '9460'),
          posted: [line('C1 -> U', '40'), again('B', 'cylinderDifference -> C1', '40')],
          books: books({ C1: '9310', U: '1290', U2: '1900' }),
          open: [flag('cylinderNotExplained', 'C1', '-50')],
        },
        {
          step: 'A2',
          entered: '11:00, 9,460 to 9,410',
          does: refill('A2', at(2, '11:00'), '9460', '9410'),
          posted: [line('C1 -> U', '50'), again('B', 'cylinderDifference -> C1', '50')],
          books: afterBoth,
          open: [],
        },
      ],
      end: {
        emissions: [],
        counted: [
          { unit: 'U', massG: '40' },
          { unit: 'U', massG: '50' },
          { unit: 'U2', massG: '100' },
        ],
        places: {},
      },
    },
    {
      id: 'S21.3',
      title: 'A of 28 October, B of 29 October, A arrives on 3 November after October was closed',
      start,
      steps: [
        syncsFirst('2026-10-29T12:00:00Z'),
        {
          step: 'close',
          entered: 'October is closed; its difference of 90 is carried',
          does: { act: 'closeMonth', month: '2026-10' },
          posted: [],
          books: books({ C1: '9310', U: '1250', U2: '1900' }),
          open: [flag('cylinderNotExplained', 'C1', '-90')],
        },
        {
          step: 'A',
          entered: "booked in November, late; the correction too, with B's occurredAt",
          does: refill('A', '2026-10-28T10:00:00Z', '9500', '9410'),
          posted: [
            line('C1 -> U', '90', { bookedLateIn: '2026-11' }),
            again('B', 'cylinderDifference -> C1', '90', { bookedLateIn: '2026-11' }),
          ],
          books: afterBoth,
          open: [],
        },
      ],
      end: {
        emissions: [],
        counted: [
          { unit: 'U', massG: '90', on: '2026-10-28' },
          { unit: 'U2', massG: '100', on: '2026-10-29' },
        ],
        places: {},
      },
    },
    {
      id: 'S21.4',
      title: 'dated before the opening reading of C1 (9,500 on the 10th), a mass of 90 without readings on the 9th',
      start: { cylinders: { C1: cylinder(null) }, units: { U: knownUnit('1250', '1340') } },
      steps: [
        {
          step: 'opening',
          entered: 'the 10th: 9,500',
          does: post('opening', 'opening', at(10), { readings: [reading('C1', 'only', '9500')] }),
          posted: [added('opening -> C1', '9500')],
          books: books({ C1: '9500', U: '1250' }),
          open: [],
        },
        {
          step: 'A',
          entered: 'the 9th: 90 into U',
          does: post('A', 'refill', at(9), { unitId: 'U', entries: [mass('C1 -> U', '90')] }),
          posted: [line('C1 -> U', '90'), again('opening', 'opening -> C1', '90')],
          books: books({ C1: '9500', U: '1340' }),
          open: [flag('lateBeforeOpening', 'C1', '90')],
        },
      ],
      end: { emissions: [], counted: [{ unit: 'U', massG: '90' }], places: {} },
    },
    ...lateRecoveries,
  ],
};
