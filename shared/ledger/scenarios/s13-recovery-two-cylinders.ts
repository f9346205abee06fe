import { added, at, book, books, cylinder, emitted, flag, line, mass, newUnit, post, readings, says } from './build.ts';
import { installHistory } from './install-history.ts';
import type { Scenario, ScenarioAct, ScenarioStart } from './scenario.ts';

/** Three weighings on the unit, the extra and both recoveries: twice the uncertainty is 7.07 g. */
const start: ScenarioStart = {
  cylinders: { C1: cylinder('9500'), R1: cylinder(null), R2: cylinder('100') },
  units: { U: newUnit('1250', '1340') },
  history: [installHistory],
};
const recovery = (secondG: string, r2AfterG: string): ScenarioAct =>
  post('a', 'recovery', at(40), {
    unitId: 'U',
    readings: [...readings('R1', '0', '900'), ...readings('R2', '100', r2AfterG)],
    entries: [mass('U -> R1', '900'), mass('U -> R2', secondG)],
    statements: [says('U', 'empty', 'recovery')],
  });

export const recoveryTwoCylinders: Scenario = {
  id: 'S13',
  title: 'Recovery over two cylinders, with a remainder',
  cases: [
    {
      id: 'S13.1',
      title: '5 left on the book: within',
      start,
      steps: [
        {
          step: 'a',
          entered: '900 into R1, 435 into R2, completed',
          does: recovery('435', '535'),
          posted: [line('U -> R1', '900'), line('U -> R2', '435'), added('U -> unitDifference', '5')],
          books: books({ C1: '9410', R1: '900', R2: '535', U: '0' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: { unitDifference: book('5') } },
    },
    {
      id: 'S13.2',
      title: '60 left: beyond',
      start,
      steps: [
        {
          step: 'a',
          entered: '900 into R1, 380 into R2, completed',
          does: recovery('380', '480'),
          posted: [added('U -> atmosphere:inferred', '60'), line('U -> R1', '900'), line('U -> R2', '380')],
          books: books({ C1: '9410', R1: '900', R2: '480', U: '0' }),
          open: [flag('lossAtRecovery', 'U', '60')],
        },
      ],
      end: { emissions: [emitted('inferred', '60')], counted: [], places: {} },
    },
    {
      id: 'S13.3',
      title: 'nothing left',
      start,
      steps: [
        {
          step: 'a',
          entered: '900 into R1, 440 into R2, completed',
          does: recovery('440', '540'),
          posted: [line('U -> R1', '900'), line('U -> R2', '440')],
          books: books({ C1: '9410', R1: '900', R2: '540', U: '0' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S13.4',
      title: '6 too much: within',
      start,
      steps: [
        {
          step: 'a',
          entered: '900 into R1, 446 into R2, completed',
          does: recovery('446', '546'),
          posted: [line('U -> R1', '900'), line('U -> R2', '446'), added('unitDifference -> U', '6')],
          books: books({ C1: '9410', R1: '900', R2: '546', U: '0' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: { unitDifference: book('-6') } },
    },
  ],
};
