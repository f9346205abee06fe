import { v7 as uuid } from 'uuid';
import { describe, expect, it } from 'vitest';
import { entryGroupRequest } from '../../../../shared/ledger/entry-group.schema.ts';
import { toRequest } from '../../../../shared/ledger/scenarios/symbols.ts';
import type { Answers, FormContext } from '../answers.ts';
import { emptyCertified } from '../answers.ts';
import type { BuiltGroup } from '../group-draft.ts';
import { answersOf, comparable, contextOf, grams, groupAt, newId, weighed } from '../record.fixture.ts';
import { buildAddition, customerRefrigerant, otherContractor, putBack, refill, traceCharge } from './addition.ts';
import { foundEmpty, vacuum } from './empty-unit.ts';
import { invoice } from './invoice.ts';
import { found, handOver, loss, relocation, warrantyReplacement } from './life.ts';
import { overchargeRemoved, partialRecovery, recovery } from './recovery.ts';
import { retrofit } from './retrofit.ts';
import { certificate, destruction, lend, reclaim, returned } from './sent.ts';
import { heelRemoved, transfer } from './transfer.ts';

type Build = (answers: Answers, context: FormContext) => BuiltGroup;
type Case = [
  id: string,
  step: string,
  form: { build: Build },
  answers: Partial<Answers>,
  context?: Parameters<typeof contextOf>[1],
];

const extraCharge = {
  build: (answers: Answers, context: FormContext) => buildAddition('extraCharge', answers, context),
};
const fullRecharge = {
  build: (answers: Answers, context: FormContext) => buildAddition('fullRecharge', answers, context),
};
const hose = { hasHose: true, hose: grams('28') };

