import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { DifferencesResponse } from '../../shared/books/books.schema.ts';
import type { CylinderStatement } from '../../shared/statements/cylinder-statement.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  inCylinder,
  type Ledger,
  massOf,
  posted,
  readingOf,
  siteOf,
  startLedger,
  weighIn,
} from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const weigh = (ledger: Ledger, id: string, netG: number, at: string, fields = {}) =>
  posted(
    ledger.client,
    groupOf('weighing', at, { readings: [readingOf(id, ledger.scale.id, 'only', netG)], ...fields }),
  );
const get = async <Body>(ledger: Ledger, path: string): Promise<Body> => {
  const answer = await ledger.client.get(path);
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return answer.body;
};
const differences = (ledger: Ledger, query = 'from=2026-03&to=2026-04') =>
  get<DifferencesResponse>(ledger, `/books/differences?${query}`);

describe('The reading of a mixed cylinder', () => {
  const GASES = ['R-22', 'R-32', 'R-407C', 'R-410A'];
  it('is judged whole, however small the share of each refrigerant', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null, { kind: 'recovery' });
    for (const refrigerant of GASES) {
      const mass = massOf('300', { place: 'opening' }, inCylinder(cylinder.id), { refrigerant, howKnown: 'estimated' });
      await posted(ledger.client, groupOf('opening', '2026-02-01T08:00:00Z', { entries: [mass], reason: 'mixed' }));
    }
    await weigh(ledger, cylinder.id, 1_186, '2026-03-09T08:00:00Z');
    const share = { bookG: 1_200, scaleG: 1_186, differenceG: -3.5, readingDifferenceG: -14, twoUG: 4.082 };
    const { items, totals } = await differences(ledger);
    expect(items).toHaveLength(4);
    for (const item of items) expect(item).toMatchObject({ ...share, verdict: 'notExplained' });
    expect(totals).toMatchObject({ notExplainedG: 14, withinScalesG: 0 });
    const oneGas = await differences(ledger, 'from=2026-03&to=2026-04&refrigerant=R-32');
    expect(oneGas.items).toMatchObject([{ ...share, refrigerant: 'R-32', verdict: 'notExplained' }]);
  });
});

describe('One reading', () => {
  it('is called the same today, in the books and in the statement', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    const unit = await ledger.unit('500', '5000');
    await weigh(ledger, cylinder.id, 9_500, '2026-03-01T08:00:00Z');
    for (let issue = 0; issue < 8; issue++) {
      const at = `2026-03-${String(issue + 2).padStart(2, '0')}T10:00:00Z`;
      const parts = {
        cylinderId: cylinder.id,
        unitId: unit.id,
        beforeG: 9_500 - issue * 100,
        afterG: 9_400 - issue * 100,
      };
      await posted(ledger.client, weighIn(ledger, parts, {}, at));
    }
    await weigh(ledger, cylinder.id, 8_696, '2026-03-20T08:00:00Z');
    const low = await weigh(ledger, cylinder.id, 8_692, '2026-04-03T08:00:00Z');
    // Within 2 u of what the book rests on, sqrt(18) readings of 5 g; beyond that of two, so that the book follows it.
    const figures = { differenceG: -8, twoUG: 12.247, verdict: 'withinScales' };
    expect(low.body.flags).toEqual([]);
    expect((await differences(ledger)).items).toMatchObject([figures]);
    const april = await get<CylinderStatement>(
      ledger,
      `/cylinders/${cylinder.id}/statement?from=2026-04-01&to=2026-04-30`,
    );
    expect(april.difference).toMatchObject({ ...figures, independentReadings: 18 });
    expect(april.differences).toMatchObject([{ ...figures, posted: true }]);
    const lower = await weigh(ledger, cylinder.id, 8_684, '2026-04-04T08:00:00Z');
    expect(lower.body.flags).toMatchObject([{ code: 'cylinderNotExplained', massG: -8 }]);
    expect((await differences(ledger)).items[0]).toMatchObject({ differenceG: -8, verdict: 'notExplained' });
  });
});

