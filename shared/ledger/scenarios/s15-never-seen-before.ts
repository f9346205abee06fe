import { added, at, books, cylinder, emitted, flag, line, mass, post, readings, says, unknownUnit } from './build.ts';
import type { Scenario, ScenarioAct } from './scenario.ts';

const start = { cylinders: { C1: cylinder('9500'), R1: cylinder(null) }, units: { U: unknownUnit('1290') } };
const recovery = (massG: string): ScenarioAct =>
  post('a', 'recovery', at(60), {
    unitId: 'U',
    readings: readings('R1', '0', massG),
    entries: [mass('U -> R1', massG)],
    statements: [says('U', 'empty', 'recovery')],
  });

export const neverSeenBefore: Scenario = {
  id: 'S15',
  title: 'Decommission of a unit never seen before',
  cases: [
    {
      id: 'S15.1',
      title: '850 recovered',
      start,
      steps: [
        {
          step: 'a',
          entered: 'recovery 850, completed',
          does: recovery('850'),
          posted: [
            line('U -> R1', '850'),
            added('opening -> U', '850'),
            added('opening -> atmosphere:beforeOurCare', '440'),
          ],
          books: books({ C1: '9500', R1: '850', U: '0' }),
          open: [flag('unitOpenedAt', 'U', '850')],
        },
      ],
      end: { emissions: [emitted('beforeOurCare', '440')], counted: [], places: {} },
    },
    {
      id: 'S15.2',
      title: 'more than full charge recovered: nothing was lost before',
      start,
      steps: [
        {
          step: 'a',
          entered: 'recovery 1,400, completed',
          does: recovery('1400'),
          posted: [line('U -> R1', '1400'), added('opening -> U', '1400')],
          books: books({ C1: '9500', R1: '1400', U: '0' }),
          open: [flag('unitOpenedAt', 'U', '1400'), flag('moreThanFullChargeCameOut', 'U', '110')],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S15.3',
      title: 'after a first refill of ours that was needless in part',
      start,
      steps: [
        {
          step: 'z',
          entered: 'refill 300, full',
          does: post('z', 'refill', at(2), {
            unitId: 'U',
            readings: readings('C1', '9500', '9200'),
            entries: [mass('C1 -> U', '300')],
            statements: [says('U', 'full')],
          }),
          posted: [
            line('C1 -> U', '300'),
            added('opening -> U', '990'),
            added('opening -> atmosphere:beforeOurCare', '300'),
          ],
          books: books({ C1: '9200', U: '1290' }),
          open: [flag('unitOpenedAt', 'U', '990')],
        },
        {
          step: 'a',
          entered: 'recovery 1,420, completed',
          does: recovery('1420'),
          posted: [line('U -> R1', '1420'), added('atmosphere:beforeOurCare -> U', '130', { takenBack: true })],
          books: books({ C1: '9200', R1: '1420', U: '0' }),
          open: [flag('unitOpenedAt', 'U', '990'), flag('lossTakenBack', 'U', '130')],
        },
      ],
      end: { emissions: [emitted('beforeOurCare', '170')], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
  ],
};
