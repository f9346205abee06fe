import fc from 'fast-check';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { EmissionsResponse } from '../../shared/books/emissions.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  HOSE,
  inCylinder,
  inUnit,
  massOf,
  posted,
  readingOf,
  siteOf,
  startLedger,
} from '../support/ledger.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const emissions = async (client: TestClient, query = ''): Promise<EmissionsResponse> => {
  const answer = await client.get(`/emissions${query}`);
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return answer.body;
};
const refill = (
  unitId: string,
  cylinderId: string,
  massG: string,
  at: string,
  is: string | null,
  refrigerant = 'R-410A',
) =>
  groupOf('refill', at, {
    unitId,
    entries: [massOf(massG, inCylinder(cylinderId), inUnit(unitId), { refrigerant })],
    statements: is === null ? [] : [{ about: 'unit', id: unitId, is }],
  });
/** A firm that lost 300 g at one customer, at least 200 g and 28 g from a hose at another. */
const twoCustomers = async () => {
  const ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500');
  const otherCustomer = await ledger.made('/customers', { id: uuid(), name: 'Harbour Bakery' });
  const otherSite = await ledger.made('/sites', { ...siteOf(otherCustomer.id), name: 'Quay 4' });
  const [here, there] = [
    await ledger.unit('1290', '1290'),
    await ledger.unit('1290', '1290', { siteId: otherSite.id }),
  ];
  await posted(ledger.client, refill(here.id, cylinder.id, '300', '2026-03-02T10:00:00Z', 'full'));
  const short = refill(there.id, cylinder.id, '200', '2026-03-03T10:00:00Z', 'notFull');
  short.entries?.push(massOf('28', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' }));
  await posted(ledger.client, short);
  return { ledger, cylinder, here, there, otherCustomer, otherSite };
};

describe('Emissions are refused', () => {
  it('without sign-in, backwards, and by something they are not kept by', async () => {
    expect((await app.visitor().get('/emissions')).status).toBe(401);
    const client = await app.signIn('owner');
    const code = async (query: string) => (await client.get(`/emissions?${query}`)).body.code;
    expect(await code('from=2026-04&to=2026-03')).toBe('periodBackwards');
    expect(await code('by=van')).toBe('notAllowedValue');
    expect(await code('gwpSet=AR3')).toBe('notAllowedValue');
    expect(await code('month=2026-03')).toBe('unknownKey');
  });
});

describe('Emissions', () => {
  it('by customer and by site are in kg and t CO2e, by a set that is named, what is "at least" apart', async () => {
    const { ledger, otherCustomer, otherSite } = await twoCustomers();
    const byCustomer = await emissions(ledger.client, '?by=customer&gwpSet=AR4');
    // GWP of R-410A by AR4: 2087.5 (half R-32 at 675, half R-125 at 3500). 300 g: 0.62625 t.
    expect(byCustomer).toMatchObject({
      by: 'customer',
      gwpSet: { name: 'AR4', sources: [{ refrigerant: 'R-410A', source: expect.stringContaining('IPCC AR4') }] },
      lines: [
        { label: 'Wexcombe Mill', totalG: 300, inferredG: 300, hoseG: 0, atLeastG: 0, co2eT: 0.62625, gwp: 2087.5 },
        { key: otherCustomer.id, label: 'Harbour Bakery', totalG: 228, inferredG: 200, hoseG: 28, atLeastG: 200 },
      ],
      total: { totalG: 528, atLeastG: 200, beforeOurCareG: 0, co2eT: 1.1022, notCovered: [] },
    });
    const bySite = await emissions(ledger.client, '?by=site');
    expect(bySite.lines).toMatchObject([
      { key: ledger.site.id, label: 'Mill Lane', totalG: 300 },
      { key: otherSite.id, label: 'Quay 4', totalG: 228 },
    ]);
    expect(bySite.gwpSet.name).toBe('US-AIM');
  });

  it('differ by set, and say which refrigerant a set has no figure for instead of counting it as nothing', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500', { refrigerant: 'R-22' });
    const unit = await ledger.unit('1000', '1000', { refrigerant: 'R-22' });
    await posted(ledger.client, refill(unit.id, cylinder.id, '100', '2026-03-02T10:00:00Z', 'full', 'R-22'));
    expect(await emissions(ledger.client)).toMatchObject({
      lines: [{ refrigerant: 'R-22', totalG: 100, co2eT: null, gwp: null }],
      total: { totalG: 100, co2eT: 0, notCovered: ['R-22'] },
    });
    // AR5: R-22 is 1760.
    expect(await emissions(ledger.client, '?gwpSet=AR5')).toMatchObject({
      lines: [{ co2eT: 0.176 }],
      total: { notCovered: [] },
    });
  });

  it('keep what was lost before our care apart from what was lost since', async () => {
    // Scenario S8 case 1: opened at 990, 300 before our care; then 150 inferred.
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('0', '1290', {}, 'notKnown');
    await posted(ledger.client, refill(unit.id, cylinder.id, '300', '2026-03-02T10:00:00Z', 'full'));
    await posted(ledger.client, refill(unit.id, cylinder.id, '150', '2026-05-02T10:00:00Z', 'full'));
    expect((await emissions(ledger.client, '?gwpSet=AR4')).total).toMatchObject({
      totalG: 150,
      inferredG: 150,
      beforeOurCareG: 300,
      co2eT: 0.31313,
      beforeOurCareCo2eT: 0.62625,
    });
  });

  it('are negative in the month in which a loss is taken back', async () => {
    // Scenario S7 case 3, over two months: a loss of 150 in March, taken back in May.
    const ledger = await startLedger(app);
    const [cylinder, recovery] = [await ledger.cylinder('9500'), await ledger.cylinder(null, { kind: 'recovery' })];
    const unit = await ledger.unit('1290', '1290');
    await posted(ledger.client, refill(unit.id, cylinder.id, '150', '2026-03-02T10:00:00Z', 'notKnown'));
    await posted(
      ledger.client,
      groupOf('recovery', '2026-04-02T10:00:00Z', {
        unitId: unit.id,
        entries: [massOf('490', inUnit(unit.id), inCylinder(recovery.id))],
      }),
    );
    await posted(ledger.client, refill(unit.id, cylinder.id, '300', '2026-05-02T10:00:00Z', 'full'));
    const byMonth = (await emissions(ledger.client, '?by=month&gwpSet=AR4')).lines;
    expect(byMonth).toMatchObject([
      { label: '2026-03', totalG: 150, co2eT: 0.31313 },
      { label: '2026-05', totalG: -150, co2eT: -0.31313 },
    ]);
    expect((await emissions(ledger.client, '?from=2026-05&to=2026-05')).total.totalG).toBe(-150);
    expect((await emissions(ledger.client)).lines).toEqual([]);
  });

  it('hold no difference until month close says so, and then one of no site', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    await posted(
      ledger.client,
      groupOf('weighing', '2026-01-20T08:00:00Z', {
        readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 9_400)],
      }),
    );
    expect((await emissions(ledger.client)).lines).toEqual([]);
    const { items } = (await ledger.client.get('/periods/checklist?month=2026-01')).body;
    const settle = { id: uuid(), month: '2026-01', key: items[0].key, to: { place: 'atmosphere' }, reason: 'valve' };
    await posted(ledger.client, settle, '/periods/settlements');
    expect((await emissions(ledger.client, '?by=site')).lines).toMatchObject([
      { key: null, label: null, totalG: 100, measuredG: 100 },
    ]);
  });

  it('show a reader of one site what was lost there, and nothing else', async () => {
    const { ledger, otherSite } = await twoCustomers();
    const reader = await app.signIn(
      await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [otherSite.id] }),
    );
    const seen = await emissions(reader, '?by=site');
    expect(seen.lines.map(({ label }) => label)).toEqual(['Quay 4']);
    expect(seen.total.totalG).toBe(228);
  });

  it('have the same sum by whatever they are told apart', async () => {
    const { ledger, cylinder, here, there } = await twoCustomers();
    const act = fc.record({
      unit: fc.constantFrom(here.id, there.id),
      massG: fc.integer({ min: 1, max: 90 }),
      day: fc.integer({ min: 10, max: 28 }),
      month: fc.integer({ min: 3, max: 9 }),
      is: fc.constantFrom('full', 'notFull', 'notKnown'),
    });
    for (const { unit, massG, day, month, is } of fc.sample(act, { numRuns: 30, seed: 7 })) {
      const at = `2026-0${month}-${day}T10:00:00Z`;
      await posted(ledger.client, refill(unit, cylinder.id, String(massG), at, is));
    }
    const totals = await Promise.all(
      ['refrigerant', 'customer', 'site', 'month'].map(async (by) => {
        const { lines, total } = await emissions(ledger.client, `?by=${by}`);
        const added = lines.reduce((sum, { totalG }) => sum + totalG, 0);
        expect(added).toBeCloseTo(total.totalG, 6);
        return total;
      }),
    );
    for (const total of totals) expect(total).toEqual(totals[0]);
    const { items } = await emissions(ledger.client);
    expect(items.reduce((sum, { massG }) => sum + massG, 0)).toBeCloseTo(totals[0]?.totalG ?? 0, 6);
  });

  it('as CSV name the set in each line', async () => {
    const { ledger } = await twoCustomers();
    const { status, body, headers } = await ledger.client.get('/emissions.csv?by=customer&gwpSet=AR4');
    expect([status, headers.get('content-type')]).toEqual([200, 'text/csv; charset=utf-8']);
    const lines = String(body).trim().split('\r\n');
    expect(lines[0]).toBe(
      'customer,name,refrigerant,measured (g),inferred (g),in the hose (g),to the atmosphere (g),of it at least (g),' +
        'before our care (g),GWP,CO2 equivalent (t),CO2 equivalent before our care (t),GWP values',
    );
    expect(lines[1]).toMatch(/,Wexcombe Mill,R-410A,0,300,0,300,0,0,2087.5,0.62625,0,AR4$/);
  });
});
