import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app, { timeZone: 'America/New_York' });
});
afterAll(() => app.close());

const rented = () => ledger.cylinder(null, { owner: { kind: 'party', id: ledger.supplier.id } });
const terms = (since: string, dailyRate: string | null = '0.35') => ({
  id: uuid(),
  since,
  conditions: { deposit: '80.00', dailyRate, currency: 'USD' },
});

describe('The rental of a cylinder', () => {
  it('counts its days in the zone of the firm, and its cost by the rate', async () => {
    const { id } = await rented();
    app.clock.set('2026-11-30T03:00:00.000Z'); // still the evening of 29 November in New York
    const made = await ledger.client.post(`/cylinders/${id}/rental-terms`, terms('2026-11-20'));
    expect(made.status).toBe(201);
    const read = await ledger.client.get(`/cylinders/${id}/rental-terms`);
    expect(read.body.rental).toMatchObject({
      since: '2026-11-20',
      days: 10,
      costs: [{ amount: '3.50', currency: 'USD' }],
    });
  });

  it('makes no second terms of the same request, and refuses the id with other content', async () => {
    const { id } = await rented();
    const body = terms('2026-11-01');
    expect((await ledger.client.post(`/cylinders/${id}/rental-terms`, body)).status).toBe(201);
    const again = await ledger.client.post(`/cylinders/${id}/rental-terms`, body);
    expect([again.status, again.body.items.length]).toEqual([200, 1]);
    const other = await ledger.client.post(`/cylinders/${id}/rental-terms`, { ...body, since: '2026-11-02' });
    expect([other.status, other.body.code]).toEqual([409, 'idReused']);
  });

  it('ends when the cylinder is given back', async () => {
    const { id } = await rented();
    await ledger.client.post(`/cylinders/${id}/rental-terms`, terms('2026-11-01'));
    const back = { id: uuid(), since: '2026-11-10', conditions: null };
    expect((await ledger.client.post(`/cylinders/${id}/rental-terms`, back)).body.rental).toBeNull();
  });

  it('is for what belongs to a party, not for our own', async () => {
    const own = await ledger.cylinder(null);
    const answer = await ledger.client.post(`/cylinders/${own.id}/rental-terms`, terms('2026-11-01'));
    expect([answer.status, answer.body.code]).toEqual([422, 'cylinderNotRented']);
  });

  it('is chained, and the check of the whole log reads it back from its row', async () => {
    const { id } = await rented();
    const body = terms('2026-11-01');
    await ledger.client.post(`/cylinders/${id}/rental-terms`, body);
    const [record] = await app.database.query<{ content: string }>(
      'superuser',
      `select content from journal_record where noun = 'rentalTerms' and subject_id = $1`,
      [body.id],
    );
    expect(JSON.parse(String(record?.content)).after).toEqual({
      cylinderId: id,
      since: '2026-11-01',
      deposit: '80.00',
      dailyRate: '0.35',
      currency: 'USD',
    });
    const verification = await fetch(`${app.url}/api/v1/journal/verification`, {
      headers: { Cookie: String(ledger.client.cookie) },
    });
    expect(JSON.parse(String((await verification.text()).trim().split('\n').at(-1)))).toMatchObject({
      result: 'intact',
    });
  });

  it('is neither written by a reader nor seen by another firm', async () => {
    const { id } = await rented();
    const reader = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id }));
    expect((await reader.post(`/cylinders/${id}/rental-terms`, terms('2026-11-01'))).status).toBe(403);
    const stranger = await startLedger(app);
    expect((await stranger.client.get(`/cylinders/${id}/rental-terms`)).status).toBe(404);
    expect((await stranger.client.post(`/cylinders/${id}/rental-terms`, terms('2026-11-01'))).status).toBe(404);
    expect((await stranger.client.get(`/cylinders/${id}/tag`)).status).toBe(404);
  });
});

describe('The tag of a cylinder', () => {
  it('holds the address under which everybody reaches the server', async () => {
    const { id } = await ledger.cylinder(null);
    const { body } = await ledger.client.get(`/cylinders/${id}/tag`);
    expect(body).toEqual({ address: `${app.parts.settings.publicUrl}/cylinders/${id}` });
  });
});
