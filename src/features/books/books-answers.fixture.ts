import type { BooksResponse, DifferenceItem, DifferencesResponse } from '../../../shared/books/books.schema.ts';
import type { Checklist, PeriodsResponse } from '../../../shared/periods/periods.schema.ts';

/** Answers of the server for one month of a small firm, as its schemas have them. */
export const CYLINDER_ID = '019aa000-0000-7000-8000-000000000001';
export const GROUP_ID = '019aa000-0000-7000-8000-000000000002';
export const SUPPLIER_ID = '019aa000-0000-7000-8000-000000000003';
export const HOLDER_ID = '019aa000-0000-7000-8000-000000000004';
export const OWNER_ID = '019aa000-0000-7000-8000-000000000005';
export const SUMS_HASH = 'ab'.repeat(32);

export const differenceItem: DifferenceItem = {
  key: `difference:${GROUP_ID}:${CYLINDER_ID}:cylinderDifference:R-410A`,
  groupId: GROUP_ID,
  subject: { kind: 'cylinder', id: CYLINDER_ID, label: '7702' },
  kind: 'cylinderDifference',
  refrigerant: 'R-410A',
  at: '2026-11-20T08:00:00.000Z',
  timeZone: 'Europe/Madrid',
  bookingMonth: '2026-11',
  differenceG: -130,
  readingDifferenceG: -130,
  settledG: 0,
  standsG: -130,
  bookG: 4310,
  scaleG: 4180,
  standardUncertaintyG: 6,
  twoUG: 12,
  verdict: 'notExplained',
  statement: { from: '2026-11-03', to: '2026-11-20' },
  previousAt: '2026-11-02T23:30:00.000Z',
  heldBetween: [
    { personId: HOLDER_ID, name: 'S. Brandt', van: 'van 3', from: '2026-11-02T23:30:00Z', to: '2026-11-20T08:00:00Z' },
  ],
  recordedByName: 'M. Oduya',
  cost: null,
};

export const differences: DifferencesResponse = {
  items: [
    differenceItem,
    ...[1, 2, 3, 4].map(
      (number): DifferenceItem => ({
        ...differenceItem,
        key: `within ${number}`,
        subject: { kind: 'cylinder', id: CYLINDER_ID, label: `80${number}` },
        differenceG: number,
        readingDifferenceG: number,
        standsG: number,
        verdict: 'withinScales',
      }),
    ),
  ],
  notListed: { count: 0, massG: 0 },
  totals: { notExplainedG: 130, lookAgainG: 0, withinScalesG: 10, byCertificateG: 0, settledG: 0 },
  currency: 'EUR',
};

const equation: BooksResponse['equation'] = {
  cameIn: [
    { part: 'onHandStart', massG: 96_400, entryCount: 0 },
    { part: 'bought', massG: 34_000, entryCount: 3 },
  ],
  wentOut: [
    { part: 'onHandEnd', massG: 88_370, entryCount: 0 },
    { part: 'intoUnits', massG: 41_900, entryCount: 12 },
    { part: 'cylinderDifference', massG: 130, entryCount: 1 },
  ],
  totalG: 130_400,
};

export const books: BooksResponse = {
  from: '2026-11',
  to: '2026-11',
  refrigerant: null,
  refrigerants: ['R-410A', 'R-32'],
  firstMonth: '2026-01',
  lastMonth: '2026-12',
  firstOpenMonth: null,
  equation,
  differences: [{ kind: 'cylinderDifference', startG: 0, shownG: 130, settledG: 0, endG: 130 }],
  places: [{ kind: 'cylinder', startG: 96_400, inG: 34_000, outG: 42_030, endG: 88_370 }],
};

const row = (month: string, state: PeriodsResponse['items'][number]['state']) => ({
  month,
  state,
  closedAt: null,
  closedByName: null,
  entryCount: 5,
});
export const periods: PeriodsResponse = {
  firstOpenMonth: null,
  next: '2026-11',
  timeZone: 'Europe/Madrid',
  items: [row('2026-12', 'running'), row('2026-11', 'next')],
};

export const checklist: Checklist = {
  month: '2026-11',
  state: 'next',
  timeZone: 'Europe/Madrid',
  items: [
    {
      kind: 'difference',
      key: differenceItem.key,
      needsDecision: true,
      carried: null,
      carriedBefore: null,
      difference: differenceItem,
    },
    {
      kind: 'cylinder',
      key: `cylinder:${CYLINDER_ID}`,
      needsDecision: true,
      carried: null,
      carriedBefore: null,
      cylinderId: CYLINDER_ID,
      cylinderTag: '7744',
      refrigerant: 'R-32',
      contentG: 4000,
      lastWeighedAt: null,
      heldByName: null,
    },
  ],
  notListed: 0,
  settled: [],
  undecided: 2,
  carried: 0,
  sumsHash: SUMS_HASH,
  equation,
  signedOff: null,
};

export const decided: Checklist = { ...checklist, items: [], undecided: 0 };
