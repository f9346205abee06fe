import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, type Ledger, massOf, posted, readingOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

const DAY = '2026-03-02T10:00:00Z';
const bought = (cylinderId: string, massG: string, fields: Record<string, unknown> = {}) =>
  groupOf('purchase', DAY, {
    entries: [
      massOf(massG, { place: 'supplier', id: ledger.supplier.id }, inCylinder(cylinderId), {
        howKnown: 'invoice',
        ...fields,
      }),
    ],
  });

describe('What may happen but not without its reason', () => {
  it('is asked for when a second refrigerant comes into a cylinder, which is then mixed', async () => {
    const cylinder = await ledger.cylinder('4000', { kind: 'recovery' });
    const body = bought(cylinder.id, '1000', { refrigerant: 'R-22' });

    const asked = await ledger.post(body);
    expect(asked.body).toMatchObject({
      status: 422,
      code: 'reasonRequired',
      errors: [{ code: 'reasonForSecondRefrigerant', path: '/reason', given: 'R-22', allowed: 'R-410A' }],
    });
    const answer = await posted(ledger.client, { ...body, reason: 'took the wrong cylinder' });
    expect(answer.body.flags).toMatchObject([{ code: 'cylinderMixed', closedBy: null }]);
    expect((await ledger.client.get(`/cylinders/${cylinder.id}`)).body).toMatchObject({ mixed: true, contentG: 5000 });
  });

  it('is asked for when a fill goes past the limit, with content and limit', async () => {
    const cylinder = await ledger.cylinder('9500', { stampedLimit: { value: '10000', unit: 'g' } });
    const body = bought(cylinder.id, '501');

    expect((await ledger.post(body)).body).toMatchObject({
      code: 'reasonRequired',
      errors: [{ code: 'reasonForPastLimit', given: '10001', allowed: '10000' }],
    });
    expect((await ledger.post(bought(cylinder.id, '500'))).status).toBe(201);
    const answer = await posted(ledger.client, { ...bought(cylinder.id, '1'), reason: 'no other cylinder on site' });
    expect(answer.body.flags).toMatchObject([{ code: 'cylinderOverLimit', massG: 1 }]);
  });

  it('is asked for when a non-refillable cylinder is refilled', async () => {
    const full = await ledger.cylinder('9500');
    const spent = await ledger.cylinder('10', { kind: 'nonRefillable' });
    const body = groupOf('transfer', DAY, { entries: [massOf('400', inCylinder(full.id), inCylinder(spent.id))] });

    expect((await ledger.post(body)).body).toMatchObject({
      code: 'reasonRequired',
      errors: [{ code: 'reasonForRefill' }],
    });
    expect((await ledger.post({ ...body, reason: '   ' })).body.code).toBe('reasonRequired');
    expect((await ledger.post({ ...body, reason: 'nothing else at hand' })).status).toBe(201);
  });
});

describe('Who may post', () => {
  it('is nobody who only reads, and nobody signed out', async () => {
    const reader = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id }));
    const cylinder = await ledger.cylinder('9500');
    const body = bought(cylinder.id, '10');

    expect((await reader.post('/entry-groups', body)).status).toBe(403);
    expect((await app.visitor().post('/entry-groups', body)).status).toBe(401);
    expect(await ledger.contentG(cylinder.id)).toBe(9500);
  });

  it('is a technician for the work, and the office for certificates and the close of a month', async () => {
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    const cylinder = await ledger.cylinder('9500');
    const reclaimer = await ledger.made('/parties', { id: uuid(), kind: 'reclaimer', name: 'Clear Gas' });
    const sent = groupOf('reclaim', DAY, {
      readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 9500)],
      entries: [massOf('9500', inCylinder(cylinder.id), { place: 'reclaimer', id: reclaimer.id })],
    });
    const certificate = groupOf('certificate', DAY, {
      entries: [
        massOf(
          '100',
          { place: 'reclaimer', id: reclaimer.id },
          { place: 'reclaimerDifference' },
          { howKnown: 'certificate' },
        ),
      ],
    });

    expect((await technician.post('/entry-groups', sent)).status).toBe(201);
    expect((await technician.post('/entry-groups', certificate)).body).toMatchObject({
      status: 403,
      errors: [{ code: 'kindOfTheOffice', path: '/kind', given: 'certificate' }],
    });
    expect((await ledger.post(certificate)).body.flags).toMatchObject([
      { code: 'certificateDifference', subject: { place: 'reclaimer' }, massG: 100 },
    ]);
  });
});
