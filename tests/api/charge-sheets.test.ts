import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

/** An invented unit: R-32, 1,200 g factory charge, 7.5 m pre-charged, 20 g/m, 3 to 25 m; 12.0 m gives 90 g and 1,290 g. */
const request = (lengthM = 12) => ({
  job: 'newInstall',
  basis: {
    refrigerant: 'R-32',
    factoryChargeG: 1200,
    precharge: { scope: 'system', lengthM: 7.5 },
    rate: { kind: 'flat', gPerM: 20 },
    limits: { minLengthM: 3, maxLengthM: 25 },
  },
  lineSet: { branches: [{ name: 'A', liquidOdMm: 6.35, gasOdMm: 9.52, lengthM }] },
  gwpSet: 'US-AIM',
});
const sheet = (fields: Record<string, unknown> = {}) => ({
  id: uuid(),
  request: request(),
  manual: { document: 'Installation manual', page: '31' },
  room: { areaM2: 18, mounting: 'wall' },
  ...fields,
});
const unit = () => ledger.unit('1200', '1290', { refrigerant: 'R-32' }, 'factory');

describe('A charge sheet', () => {
  it('holds inputs, result and versions as the server works them out, and its record in the chain', async () => {
    const { id: unitId } = await unit();
    const body = sheet();
    const answer = await ledger.client.post(`/units/${unitId}/charge-sheets`, body);

    expect(answer.status).toBe(201);
    expect(answer.body).toMatchObject({
      unitId,
      madeBy: ledger.owner.id,
      madeAt: '2026-11-30T15:00:00.000Z',
      request: { basis: { factoryChargeG: 1200 } },
      result: { extraG: 90, totalG: 1290, weighInG: 90, recoverG: 0 },
      manual: { document: 'Installation manual', page: '31' },
      room: { areaM2: 18, mounting: 'wall' },
    });
    expect(Object.keys(answer.body.result.versions)).toContain('refrigerants');
    const [record] = await app.database.query<{ content: string; hash: string }>(
      'superuser',
      `SELECT content, encode(sha256(convert_to(content, 'UTF8')), 'hex') AS hash FROM journal_record
        WHERE noun = 'chargeSheet' AND subject_id = $1`,
      [body.id],
    );
    expect(answer.body.recordHash).toBe(record?.hash);
    expect(JSON.parse(String(record?.content)).after.result.extraG).toBe('90');
  });

  it('is made once: the same request again answers the same, another under its id is refused', async () => {
    const { id: unitId } = await unit();
    const body = sheet();
    const first = await ledger.client.post(`/units/${unitId}/charge-sheets`, body);
    app.clock.advance(60_000);
    const again = await ledger.client.post(`/units/${unitId}/charge-sheets`, body);
    expect({ status: again.status, body: again.body }).toEqual({ status: 200, body: first.body });
    const other = await ledger.client.post(`/units/${unitId}/charge-sheets`, { ...body, request: request(13) });
    expect([other.status, other.body.code]).toEqual([409, 'idReused']);
  });

  it('is not made where the engine refuses: limit and value are named, there is no figure', async () => {
    const { id: unitId } = await unit();
    const body = sheet({ request: request(26) });
    const answer = await ledger.client.post(`/units/${unitId}/charge-sheets`, body);
    expect(answer.status).toBe(422);
    expect(answer.body.errors).toMatchObject([{ path: '/request/lineSet/branches', given: 26, allowed: 25 }]);
    expect((await ledger.client.get(`/charge-sheets/${body.id}`)).status).toBe(404);
  });

  /**
   * 1,200 + 42.5 x 20 = 2,050 g of R-32 is above m1 (1,842 g); 3 m2 at 1.8 m take 0.75 x 0.307 x 1.8 x 3 = 1.243 kg, so
   * m1 (IEC 60335-2-40:2018, Annex GG, linear cap). The manual's own table goes before the standard.
   */
  it('is not made over what the smallest room takes; the manual’s own table decides where there is one', async () => {
    const { id: unitId } = await unit();
    const long = request(50);
    long.basis.limits.maxLengthM = 60;
    const inRoom = (room: Record<string, unknown>) => sheet({ request: long, room: { mounting: 'wall', ...room } });
    const post = (body: object) => ledger.client.post(`/units/${unitId}/charge-sheets`, body);

    const over = inRoom({ areaM2: 3 });
    const answer = await post(over);
    expect(answer.status).toBe(422);
    expect(answer.body.errors).toMatchObject([{ code: 'overRoomLimit', path: '/room', given: 2050, allowed: 1842 }]);
    expect((await ledger.client.get(`/charge-sheets/${over.id}`)).status).toBe(404);

    expect((await post(inRoom({ areaM2: 18 }))).status).toBe(201);
    const table = (minimumAreaM2: number) => [{ chargeG: 2100, minimumAreaM2 }];
    const allowed = await post(inRoom({ areaM2: 3, manualTable: table(2.5) }));
    expect([allowed.status, allowed.body.room?.manualTable]).toEqual([201, table(2.5)]);
    expect((await post(inRoom({ areaM2: 18, manualTable: table(20) }))).body.errors).toMatchObject([
      { code: 'overRoomLimit', path: '/room' },
    ]);
    expect(
      (await post(inRoom({ areaM2: 18, manualTable: [{ chargeG: 2000, minimumAreaM2: 5 }] }))).body.errors,
    ).toMatchObject([{ code: 'tableEndsShort', path: '/room/manualTable', given: 2050, allowed: 2000 }]);
  });

  it('is not made for another refrigerant than the unit’s: its figure would be weighed in of the wrong one', async () => {
    const { id: unitId } = await ledger.unit('1200', '1290', { refrigerant: 'R-410A' }, 'factory');
    const answer = await ledger.client.post(`/units/${unitId}/charge-sheets`, sheet());
    expect(answer.status).toBe(422);
    expect(answer.body.errors).toMatchObject([
      { code: 'notTheUnitsRefrigerant', path: '/request/basis/refrigerant', given: 'R-32', allowed: 'R-410A' },
    ]);
  });

  it('is not made for a job of another unit, nor for one that is not known here', async () => {
    const { id: unitId } = await unit();
    const other = await unit();
    const jobOf = (of: string) =>
      ledger.made('/jobs', { id: uuid(), unitId: of, kind: 'install', openedAt: '2026-11-30T08:00:00Z' });
    const [own, anothers] = [await jobOf(unitId), await jobOf(other.id)];
    const post = (jobId: string) => ledger.client.post(`/units/${unitId}/charge-sheets`, sheet({ jobId }));

    const answer = await post(anothers.id);
    expect(answer.status).toBe(422);
    expect(answer.body.errors).toMatchObject([{ code: 'ofAnotherUnit', path: '/jobId', given: anothers.id }]);
    expect((await post(uuid())).body.errors).toMatchObject([{ code: 'notKnownHere', path: '/jobId' }]);
    expect((await ledger.client.get(`/units/${unitId}/charge-sheets`)).body.items).toEqual([]);
    expect((await post(own.id)).body).toMatchObject({ jobId: own.id });
  });

  it('cannot be changed or removed, whoever asks', async () => {
    const { id: unitId } = await unit();
    const body = sheet();
    await ledger.client.post(`/units/${unitId}/charge-sheets`, body);
    expect((await ledger.client.send('PATCH', `/charge-sheets/${body.id}`, { body: {} })).status).toBe(405);
    expect((await ledger.client.delete(`/charge-sheets/${body.id}`)).status).toBe(405);
    await expect(
      app.database.query('superuser', 'UPDATE charge_sheet SET room = NULL WHERE id = $1', [body.id]),
    ).rejects.toThrow('append_only');
  });

  it('is listed with its unit, newest first, and belongs to the firm', async () => {
    const { id: unitId } = await unit();
    const [first, second] = [sheet(), sheet({ request: request(14) })];
    await ledger.client.post(`/units/${unitId}/charge-sheets`, first);
    app.clock.advance(1000);
    await ledger.client.post(`/units/${unitId}/charge-sheets`, second);
    const { body } = await ledger.client.get(`/units/${unitId}/charge-sheets`);
    expect(body.items.map(({ id }: { id: string }) => id)).toEqual([second.id, first.id]);

    const other = await startLedger(app);
    expect((await other.client.get(`/charge-sheets/${first.id}`)).status).toBe(404);
    expect((await other.client.get(`/units/${unitId}/charge-sheets`)).status).toBe(404);
    expect((await other.client.post(`/units/${unitId}/charge-sheets`, sheet())).status).toBe(404);
  });

  it('says its steps in the language of who made it', async () => {
    const { id: unitId } = await unit();
    const client = await app.signIn(ledger.owner);
    await client.patch('/me', null, { preferences: { locale: 'es-US' } });
    const { body } = await client.post(`/units/${unitId}/charge-sheets`, sheet());
    const english = await ledger.client.post('/calculations/charge', request(), {
      headers: { 'Accept-Language': 'en' },
    });
    expect(body.result.steps.map(({ value }: { value: number }) => value)).toEqual(
      english.body.steps.map(({ value }: { value: number }) => value),
    );
    expect(body.result.steps[0].label).not.toBe(english.body.steps[0].label);
    await client.patch('/me', null, { preferences: { locale: 'en-US' } });
  });
});
