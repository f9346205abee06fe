import fc from 'fast-check';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BooksResponse, DifferencesResponse } from '../../shared/books/books.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  HOSE,
  inCylinder,
  inUnit,
  type Ledger,
  massOf,
  posted,
  readingOf,
  startLedger,
  weighIn,
} from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const get = async (ledger: Ledger, path: string) => {
  const answer = await ledger.client.get(path);
  expect(answer.status, `${path}: ${JSON.stringify(answer.body)}`).toBe(200);
  return answer.body;
};
const books = (ledger: Ledger, period = 'from=2026-03&to=2026-03'): Promise<BooksResponse> =>
  get(ledger, `/books?${period}`);
const sides = ({ equation }: BooksResponse) => ({
  in: Object.fromEntries(equation.cameIn.map(({ part, massG }) => [part, massG])),
  out: Object.fromEntries(equation.wentOut.map(({ part, massG }) => [part, massG])),
});
const purchase = (ledger: Ledger, cylinderId: string, massG: string, at: string, supplierId = ledger.supplier.id) =>
  groupOf('purchase', at, {
    entries: [massOf(massG, { place: 'supplier', id: supplierId }, inCylinder(cylinderId), { howKnown: 'invoice' })],
  });
const reverse = (ledger: Ledger, groupId: string) =>
  posted(ledger.client, { groupId: uuid(), schema: 1, reason: 'wrong entry' }, `/entry-groups/${groupId}/reversal`);
const weigh = (ledger: Ledger, id: string, netG: number, at: string) =>
  posted(ledger.client, groupOf('weighing', at, { readings: [readingOf(id, ledger.scale.id, 'only', netG)] }));

const PATHS = [
  '/books',
  '/books/differences',
  '/books/cylinders',
  '/books/people',
  '/books/suppliers',
  '/books/jobs',
  '/books/cost',
  '/books/purchases',
];

describe('The books are refused', () => {
  it.each(PATHS)('%s: without sign-in, to a technician and to a reader', async (path) => {
    expect((await app.visitor().get(`${path}?from=2026-03&to=2026-03`)).status).toBe(401);
    for (const role of ['technician', 'reader'] as const) {
      const client = await app.signIn(role);
      const { status, body } = await client.get(`${path}?from=2026-03&to=2026-03`);
      expect([status, body.code]).toEqual([403, 'notPermitted']);
    }
  });

  it.each(PATHS)('%s: without a period, backwards, for more than ten years, for no month', async (path) => {
    const client = await app.signIn('complianceManager');
    const codes = async (query: string) => {
      const { status, body } = await client.get(`${path}?${query}`);
      return [status, ...body.errors.map((error: { code: string; path: string }) => `${error.path} ${error.code}`)];
    };
    expect(await codes('')).toEqual([422, '/from required', '/to required']);
    expect(await codes('from=2026-04&to=2026-03')).toEqual([422, '/to periodBackwards']);
    expect(await codes('from=2016-03&to=2026-03')).toEqual([422, '/to periodTooLong']);
    expect(await codes('from=2026-13&to=2026-12')).toContain('/from wrongFormat');
  });

  it('of another firm: nothing of them is in ours', async () => {
    const [ledger, other] = [await startLedger(app), await startLedger(app)];
    await other.cylinder('9500');
    expect(await books(ledger, 'from=2026-01&to=2026-12')).toMatchObject({
      refrigerants: [],
      firstMonth: null,
      places: [],
      equation: { totalG: 0 },
    });
  });
});