describe('The statement of a difference', () => {
  it('holds it, wherever the site’s clock stands: its days are the firm’s', async () => {
    const ledger = await startLedger(app, { timeZone: 'America/New_York' });
    const site = await ledger.made('/sites', { ...siteOf(ledger.customer.id), timeZone: 'America/Los_Angeles' });
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('500', '5000', { siteId: site.id });
    // Half past one on the first of April in New York, half past ten the evening before at the site.
    const parts = { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9_400, afterG: 9_300 };
    await posted(ledger.client, weighIn(ledger, parts, {}, '2026-04-01T05:30:00Z'));
    const [item] = (await differences(ledger)).items;
    expect(item).toMatchObject({ differenceG: -100, timeZone: 'America/Los_Angeles' });
    expect(item?.statement).toEqual({ from: '2026-04-01', to: '2026-04-01' });
    const statement = await get<CylinderStatement>(
      ledger,
      `/cylinders/${cylinder.id}/statement?from=${item?.statement?.from}&to=${item?.statement?.to}`,
    );
    expect(statement.differences).toMatchObject([{ groupId: item?.groupId, differenceG: -100 }]);
  });
});

describe('The books', () => {
  const supplied = (ledger: Ledger, massG: string, at: string, cylinderId: string) => {
    const mass = massOf(massG, { place: 'supplier', id: ledger.supplier.id }, inCylinder(cylinderId), {
      howKnown: 'invoice',
    });
    return groupOf('purchase', at, { entries: [mass] });
  };
  const reverse = (ledger: Ledger, groupId: string) =>
    posted(ledger.client, { groupId: uuid(), schema: 1, reason: 'wrong entry' }, `/entry-groups/${groupId}/reversal`);

  it('count the purchases that stand: neither one that was reversed nor the reversal of a return', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    const wrong = supplied(ledger, '11340', '2026-03-02T08:00:00Z', cylinder.id);
    await posted(ledger.client, wrong);
    await reverse(ledger, wrong.groupId);
    await posted(ledger.client, supplied(ledger, '11300', '2026-03-02T08:00:00Z', cylinder.id));
    const back = groupOf('return', '2026-03-05T08:00:00Z', {
      entries: [massOf('500', inCylinder(cylinder.id), { place: 'supplier', id: ledger.supplier.id })],
      readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 11_300)],
    });
    await posted(ledger.client, back);
    await reverse(ledger, back.groupId);
    const { items } = await get<{ items: unknown[] }>(ledger, '/books/suppliers?from=2026-03&to=2026-12');
    expect(items).toMatchObject([{ boughtG: 11_300, returnedG: 0, purchaseCount: 1 }]);
  });

  it('take what came up as a surplus off the cost, and count as not explained only what they call so', async () => {
    const ledger = await startLedger(app);
    const person = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'S. Brandt' });
    app.clock.set('2026-02-01T08:00:00.000Z');
    const [more, less] = [
      await ledger.cylinder(null, { heldBy: person.id }),
      await ledger.cylinder(null, { heldBy: person.id }),
    ];
    app.clock.set('2026-11-30T15:00:00.000Z');
    for (const [cylinder, netG] of [
      [more, 10_100],
      [less, 9_995],
    ] as const) {
      const purchase = supplied(ledger, '10000', '2026-03-01T08:00:00Z', cylinder.id);
      await posted(ledger.client, purchase);
      const price = { value: '20', per: 'kg' };
      const paid = { id: uuid(), groupId: purchase.groupId, refrigerant: 'R-410A', price, currency: 'EUR' };
      expect((await ledger.client.post('/books/prices', paid)).status).toBe(201);
      await weigh(ledger, cylinder.id, 10_000, '2026-03-02T08:00:00Z');
      await weigh(ledger, cylinder.id, netG, '2026-03-09T08:00:00Z');
    }
    const { items } = await differences(ledger);
    expect(items).toMatchObject([
      { subject: { id: more.id }, differenceG: 100, verdict: 'notExplained' },
      { subject: { id: less.id }, differenceG: -5, verdict: 'lookAgain' },
    ]);
    expect(items[0]?.cost).toBeLessThan(0);
    expect(items[1]?.cost).toBeGreaterThan(0);
    const people = await get<{ items: { name: string }[] }>(ledger, '/books/people?from=2026-03&to=2026-03');
    expect(people.items.find(({ name }) => name === 'S. Brandt')).toMatchObject({
      chargedG: 95,
      chargedBeyondCount: 1,
    });
  });
});
