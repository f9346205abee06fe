import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
import { type Ledger, SINCE, startLedger } from '../support/ledger.ts';

const NOW = Date.parse(TEST_START);
let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

describe('A revised tare', () => {
  const revision = (fields: Record<string, unknown> = {}) => ({
    id: uuid(),
    tare: { value: '7800', unit: 'g' },
    validFrom: SINCE,
    reason: 'stamp read wrong',
    ...fields,
  });

  it('is refused with a date to come, and nothing of it is kept', async () => {
    const cylinder = await ledger.cylinder();
    const before = (await ledger.client.get(`/cylinders/${cylinder.id}`)).body;
    const validFrom = new Date(NOW + 48 * 3_600_000).toISOString();
    const answer = await ledger.client.post(`/cylinders/${cylinder.id}/tares`, revision({ validFrom }));
    expect(answer.body).toMatchObject({
      status: 422,
      errors: [{ path: '/validFrom', code: 'inFuture', given: validFrom }],
    });
    expect(answer.body.errors[0].message).toMatch(/is in the future; it is .* now/);
    expect((await ledger.client.get(`/cylinders/${cylinder.id}`)).body).toEqual(before);
  });

  it('counts from the moment that is given, a device clock that runs a minute ahead allowed for', async () => {
    const cylinder = await ledger.cylinder();
    const validFrom = new Date(NOW + 60_000).toISOString();
    expect((await ledger.client.post(`/cylinders/${cylinder.id}/tares`, revision({ validFrom }))).status).toBe(201);
  });
});