describe('The books of a month', () => {
  it('hold opening, purchases and recovered against units, sent, losses, differences and on hand', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    const reclaimer = await ledger.made('/parties', { id: uuid(), kind: 'reclaimer', name: 'Fallow Reclaim' });
    const unit = await ledger.unit('1000', '5000');
    await posted(ledger.client, purchase(ledger, cylinder.id, '11340', '2026-03-01T08:00:00Z'));
    await posted(
      ledger.client,
      weighIn(
        ledger,
        { cylinderId: cylinder.id, unitId: unit.id, beforeG: 20_840, afterG: 20_600 },
        {
          entries: [
            massOf('212', inCylinder(cylinder.id), inUnit(unit.id)),
            massOf('28', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' }),
          ],
        },
      ),
    );
    await posted(
      ledger.client,
      groupOf('recovery', '2026-03-03T10:00:00Z', {
        unitId: unit.id,
        entries: [massOf('700', inUnit(unit.id), inCylinder(recovery.id))],
      }),
    );
    await posted(
      ledger.client,
      groupOf('reclaim', '2026-03-04T10:00:00Z', {
        entries: [massOf('700', inCylinder(recovery.id), { place: 'reclaimer', id: reclaimer.id })],
      }),
    );
    await weigh(ledger, cylinder.id, 20_470, '2026-03-10T08:00:00Z');
    const march = await books(ledger);
    expect(sides(march)).toEqual({
      in: { onHandStart: 9_500, bought: 11_340, recovered: 700 },
      out: { onHandEnd: 20_470, intoUnits: 212, toReclaimer: 700, lost: 28, cylinderDifference: 130 },
    });
    expect(march.equation.totalG).toBe(21_540);
    expect(march.differences).toEqual([{ kind: 'cylinderDifference', startG: 0, shownG: 130, settledG: 0, endG: 130 }]);
    expect(march.places.find(({ kind }) => kind === 'unit')).toEqual({
      kind: 'unit',
      startG: 1_000,
      inG: 212,
      outG: 700,
      endG: 512,
    });
    expect(march.places.reduce((sum, { endG }) => sum + endG, 0)).toBe(0);
    const april = await books(ledger, 'from=2026-04&to=2026-06');
    expect(sides(april)).toEqual({ in: { onHandStart: 20_470 }, out: { onHandEnd: 20_470 } });
    expect(await books(ledger, 'from=2025-01&to=2025-12')).toMatchObject({ equation: { totalG: 0 }, places: [] });
  });

  it('are of one refrigerant where one is asked for', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    await ledger.cylinder('4000', { refrigerant: 'R-32' });
    const january = 'from=2026-01&to=2026-01';
    expect(sides(await books(ledger, january)).in).toEqual({ onHandStart: 0, opened: 13_500 });
    expect(sides(await books(ledger, `${january}&refrigerant=R-32`)).in).toEqual({ onHandStart: 0, opened: 4_000 });
    expect((await books(ledger, january)).refrigerants).toEqual(['R-410A', 'R-32']);
  });

  it('take what was reversed off what it reverses, in the month in which the reversal is booked', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '5000');
    const wrong = purchase(ledger, cylinder.id, '11340', '2026-03-01T08:00:00Z');
    await posted(ledger.client, wrong);
    const charge = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 20_840, afterG: 20_750 });
    await posted(ledger.client, charge);
    await reverse(ledger, charge.groupId);
    await reverse(ledger, wrong.groupId);
    expect(sides(await books(ledger))).toEqual({ in: { onHandStart: 9_500 }, out: { onHandEnd: 9_500 } });
    // Once March is closed, what is reversed later belongs to April: less was bought there.
    const right = purchase(ledger, cylinder.id, '5000', '2026-03-02T08:00:00Z');
    await posted(ledger.client, right);
    await ledger.closeMonthsBefore('2026-04');
    await reverse(ledger, right.groupId);
    expect(sides(await books(ledger)).in).toMatchObject({ bought: 5_000 });
    expect(sides(await books(ledger, 'from=2026-04&to=2026-04'))).toEqual({
      in: { onHandStart: 14_500, bought: -5_000 },
      out: { onHandEnd: 9_500 },
    });
  });

  it('book a late entry in the first open month, and what it explains with it', async () => {
    // Scenario S21 case 3: October, closed: 90 not explained; November: 90 explained.
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const [unit, other] = [await ledger.unit('1250', '1340'), await ledger.unit('1800', '1900')];
    const late = (unitId: string, beforeG: number, afterG: number, at: string) =>
      posted(ledger.client, weighIn(ledger, { cylinderId: cylinder.id, unitId, beforeG, afterG }, {}, at));
    await late(other.id, 9_410, 9_310, '2026-10-29T12:00:00Z');
    await ledger.closeMonthsBefore('2026-11');
    await late(unit.id, 9_500, 9_410, '2026-10-28T10:00:00Z');
    expect(sides(await books(ledger, 'from=2026-10&to=2026-10')).out).toMatchObject({
      intoUnits: 100,
      cylinderDifference: 90,
    });
    const november = await books(ledger, 'from=2026-11&to=2026-11');
    expect(sides(november).out).toMatchObject({ intoUnits: 90, cylinderDifference: -90 });
    expect(november.differences).toEqual([
      { kind: 'cylinderDifference', startG: 90, shownG: -90, settledG: 0, endG: 0 },
    ]);
  });
});