/** Source: the 66 cases of the log. The form, filled in as the case says, posts what the case posts. */
const CASES: Case[] = [
  [
    'S1.1',
    'a',
    extraCharge,
    { rows: [weighed('C1', 9472, 9382, { ...hose, hoseFullAtStart: true, hoseEnd: 'lost' })] },
  ],
  [
    'S1.2',
    'b',
    extraCharge,
    { rows: [weighed('C1', 9472, 9410, { ...hose, hoseFullAtStart: true, hoseEnd: 'emptied' })] },
  ],
  [
    'S1.3',
    'c',
    extraCharge,
    { rows: [weighed('C1', 9472, 9382, { ...hose, hoseFullAtStart: true, hoseEnd: 'recovered', hoseInto: 'R1' })] },
  ],
  ['S1.4', 'd', extraCharge, { rows: [weighed('C1', 9500, 9382, { ...hose, hoseEnd: 'lost' })] }],
  ['S3.1', 'b', overchargeRemoved, { rows: [weighed('R1', 0, 30)], jobId: 'J1' }],
  [
    'S4.1',
    'a',
    extraCharge,
    {
      rows: [weighed('C1', 240, 12, { ...hose, hoseEnd: 'lost' }), weighed('C2', 11340, 11230)],
    },
  ],
  ['S6.1', 'a', refill, { rows: [weighed('C1', 9500, 9200)], answer: 'full' }],
  ['S6.2', 'a', refill, { rows: [weighed('C1', 9500, 9200)], answer: 'notFull' }],
  ['S6.3', 'a', refill, { rows: [weighed('C1', 9500, 9200)] }],
  ['S6.4', 'a', refill, { rows: [weighed('C1', 9500, 9200)], answer: 'moreThanFull' }],
  ['S6.5', 'a', recovery, { rows: [weighed('R1', 0, 990)], choice: 'completed', jobId: 'J1' }],
  ['S6.5', 'b', putBack, { rows: [weighed('R1', 990, 0), weighed('C1', 9500, 9200)], jobId: 'J1' }],
  ['S8.1', 'b', refill, { rows: [weighed('C1', 9200, 9050)], answer: 'full' }],
  ['S8.3', 'c', fullRecharge, { rows: [weighed('C1', 9200, 7910)] }],
  ['S9.1', 'b', refill, { rows: [weighed('C1', 9200, 9000)], answer: 'full' }],
  ['S9.2', 'a', customerRefrigerant, { mass: grams('180'), partyId: 'customer', answer: 'full' }],
  [
    'S9.3',
    'a',
    otherContractor,
    { mass: grams('400'), partyId: 'otherContractor', documentNumber: '118', documentDate: '2026-03-02' },
  ],
  ['S10.1', 'a', partialRecovery, { rows: [weighed('R1', 0, 600)], jobId: 'J1' }],
  ['S10.1', 'a', recovery, { rows: [weighed('R1', 0, 600)], jobId: 'J1', choice: 'notCompleted' }],
  ['S10.1', 'b', putBack, { rows: [weighed('R1', 600, 0)], jobId: 'J1' }],
  ['S10.2', 'b', refill, { rows: [weighed('C1', 9500, 9200)], jobId: 'J1' }],
  ['S10.2', 'c', putBack, { rows: [weighed('R1', 600, 0)], jobId: 'J1', answer: 'full' }],
  ['S11.1', 'a', foundEmpty, { choice: 'foundFlat', jobId: 'J1' }],
  ['S11.1', 'b', traceCharge, { rows: [weighed('C1', 9500, 9450)], jobId: 'J1' }],
  ['S11.1', 'c', vacuum, { choice: 'whole', jobId: 'J1' }],
  ['S12.1', 'a', recovery, { rows: [weighed('R1', 0, 1290)], choice: 'completed', jobId: 'J1' }],
  ['S12.1', 'c', warrantyReplacement, { mass: grams('1250'), jobId: 'J1' }],
  ['S13.1', 'a', recovery, { rows: [weighed('R1', 0, 900), weighed('R2', 100, 535)], choice: 'completed' }],
  ['S13.2', 'a', recovery, { rows: [weighed('R1', 0, 900), weighed('R2', 100, 480)], choice: 'completed' }],
  ['S13.3', 'a', recovery, { rows: [weighed('R1', 0, 900), weighed('R2', 100, 540)], choice: 'completed' }],
  ['S13.4', 'a', recovery, { rows: [weighed('R1', 0, 900), weighed('R2', 100, 546)], choice: 'completed' }],
  ['S14.1', 'b', recovery, { rows: [weighed('R1', 0, 1436)], choice: 'completed' }],
  ['S14.3', 'b', overchargeRemoved, { rows: [weighed('R1', 0, 150)], answer: 'full' }],
  ['S15.1', 'a', recovery, { rows: [weighed('R1', 0, 850)], choice: 'completed' }],
  ['S16.2', 'a', recovery, { rows: [weighed('R1', 0, 1380)], choice: 'completed', jobId: 'J1' }],
  ['S16.2', 'b', vacuum, { choice: 'whole', jobId: 'J1' }],
  [
    'S17.1',
    'a',
    transfer,
    { rows: [weighed('C1', 9500, 4460, { ...hose, hoseEnd: 'lost' }), weighed('C2', 1000, 6000)] },
  ],
  [
    'S17.2',
    'a',
    transfer,
    { rows: [weighed('C1', 9500, 9100), weighed('N1', 0, 400)], reason: 'no recovery cylinder on the van' },
  ],
  [
    'S18.2',
    'a',
    recovery,
    { rows: [weighed('R1', 4000, 5000)], choice: 'completed', reason: 'took the wrong cylinder from the van' },
  ],
  [
    'S18.1',
    'b',
    certificate,
    {
      partyId: 'reclaimer',
      documentNumber: 'K 31',
      documentDate: '2026-03-20',
      certified: [{ ...emptyCertified(newId, 'g', 'R-410A'), sent: grams('18200'), certified: grams('17650') }],
    },
  ],
  [
    'S18.2',
    'd',
    certificate,
    {
      partyId: 'reclaimer',
      certified: [
        { ...emptyCertified(newId, 'g', 'R-410A'), sent: grams('3960'), certified: grams('3700') },
        { ...emptyCertified(newId, 'g', 'R-22'), sent: grams('990'), certified: grams('1200') },
      ],
    },
  ],
  ['S20.5', 'b', found, { rows: [weighed('C1', 5400, null)] }],
  ['S22.3', 'b', reclaim, { rows: [weighed('R1', 5240, null)], partyId: 'reclaimer' }],
];

const build = ([id, step, form, over, context]: Case) =>
  form.build(answersOf({ at: groupAt(id, step).occurredAt, ...over }), contextOf(id, context)).body;

