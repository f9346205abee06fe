import {
  added,
  at,
  book,
  books,
  cylinder,
  flag,
  knownUnit,
  line,
  mass,
  mixedBook,
  post,
  R22,
  R410A,
  reading,
  readings,
  says,
} from './build.ts';
import type { Scenario } from './scenario.ts';

const certified = { howKnown: 'certificate' } as const;

export const reclaimer: Scenario = {
  id: 'S18',
  title: 'Sent to the reclaimer; mixed cylinder',
  cases: [
    {
      id: 'S18.1',
      title: 'R1 18,200, certified 17,650',
      start: { cylinders: { R1: cylinder('18200') }, units: {} },
      steps: [
        {
          step: 'a',
          entered: 'sent 18,200',
          does: post('a', 'reclaim', at(2), { entries: [mass('R1 -> reclaimer', '18200')] }),
          posted: [line('R1 -> reclaimer', '18200')],
          books: books({ R1: '0' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'certificate: 17,650; 550 oil and air',
          does: post('b', 'certificate', at(20), {
            entries: [mass('reclaimer -> reclaimerDifference', '550', certified)],
            documents: [
              {
                kind: 'certificate',
                number: 'K 31',
                date: '2026-03-20',
                refrigerant: R410A,
                mass: { value: '17650', unit: 'g' },
              },
            ],
          }),
          posted: [line('reclaimer -> reclaimerDifference', '550')],
          books: books({ R1: '0' }),
          open: [flag('certificateDifference', 'reclaimer', '550')],
        },
      ],
      end: {
        emissions: [],
        counted: [],
        places: { reclaimer: book('17650'), reclaimerDifference: book('550') },
      },
    },
    {
      id: 'S18.2',
      title: 'R-22 recovered by mistake into R1 (R-410A 4,000); certified R-410A 3,700, R-22 1,200, rest 50 oil',
      start: { cylinders: { R1: cylinder('4000') }, units: { U: knownUnit('1000', '1000', R22) } },
      steps: [
        {
          step: 'a',
          entered: 'recovery of R-22 1,000 into R1, completed',
          does: post('a', 'recovery', at(2), {
            unitId: 'U',
            readings: readings('R1', '4000', '5000'),
            entries: [mass('U -> R1', '1000', { refrigerant: R22 })],
            statements: [says('U', 'empty', 'recovery')],
            reason: 'took the wrong cylinder from the van',
          }),
          posted: [line('U -> R1', '1000', { refrigerant: R22 })],
          books: { R1: mixedBook({ [R22]: '1000', [R410A]: '4000' }), U: book('0') },
          open: [flag('cylinderMixed', 'R1')],
        },
        {
          step: 'b',
          entered: 'R1 weighed: 4,950 (book 5,000): split by the book',
          does: post('b', 'weighing', at(3), { readings: [reading('R1', 'only', '4950')] }),
          posted: [
            added('R1 -> cylinderDifference', '40'),
            added('R1 -> cylinderDifference', '10', { refrigerant: R22 }),
          ],
          books: { R1: mixedBook({ [R22]: '990', [R410A]: '3960' }), U: book('0') },
          open: [flag('cylinderMixed', 'R1'), flag('cylinderNotExplained', 'R1', '-50')],
        },
        {
          step: 'c',
          entered: 'sent 4,950',
          does: post('c', 'reclaim', at(4), { entries: [mass('R1 -> reclaimer', '4950', { refrigerant: null })] }),
          posted: [line('R1 -> reclaimer', '3960'), line('R1 -> reclaimer', '990', { refrigerant: R22 })],
          books: books({ R1: '0', U: '0' }),
          open: [flag('cylinderNotExplained', 'R1', '-50')],
        },
        {
          step: 'd',
          entered: 'certificate by component',
          does: post('d', 'certificate', at(30), {
            entries: [
              mass('reclaimer -> reclaimerDifference', '260', certified),
              mass('reclaimerDifference -> reclaimer', '210', { ...certified, refrigerant: R22 }),
            ],
          }),
          posted: [
            line('reclaimer -> reclaimerDifference', '260'),
            line('reclaimerDifference -> reclaimer', '210', { refrigerant: R22 }),
          ],
          books: books({ R1: '0', U: '0' }),
          open: [
            flag('cylinderNotExplained', 'R1', '-50'),
            flag('certificateDifference', 'reclaimer', '-210'),
            flag('certificateDifference', 'reclaimer', '260'),
          ],
        },
      ],
      end: {
        emissions: [],
        counted: [],
        places: {
          cylinderDifference: mixedBook({ [R22]: '10', [R410A]: '40' }),
          reclaimer: mixedBook({ [R22]: '1200', [R410A]: '3700' }),
          reclaimerDifference: mixedBook({ [R22]: '-210', [R410A]: '260' }),
        },
      },
    },
  ],
};