describe('What the scales do not explain', () => {
  const differences = (ledger: Ledger, period = 'from=2026-03&to=2026-03'): Promise<DifferencesResponse> =>
    get(ledger, `/books/differences?${period}`);

  it('comes first, with book, scale, twice the uncertainty, last hands and verdict', async () => {
    const ledger = await startLedger(app);
    const brandt = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'S. Brandt' });
    app.clock.set('2026-03-01T08:00:00.000Z');
    const [small, large] = [await ledger.cylinder('8000'), await ledger.cylinder('4310', { heldBy: brandt.id })];
    app.clock.set('2026-11-30T15:00:00.000Z');
    for (const [cylinder, netG] of [
      [small, 8_000],
      [large, 4_310],
    ] as const) {
      await weigh(ledger, cylinder.id, netG, '2026-03-02T08:00:00Z');
    }
    await weigh(ledger, small.id, 7_995, '2026-03-09T08:00:00Z');
    await weigh(ledger, large.id, 4_180, '2026-03-09T08:00:00Z');
    const { items, totals, notListed } = await differences(ledger);
    expect(items).toMatchObject([
      {
        subject: { kind: 'cylinder', id: large.id, label: large.tag },
        kind: 'cylinderDifference',
        bookG: 4_310,
        scaleG: 4_180,
        differenceG: -130,
        standsG: -130,
        settledG: 0,
        twoUG: 4.082,
        verdict: 'notExplained',
        previousAt: '2026-03-02T08:00:00.000Z',
        recordedByName: ledger.owner.name,
        heldBetween: [{ name: 'S. Brandt' }],
        cost: null,
      },
      { subject: { id: small.id }, differenceG: -5, verdict: 'lookAgain' },
    ]);
    expect(totals).toEqual({
      notExplainedG: 130,
      lookAgainG: 5,
      withinScalesG: 0,
      byCertificateG: 0,
      settledG: 0,
    });
    expect(notListed).toEqual({ count: 0, massG: 0 });
    const { items: people } = await get(ledger, '/books/people?from=2026-03&to=2026-03');
    expect(people.find(({ name }: { name: string }) => name === 'S. Brandt')).toMatchObject({
      chargedG: -130,
      chargedBeyondCount: 1,
      holdsG: 4_180,
      holdsCylinders: 1,
    });
  });

  it('is within the scales after eight issues with their own readings, though the reading moved the book by 12 g', async () => {
    // Source: GUM Type B by hand, sqrt(18) readings of 5 g: 2 u is 12.25 g.
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('500', '5000');
    await weigh(ledger, cylinder.id, 9_500, '2026-03-01T08:00:00Z');
    for (let issue = 0; issue < 8; issue++) {
      const beforeG = 9_500 - issue * 100;
      const at = `2026-03-${String(issue + 2).padStart(2, '0')}T10:00:00Z`;
      await posted(
        ledger.client,
        weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG, afterG: beforeG - 100 }, {}, at),
      );
    }
    await weigh(ledger, cylinder.id, 8_688, '2026-03-20T08:00:00Z');
    expect((await differences(ledger)).items).toMatchObject([
      { bookG: 8_700, scaleG: 8_688, differenceG: -12, twoUG: 12.247, verdict: 'withinScales' },
    ]);
  });

  it('of a unit and of a reclaimer stands by itself: the one as the judge found it, the other named by a paper', async () => {
    const ledger = await startLedger(app);
    const recovery = await ledger.cylinder('0.5', { kind: 'recovery' });
    const reclaimer = await ledger.made('/parties', { id: uuid(), kind: 'reclaimer', name: 'Fallow Reclaim' });
    const unit = await ledger.unit('1000', '1000');
    await posted(
      ledger.client,
      groupOf('recovery', '2026-03-03T10:00:00Z', {
        unitId: unit.id,
        entries: [massOf('1300', inUnit(unit.id), inCylinder(recovery.id))],
        statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      }),
    );
    const at = { place: 'reclaimer', id: reclaimer.id };
    await posted(
      ledger.client,
      groupOf('reclaim', '2026-03-04T10:00:00Z', { entries: [massOf('1300', inCylinder(recovery.id), at)] }),
    );
    await posted(
      ledger.client,
      groupOf('certificate', '2026-03-05T10:00:00Z', {
        entries: [massOf('55', at, { place: 'reclaimerDifference' }, { howKnown: 'certificate' })],
      }),
    );
    expect((await differences(ledger)).items).toMatchObject([
      { subject: { kind: 'unit', label: unit.tag }, kind: 'unitDifference', differenceG: 300, verdict: 'notExplained' },
      {
        subject: { kind: 'reclaimer', label: 'Fallow Reclaim' },
        kind: 'reclaimerDifference',
        differenceG: -55,
        verdict: null,
        twoUG: null,
      },
    ]);
    expect((await books(ledger)).differences).toEqual([
      { kind: 'unitDifference', startG: 0, shownG: -300, settledG: 0, endG: -300 },
      { kind: 'reclaimerDifference', startG: 0, shownG: 55, settledG: 0, endG: 55 },
    ]);
  });

  it('is a short-fill where it is found at the first weighing of what was bought, and is the supplier’s', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    await posted(ledger.client, purchase(ledger, cylinder.id, '11340', '2026-03-01T08:00:00Z'));
    await weigh(ledger, cylinder.id, 11_200, '2026-03-02T08:00:00Z');
    expect((await differences(ledger)).items).toMatchObject([
      { kind: 'supplierShortFill', bookG: 11_340, scaleG: 11_200, differenceG: -140, verdict: 'notExplained' },
    ]);
    const { items } = await get(ledger, '/books/suppliers?from=2026-03&to=2026-03');
    expect(items).toMatchObject([
      { name: 'Fallow Gas', boughtG: 11_340, purchaseCount: 1, returnedG: 0, shortFillG: 140, withoutPriceG: 11_340 },
    ]);
  });
});