describe('The form of each case posts what the case posts', () => {
  it.each(CASES)('%s %s', (...each) => {
    expect(comparable(build(each))).toEqual(comparable(groupAt(each[0], each[1])));
  });

  it('S2.1 a, since the scale was zeroed, in ounces: 3.2 oz is 3.2 oz', () => {
    const row = weighed('C1', 0, null, {
      mode: 'zeroed',
      before: grams('', 'oz'),
      after: grams('3.2', 'oz'),
      hasHose: true,
      hose: grams('28'),
      hoseFullAtStart: false,
      hoseEnd: 'lost',
    });
    const { readings, entries } = build(['S2.1', 'a', extraCharge, { rows: [{ ...row, hasHose: false }] }]);
    expect(readings).toMatchObject([
      { moment: 'before', mode: 'zeroed', value: '0', unit: 'oz' },
      { moment: 'after', mode: 'zeroed', value: '-3.2', unit: 'oz' },
    ]);
    expect(entries).toMatchObject([{ mass: { value: '3.2', unit: 'oz' } }]);
  });

  it('S18.1 a, sent by its book: the whole content, and no reading that nobody took', () => {
    const body = build([
      'S18.1',
      'a',
      reclaim,
      { rows: [weighed('R1', 0, null, { mode: 'book' })], partyId: 'reclaimer' },
    ]);
    expect(comparable(body)).toEqual({
      ...(comparable(groupAt('S18.1', 'a')) as object),
      entries: [expect.objectContaining({ mass: { value: '18200', unit: 'g' }, howKnown: 'estimated' })],
    });
  });

  it('S18.2 c, a mixed cylinder leaves its refrigerant open: the server splits it by the book', () => {
    const context = contextOf('S18.2', { contents: { R1: { 'R-22': 990, 'R-410A': 3960 } } });
    const answers = answersOf({
      at: groupAt('S18.2', 'c').occurredAt,
      rows: [weighed('R1', 4950, null, { mode: 'book' })],
      partyId: 'reclaimer',
    });
    expect(reclaim.build(answers, context).body.entries).toMatchObject([
      { refrigerant: null, mass: { value: '4950', unit: 'g' } },
    ]);
  });

  it('S20.5 a, stolen: what its book holds is missing, with its reason', () => {
    const { occurredAt, reason, ...posted } = groupAt('S20.5', 'a');
    const body = build([
      'S20.5',
      'a',
      loss,
      { choice: 'stolen', reason: reason ?? '', rows: [weighed('C1', 0, null)] },
    ]);
    expect(comparable(body)).toEqual(comparable({ ...posted, occurredAt, reason }));
  });

  it('S19.3 c, an invoice of another mass withdraws the pick-up and posts it as invoiced', () => {
    const purchase = {
      groupId: 'a',
      occurredAt: groupAt('S19.3', 'a').occurredAt,
      supplierId: 'supplier',
      refrigerant: 'R-410A',
      massG: 11_340,
    };
    const answers = answersOf({
      rows: [weighed('C1', 0, null)],
      mass: grams('11260'),
      documentNumber: '20871',
      documentDate: '2026-03-02',
    });
    const built = invoice.build(answers, { ...contextOf('S19.3'), purchase });
    expect(built.reverses).toMatchObject({ groupId: 'a' });
    expect(comparable(built.body)).toEqual(comparable(groupAt('S19.3', 'c')));
    expect(built.places).toContainEqual(['/replacement/entries/0', 'mass']);
  });

  it('S19.3, the same figure adds papers and posts nothing', () => {
    const purchase = {
      groupId: 'a',
      occurredAt: '2026-03-02T10:00:00Z',
      supplierId: 's',
      refrigerant: 'R-410A',
      massG: 11_340,
    };
    const answers = answersOf({ mass: grams('11.34', 'kg'), documentNumber: '20871', documentDate: '2026-03-02' });
    const built = invoice.build(answers, { ...contextOf('S19.3'), purchase });
    expect([built.reverses, built.body.entries]).toEqual([undefined, []]);
    expect(built.body.documents).toMatchObject([{ number: '20871', mass: { value: '11.34', unit: 'kg' } }]);
  });
});

