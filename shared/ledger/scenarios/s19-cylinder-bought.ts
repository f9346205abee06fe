import {
  added,
  again,
  at,
  book,
  books,
  cylinder,
  emitted,
  flag,
  group,
  knownUnit,
  line,
  mass,
  post,
  readingGross,
  reversal,
  says,
} from './build.ts';
import type { Scenario, ScenarioStart, ScenarioStep } from './scenario.ts';

const start: ScenarioStart = { cylinders: { C1: cylinder(null) }, units: {} };
const bought = mass('supplier -> C1', '11340', { howKnown: 'invoice' });
const shortFilled: ScenarioStep = {
  step: 'a',
  entered: 'bought 11,340; gross 18,900 is 11,200 net',
  does: post('a', 'purchase', at(2), { readings: [readingGross('C1', 'only', '18900')], entries: [bought] }),
  posted: [added('C1 -> supplierShortFill', '140'), line('supplier -> C1', '11340')],
  books: books({ C1: '11200' }),
  open: [flag('supplierShortFill', 'C1', '-140')],
};

export const cylinderBought: Scenario = {
  id: 'S19',
  title: 'Cylinder bought: short-filled, picked up, wrong tare',
  cases: [
    {
      id: 'S19.1',
      title: 'weighed at receipt: gross 18,900',
      start,
      steps: [shortFilled],
      end: { emissions: [], counted: [], places: { supplierShortFill: book('140') } },
    },
    {
      id: 'S19.2',
      title: 'then the tare is revised to 7,560 from the receipt on',
      start,
      steps: [
        shortFilled,
        {
          step: 'b',
          entered: 'tare 7,560: the receipt is judged again',
          does: { act: 'tare', recordId: 'b', cylinder: 'C1', tareG: '7560', validFrom: at(2) },
          posted: [again('a', 'supplierShortFill -> C1', '140')],
          books: books({ C1: '11340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
    {
      id: 'S19.3',
      title: 'picked up by label, used, invoice afterwards with another figure',
      start: { cylinders: { C1: cylinder(null) }, units: { U: knownUnit('1290', '1290') } },
      steps: [
        {
          step: 'a',
          entered: 'picked up, label 11,340, not weighed',
          does: post('a', 'purchase', at(2), { entries: [mass('supplier -> C1', '11340', { howKnown: 'label' })] }),
          posted: [line('supplier -> C1', '11340')],
          books: books({ C1: '11340', U: '1290' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'refill of U: gross 18,960 (11,260 net) to 18,660, full',
          does: post('b', 'refill', at(3), {
            unitId: 'U',
            readings: [
              readingGross('C1', 'before', '18960'),
              { ...readingGross('C1', 'only', '18660'), moment: 'after' },
            ],
            entries: [mass('C1 -> U', '300')],
            statements: [says('U', 'full')],
          }),
          posted: [
            added('C1 -> supplierShortFill', '80'),
            added('U -> atmosphere:inferred', '300'),
            line('C1 -> U', '300'),
          ],
          books: books({ C1: '10960', U: '1290' }),
          open: [flag('supplierShortFill', 'C1', '-80')],
        },
        {
          step: 'c',
          entered: 'invoice 11,260: wrong entry replaced',
          does: {
            act: 'reverse',
            recordId: 'c-reversal',
            of: 'a',
            replacement: group('c', 'purchase', at(2), {
              entries: [mass('supplier -> C1', '11260', { howKnown: 'invoice' })],
              documents: [{ kind: 'invoice', number: '20871', date: '2026-03-02' }],
            }),
          },
          posted: [
            reversal('a', 'C1 -> supplier', '11340'),
            line('supplier -> C1', '11260'),
            again('b', 'supplierShortFill -> C1', '80'),
          ],
          books: books({ C1: '10960', U: '1290' }),
          open: [],
        },
      ],
      end: { emissions: [emitted('inferred', '300')], counted: [{ unit: 'U', massG: '300' }], places: {} },
    },
    {
      id: 'S19.4',
      title: 'another valve fitted: tare revised from a later day on',
      start,
      steps: [
        {
          step: 'a',
          entered: 'bought 11,340',
          does: post('a', 'purchase', at(2), { entries: [bought] }),
          posted: [line('supplier -> C1', '11340')],
          books: books({ C1: '11340' }),
          open: [],
        },
        {
          step: 'x',
          entered: 'weighed at receipt: 19,040 is 11,340 net',
          does: post('x', 'weighing', at(2, '11:00'), { readings: [readingGross('C1', 'only', '19040')] }),
          posted: [],
          books: books({ C1: '11340' }),
          open: [],
        },
        {
          step: 'b',
          entered: 'later: gross 18,400 is 10,700 net',
          does: post('b', 'weighing', at(20), { readings: [readingGross('C1', 'only', '18400')] }),
          posted: [added('C1 -> cylinderDifference', '640')],
          books: books({ C1: '10700' }),
          open: [flag('cylinderNotExplained', 'C1', '-640')],
        },
        {
          step: 'c',
          entered: 'tare 7,060 from before b on, not from the receipt',
          does: { act: 'tare', recordId: 'c', cylinder: 'C1', tareG: '7060', validFrom: at(19) },
          posted: [again('b', 'cylinderDifference -> C1', '640')],
          books: books({ C1: '11340' }),
          open: [],
        },
      ],
      end: { emissions: [], counted: [], places: {} },
    },
  ],
};