describe('By cylinder', () => {
  it('each book begins, moves and ends, page by page, and all of them are what is on hand', async () => {
    const ledger = await startLedger(app);
    const cylinders = [
      await ledger.cylinder('9500'),
      await ledger.cylinder('400'),
      await ledger.cylinder('0.25'),
    ] as const;
    const unit = await ledger.unit('500', '5000');
    const [first, second] = cylinders;
    await posted(
      ledger.client,
      weighIn(ledger, { cylinderId: first.id, unitId: unit.id, beforeG: 9_440, afterG: 9_350 }),
    );
    await posted(
      ledger.client,
      groupOf('transfer', '2026-03-05T10:00:00Z', {
        entries: [massOf('100', inCylinder(first.id), inCylinder(second.id))],
      }),
    );
    const rows: unknown[] = [];
    let cursor = '';
    do {
      const page = await get(ledger, `/books/cylinders?from=2026-03&to=2026-03&limit=1${cursor}`);
      rows.push(...page.items);
      cursor = page.nextCursor ? `&cursor=${page.nextCursor}` : '';
    } while (cursor);
    expect(rows).toMatchObject([
      { cylinderId: first.id, startG: 9_500, inG: 0, outG: 190, differenceG: -60, endG: 9_250 },
      { cylinderId: second.id, startG: 400, inG: 100, outG: 0, differenceG: 0, endG: 500 },
      { startG: 0.25, inG: 0, outG: 0, endG: 0.25 },
    ]);
    expect(sides(await books(ledger)).out.onHandEnd).toBe(9_750.25);
  });
});