describe('What no case works through', () => {
  it('S11: a vacuum on the lines alone states nothing, and says why there is nothing to post', () => {
    const answers = answersOf({ choice: 'lines' });
    expect(vacuum.build(answers, contextOf('S11.1')).body.statements).toEqual([]);
    expect(vacuum.nothingToPost?.(answers, contextOf('S11.1'))).toBe('record.nothing.linesOnly');
  });

  it('S16.1: a relocation moves no mass and keeps its papers', () => {
    const body = relocation.build(
      answersOf({ choice: 'behindValves', documentNumber: 'W 12', documentDate: '2026-03-02', note: '2 Mill Lane' }),
      contextOf('S16.1'),
    ).body;
    expect(body.entries).toEqual([]);
    expect(body.documents).toEqual([{ kind: 'other', number: 'W 12', date: '2026-03-02' }]);
    expect(body.note).toContain('2 Mill Lane');
  });

  it('S16.1: the unit stands at its new site from the moment of the move', () => {
    const answers = answersOf({ siteId: 'quay', at: '2026-03-10T12:00:00Z' });
    expect(relocation.changes?.(answers, contextOf('S16.1'))).toEqual([
      { is: 'site', body: { id: answers.ids.change, siteId: 'quay', validFrom: '2026-03-10T12:00:00Z' } },
    ]);
  });

  it('S16.2: a retrofit dates the new refrigerant and its full charge, in this order, and posts nothing', () => {
    const answers = answersOf({
      refrigerant: 'R-407C',
      mass: grams('1400'),
      method: 'manufacturer',
      at: '2026-03-10T12:00:00Z',
      jobId: 'J1',
    });
    const from = { validFrom: '2026-03-10T12:00:00Z', jobId: 'J1' };
    expect(retrofit.onlyRegister).toBe(true);
    expect(retrofit.changes?.(answers, contextOf('S16.2'))).toEqual([
      { is: 'refrigerant', body: { id: answers.ids.change, refrigerant: 'R-407C', ...from } },
      {
        is: 'fullCharge',
        body: {
          id: answers.ids.change2,
          mass: { value: '1400', unit: 'g' },
          method: 'manufacturer',
          reason: 'record.note.retrofit from=R-22 to=R-407C',
          ...from,
        },
      },
    ]);
  });

  it('a hand-over takes the known book along, and nothing where the book is not known', () => {
    const known = handOver.build(answersOf({}), contextOf('S6.1')).body;
    expect(known.entries).toMatchObject([
      { mass: { value: '1290', unit: 'g' }, from: { place: 'unit' }, to: { place: 'customer', id: 'customer' } },
    ]);
    expect(handOver.build(answersOf({}), contextOf('S8.1')).body.entries).toEqual([]);
    expect(handOver.nothingToPost?.(answersOf({}), contextOf('S8.1'))).toBe('record.nothing.bookNotKnown');
  });

  it('a burst cylinder goes to the atmosphere, measured; a heel moves like a transfer', () => {
    const burst = loss.build(answersOf({ choice: 'burst', rows: [weighed('C1', 0, null)] }), contextOf('S20.5'));
    expect(burst.body.entries).toMatchObject([{ to: { place: 'atmosphere', as: 'measured' } }]);
    const rows = [weighed('C1', 12, 0), weighed('C2', 1000, 1012)];
    expect(heelRemoved.build(answersOf({ rows }), contextOf('S17.1')).body).toMatchObject({
      kind: 'heelRemoved',
      unitId: null,
      entries: [{ mass: { value: '12', unit: 'g' } }],
    });
  });

  it('returned, lent and destroyed contents go to that party', () => {
    const answers = answersOf({ rows: [weighed('C1', 0, null, { mode: 'book' })], partyId: 'p' });
    const places = [returned, lend, destruction].map(
      ({ build: made }) => made(answers, contextOf('S17.1')).body.entries?.[0]?.to,
    );
    expect(places).toEqual([{ place: 'supplier', id: 'p' }, { place: 'customer', id: 'p' }, { place: 'destroyed' }]);
  });
});

it('Every body of a whole form is one that the server takes', () => {
  const ids = { idOf: () => uuid(), fresh: () => uuid() };
  for (const each of CASES) {
    const body = build(each);
    const request = toRequest({ ...body, readings: body.readings ?? [], entries: body.entries ?? [] }, ids);
    const tools = { ...request, readings: request.readings?.map((one) => ({ ...one, toolId: null })) };
    expect(entryGroupRequest.safeParse(tools).error, `${each[0]} ${each[1]}`).toBeUndefined();
  }
});