describe('A price', () => {
  const price = (groupId: string, value: string, fields: Record<string, unknown> = {}) => ({
    id: uuid(),
    groupId,
    refrigerant: 'R-410A',
    price: { value, per: 'kg' },
    ...fields,
  });

  it('is refused to a technician, for what the group did not buy, for another currency, for no decimal', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const bought = purchase(ledger, cylinder.id, '1000', '2026-03-01T08:00:00Z');
    await posted(ledger.client, bought);
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    expect((await technician.post('/books/prices', price(bought.groupId, '20'))).status).toBe(403);
    const refusal = async (body: object) => (await ledger.client.post('/books/prices', body)).body.code;
    expect(await refusal(price(bought.groupId, '20', { refrigerant: 'R-32' }))).toBe('priceNotBought');
    expect(await refusal(price(uuid(), '20'))).toBe('priceNotBought');
    expect(await refusal(price(bought.groupId, '20,5'))).toBe('wrongFormat');
    expect(await refusal(price(bought.groupId, '-1'))).toBe('wrongFormat');
    await posted(ledger.client, price(bought.groupId, '20'), '/books/prices');
    expect(await refusal(price(bought.groupId, '20', { currency: 'EUR' }))).toBe('currencyOfFirm');
  });

  it('is kept once however often it is sent, and the last one given counts', async () => {
    const ledger = await startLedger(app, { jurisdiction: 'EU' });
    const cylinder = await ledger.cylinder(null);
    const bought = purchase(ledger, cylinder.id, '1000', '2026-03-01T08:00:00Z');
    await posted(ledger.client, bought);
    const first = price(bought.groupId, '20');
    await posted(ledger.client, first, '/books/prices');
    expect((await ledger.client.post('/books/prices', first)).status).toBe(200);
    expect((await ledger.client.post('/books/prices', { ...first, price: { value: '21', per: 'kg' } })).status).toBe(
      409,
    );
    app.clock.advance(1000);
    await posted(ledger.client, price(bought.groupId, '10', { price: { value: '10', per: 'lb' } }), '/books/prices');
    const page = await get(ledger, '/books/purchases?from=2026-03&to=2026-03');
    // 10 / 0.45359237
    expect(page).toMatchObject({
      currency: 'EUR',
      items: [{ massG: 1_000, price: { value: '10', per: 'lb', perKg: 22.046226 }, cost: 22.05 }],
    });
  });

  it('makes what went in, per job, what is on hand and what is not explained cost something', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    const unit = await ledger.unit('2000', '9000');
    const job = await ledger.made('/jobs', {
      id: uuid(),
      unitId: unit.id,
      kind: 'serviceWithLeak',
      openedAt: '2026-03-02T08:00:00Z',
    });
    const [one, two] = [
      purchase(ledger, cylinder.id, '10000', '2026-02-01T08:00:00Z'),
      purchase(ledger, cylinder.id, '12000', '2026-03-01T08:00:00Z'),
    ];
    await posted(ledger.client, one);
    await posted(ledger.client, two);
    const charge = (massG: string, from: string, kind = 'refill') =>
      posted(
        ledger.client,
        groupOf(kind, '2026-03-02T10:00:00Z', {
          unitId: unit.id,
          jobId: job.id,
          entries: [massOf(massG, inCylinder(from), inUnit(unit.id))],
        }),
      );
    await posted(
      ledger.client,
      groupOf('recovery', '2026-03-02T09:00:00Z', {
        unitId: unit.id,
        jobId: job.id,
        entries: [massOf('300', inUnit(unit.id), inCylinder(recovery.id))],
      }),
    );
    await charge('1500', cylinder.id);
    // What was recovered and is put back costs nothing.
    await charge('300', recovery.id, 'putBack');
    const noPrice = await get(ledger, '/books/jobs?from=2026-03&to=2026-03');
    expect(noPrice.items).toMatchObject([{ chargedG: 1_500, cost: null }]);

    await posted(ledger.client, price(one.groupId, '20'), '/books/prices');
    await posted(ledger.client, price(two.groupId, '31'), '/books/prices');
    // 10 kg at 20 and 12 kg at 31: 572 / 22 = 26 a kilogram in March.
    const { rows, method, currency } = await get(ledger, '/books/cost?from=2026-03&to=2026-03');
    expect({ method, currency }).toEqual({ method: 'monthlyWeightedAverage', currency: 'USD' });
    expect(rows).toMatchObject([
      {
        refrigerant: 'R-410A',
        startPerKg: 20,
        endPerKg: 26,
        startG: 10_000,
        startCost: 200,
        boughtG: 12_000,
        boughtCost: 372,
        intoUnitsG: 1_500,
        intoUnitsCost: 39,
        endG: 20_500,
        endCost: 533,
        withoutPriceG: 0,
      },
    ]);
    const jobs = await get(ledger, '/books/jobs?from=2026-03&to=2026-03');
    expect(jobs).toMatchObject({
      currency: 'USD',
      items: [{ jobId: job.id, intoUnitG: 1_800, recoveredG: 300, chargedG: 1_500, cost: 39 }],
    });
    await weigh(ledger, cylinder.id, 20_500, '2026-03-05T10:00:00Z');
    await weigh(ledger, cylinder.id, 20_400, '2026-03-06T10:00:00Z');
    expect((await get(ledger, '/books/differences?from=2026-03&to=2026-03')).items).toMatchObject([
      { differenceG: -100, cost: 2.6 },
    ]);
    expect((await get(ledger, '/books/suppliers?from=2026-01&to=2026-03')).items).toMatchObject([
      { boughtG: 22_000, paid: 572, withoutPriceG: 0 },
    ]);
  });

  it('goes with its purchase when that is reversed', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    const [kept, wrong] = [
      purchase(ledger, cylinder.id, '10000', '2026-03-01T08:00:00Z'),
      purchase(ledger, cylinder.id, '10000', '2026-03-02T08:00:00Z'),
    ];
    for (const [group, value] of [
      [kept, '20'],
      [wrong, '80'],
    ] as const) {
      await posted(ledger.client, group);
      await posted(ledger.client, price(group.groupId, value), '/books/prices');
    }
    await reverse(ledger, wrong.groupId);
    expect((await get(ledger, '/books/cost?from=2026-03&to=2026-03')).rows).toMatchObject([
      { boughtG: 10_000, boughtCost: 200, endPerKg: 20, endCost: 200 },
    ]);
    expect((await get(ledger, '/books/purchases?from=2026-03&to=2026-03')).items).toHaveLength(1);
  });
});

interface Posted {
  bookingMonth: string;
  refrigerant: string;
  massG: number;
  from: { place: string; as: string | null };
  to: { place: string; as: string | null };
  groupId: string;
  reversesGroupId: string | null;
  addedByServer: boolean;
}

/** The second model: every entry of the log, added up place by place with nothing clever. */
function naiveBooks(entries: readonly Posted[], from: string, to: string) {
  const micrograms = (massG: number): bigint => BigInt(Math.round(massG * 1e6));
  const kindOf = ({ place, as }: Posted['from']): string => (as ? `${place}:${as}` : place);
  const places = new Map<string, { start: bigint; in: bigint; out: bigint }>();
  const at = (kind: string) => {
    const found = places.get(kind) ?? { start: 0n, in: 0n, out: 0n };
    places.set(kind, found);
    return found;
  };
  let bought = 0n;
  let intoUnits = 0n;
  for (const entry of entries) {
    if (entry.bookingMonth > to) continue;
    const mass = micrograms(entry.massG);
    const [source, target] = [kindOf(entry.from), kindOf(entry.to)];
    if (entry.bookingMonth < from) {
      at(source).start -= mass;
      at(target).start += mass;
      continue;
    }
    const isReversal = entry.reversesGroupId !== null && !entry.addedByServer;
    if (source !== target) {
      // A reversal goes back the way that it came: it takes from what came in, and from what went out.
      at(source)[isReversal ? 'in' : 'out'] += isReversal ? -mass : mass;
      at(target)[isReversal ? 'out' : 'in'] += isReversal ? -mass : mass;
    }
    const went = (one: string, other: string) =>
      isReversal ? source === other && target === one : source === one && target === other;
    if (went('supplier', 'cylinder')) bought += isReversal ? -mass : mass;
    if (went('cylinder', 'unit')) intoUnits += isReversal ? -mass : mass;
  }
  const grams = (mass: bigint): number => Number(mass) / 1e6;
  return {
    boughtG: grams(bought),
    intoUnitsG: grams(intoUnits),
    places: [...places]
      .filter(([, { start, in: came, out }]) => start !== 0n || came !== 0n || out !== 0n)
      .map(([kind, { start, in: came, out }]) => ({
        kind,
        startG: grams(start),
        inG: grams(came),
        outG: grams(out),
        endG: grams(start + came - out),
      })),
  };
}

describe('Whatever is posted, late, wrong, reversed or refused', () => {
  it('the books equal a naive model over the log, and its fresh aggregate to the microgram', {
    timeout: 120_000,
  }, async () => {
    const ledger = await startLedger(app);
    const cylinders = [await ledger.cylinder('9500'), await ledger.cylinder(null), await ledger.cylinder('3000.25')];
    const unit = await ledger.unit('1000', '1340');
    const notKnown = await ledger.unit('0', '2000', {}, 'notKnown');
    const sent: string[] = [];
    let closedBefore = 0;
    const act = async ([what, one, two, massG, monthNumber]: [number, number, number, number, number]) => {
      const cylinder = cylinders[one % 3] as { id: string };
      const other = cylinders[two % 3] as { id: string };
      const at = `2026-0${2 + (monthNumber % 5)}-1${two % 9}T1${one % 9}:00:00Z`;
      const mass = `${massG}.${String(one * 7 + two).padStart(3, '0')}`;
      const unitId = two % 2 === 0 ? unit.id : notKnown.id;
      const post = async (body: { groupId: string }) => {
        const { status } = await ledger.client.post('/entry-groups', body);
        if (status === 201) sent.push(body.groupId);
        expect([201, 422]).toContain(status);
      };
      const entry = (from: object, to: object, fields = {}) => [massOf(mass, from as never, to as never, fields)];
      switch (what % 8) {
        case 0:
          return post(purchase(ledger, cylinder.id, mass, at));
        case 1:
          return post(groupOf('refill', at, { unitId, entries: entry(inCylinder(cylinder.id), inUnit(unitId)) }));
        case 2:
          return post(
            groupOf('weighing', at, { readings: [readingOf(cylinder.id, ledger.scale.id, 'only', massG * 3)] }),
          );
        case 3:
          return post(groupOf('recovery', at, { unitId, entries: entry(inUnit(unitId), inCylinder(cylinder.id)) }));
        case 4:
          if (cylinder === other) return;
          return post(groupOf('transfer', at, { entries: entry(inCylinder(cylinder.id), inCylinder(other.id)) }));
        case 5:
          return post(
            groupOf('extraCharge', at, {
              unitId,
              entries: entry(inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' }),
            }),
          );
        case 6: {
          const groupId = sent[(one * 5 + two) % Math.max(sent.length, 1)];
          if (!groupId) return;
          const body = { groupId: uuid(), schema: 1, reason: 'wrong' };
          const { status } = await ledger.client.post(`/entry-groups/${groupId}/reversal`, body);
          return expect([201, 422]).toContain(status);
        }
        default:
          closedBefore = Math.min(closedBefore + (two % 2), 4);
          if (closedBefore > 0) await ledger.closeMonthsBefore(`2026-0${1 + closedBefore}`);
      }
    };
    const number = fc.nat({ max: 40 });
    const acts = fc.sample(fc.tuple(number, number, number, fc.integer({ min: 1, max: 1200 }), number), {
      numRuns: 220,
      seed: 20261130,
    });
    for (const each of acts) await act(each);
    expect(sent.length).toBeGreaterThan(60);

    const entries: Posted[] = [];
    let cursor = '';
    do {
      const page = await get(ledger, `/entries?sort=sequence&limit=200${cursor}`);
      entries.push(...page.items);
      cursor = page.nextCursor ? `&cursor=${page.nextCursor}` : '';
    } while (cursor);
    for (const [from, to] of [
      ['2026-01', '2026-12'],
      ['2026-03', '2026-03'],
      ['2026-04', '2026-06'],
      ['2026-05', '2027-01'],
    ] as const) {
      const naive = naiveBooks(entries, from, to);
      const found = await books(ledger, `from=${from}&to=${to}`);
      const byKind = (rows: readonly { kind: string }[]) => rows.toSorted((a, b) => (a.kind < b.kind ? -1 : 1));
      expect(byKind(found.places), `${from} to ${to}`).toEqual(byKind(naive.places));
      expect(sides(found).in.bought ?? 0).toBe(naive.boughtG);
      expect(sides(found).out.intoUnits ?? 0).toBe(naive.intoUnitsG);
      const out = Object.values(sides(found).out).reduce((sum, massG) => sum + massG, 0);
      expect(out).toBeCloseTo(found.equation.totalG, 6);
    }

    const differing = await app.database.query(
      'superuser',
      `select coalesce(m.month, e.month) from (select * from month_sum where firm_id = $1) m
        full join (select booking_month as month, refrigerant, from_place || coalesce(':' || from_as, '') as from_kind,
            to_place || coalesce(':' || to_as, '') as to_kind, sum(mass_micrograms) as mass, count(*) as entries,
            coalesce(sum(mass_micrograms) filter (where reverses_entry_id is not null), 0) as reversal
          from entry where firm_id = $1 group by 1, 2, 3, 4) e
          on e.month = m.month and e.refrigerant = m.refrigerant and e.from_kind = m.from_kind and e.to_kind = m.to_kind
        where m.mass_micrograms is distinct from e.mass or m.entry_count is distinct from e.entries
          or m.reversal_micrograms is distinct from e.reversal`,
      [ledger.firm.id],
    );
    expect(differing).toEqual([]);
  });
});

describe('The tables as CSV', () => {
  it('are there for each, with a head line and as many lines as rows', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    await ledger.cylinder('400');
    const lines = async (table: string) => {
      const { status, body, headers } = await ledger.client.get(`/books.csv?from=2026-01&to=2026-03&table=${table}`);
      expect([status, headers.get('content-type')]).toEqual([200, 'text/csv; charset=utf-8']);
      return String(body).trim().split('\r\n');
    };
    const tables = 'equation places differences items people suppliers jobs cost purchases'.split(' ');
    for (const table of tables) expect((await lines(table))[0], table).not.toMatch(/[a-z][A-Z.]/);
    expect(await lines('equation')).toEqual([
      'side,part,mass (g),entries',
      'in,onHandStart,0,0',
      'in,opened,9900,2',
      'out,onHandEnd,9900,0',
    ]);
    expect(await lines('cylinders')).toHaveLength(3);
    expect((await ledger.client.get('/books.csv?from=2026-01&to=2026-03&table=secrets')).status).toBe(422);
  });
});
