import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import table from '../../data/cylinder-filling.json';
import { cylinderLimit } from '../../shared/cylinder-fill/cylinder-limits.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, readingOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

const lb = (value: string) => ({ value, unit: 'lb' });
const recoveryCylinder = (fields: Record<string, unknown> = {}) =>
  ledger.cylinder(null, { kind: 'recovery', waterCapacity: lb('47.7'), ...fields });
const recovered = async (cylinderId: string, massG: string, refrigerant = 'R-410A', at = '2026-03-03T10:00:00Z') => {
  const unit = await ledger.unit('25000', null, { refrigerant });
  const entries = [massOf(massG, inUnit(unit.id), inCylinder(cylinderId), { refrigerant })];
  return groupOf('recovery', at, { unitId: unit.id, entries });
};
const view = async (id: string) => (await ledger.client.get(`/cylinders/${id}`)).body;
const codes = (flags: { code: string }[]) => flags.map(({ code }) => code);

describe('A low-pressure recovery cylinder, meant for R-134a, 260 psig, WC 47.7 lb', () => {
  const meantForR134a = () => recoveryCylinder({ refrigerant: 'R-134a', servicePressureKPaGauge: 1793 });

  it('takes R-410A, recovered into it, not without its reason, and then says that it does not bear it', async () => {
    const cylinder = await meantForR134a();
    expect(await view(cylinder.id)).toMatchObject({
      pressureRatingHolds: true,
      limitG: 20887.046,
      stampedLimitG: null,
    });
    const body = await recovered(cylinder.id, '19000');

    expect((await ledger.post(body)).body).toMatchObject({
      status: 422,
      code: 'reasonRequired',
      errors: [
        // 0.8 x 47.7 lb x 1.0589 = 40.41 lb.
        { code: 'reasonForPastLimit', given: '19000', allowed: '18328.59' },
        { code: 'reasonForPressure', path: '/reason', given: 'R-410A' },
      ],
    });
    const answer = await posted(ledger.client, { ...body, reason: 'nothing else on the roof' });
    expect(codes(answer.body.flags).toSorted()).toEqual(['cylinderOverLimit', 'cylinderPressureTooHigh']);
    expect(answer.body.flags[1].message).toContain('R-410A');
    expect(await view(cylinder.id)).toMatchObject({ pressureRatingHolds: false, limitG: 18328.59, mixed: false });
  });

  it('takes R-134a without a word', async () => {
    const cylinder = await meantForR134a();
    expect((await ledger.post(await recovered(cylinder.id, '19000', 'R-134a'))).status).toBe(201);
  });

  it('asks for every further fill, not for what is only said to be in it', async () => {
    const cylinder = await meantForR134a();
    await posted(ledger.client, { ...(await recovered(cylinder.id, '500')), reason: 'nothing else on the roof' });
    expect((await ledger.post(await recovered(cylinder.id, '500'))).body.code).toBe('reasonRequired');
    const reading = readingOf(cylinder.id, ledger.scale.id, 'only', 520);
    const weighed = groupOf('weighing', '2026-03-04T10:00:00Z', { readings: [reading] });
    expect((await ledger.post(weighed)).status).toBe(201);
    const opening = groupOf('opening', '2026-03-04T10:00:00Z', {
      entries: [massOf('500', { place: 'opening' }, inCylinder((await meantForR134a()).id), { howKnown: 'estimated' })],
    });
    const said = await posted(ledger.client, opening);
    expect(codes(said.body.flags)).toEqual(['cylinderPressureTooHigh']);
  });
});

describe('A mixed cylinder', () => {
  it('is held to the limit of the lightest that is in it: R-410A with R-32, WC 47.7 lb, 36.67 lb', async () => {
    const cylinder = await recoveryCylinder({ refrigerant: 'R-410A' });
    await posted(ledger.client, await recovered(cylinder.id, '16000'));
    const second = await recovered(cylinder.id, '500', 'R-32');
    await posted(ledger.client, { ...second, reason: 'took the wrong cylinder' });
    const { limitG, mixed } = await view(cylinder.id);
    expect(mixed).toBe(true);
    expect(limitG / 453.59237).toBeCloseTo(36.67, 2);

    const more = await recovered(cylinder.id, '200');
    expect((await ledger.post(more)).body.errors).toMatchObject([
      { code: 'reasonForPastLimit', given: '16700', allowed: '16634.204' },
    ]);
  });
});

describe('The database', () => {
  it('holds what it lets pass to the same limit, for every refrigerant, and refuses no reason that was not asked for', async () => {
    const densities = await app.database.query<{ refrigerant: string; density: number }>(
      'superuser',
      'select r as refrigerant, filling_density(r)::float8 as density from unnest($1::text[]) r',
      [table.figures.map(({ refrigerant }) => refrigerant)],
    );
    expect(densities).toEqual(
      table.figures.map((row) => ({ refrigerant: row.refrigerant, density: row.liquidDensityKgM3At25C })),
    );
    const cylinder = await recoveryCylinder({ refrigerant: 'R-32' });
    expect((await ledger.post(await recovered(cylinder.id, '18328.59'))).status).toBe(201);
    const [limit] = await app.database.query<{ limit: string }>(
      'superuser',
      'select cylinder_limit(c)::text as limit from cylinder c where id = $1',
      [cylinder.id],
    );
    const stamps = {
      kind: 'recovery' as const,
      refrigerant: 'R-32',
      stampedLimitMicrograms: null,
      waterCapacityMicrograms: 21_636_356_049n,
    };
    expect(BigInt(limit?.limit ?? 0)).toBe(cylinderLimit(stamps, ['R-410A']));
  });
});

/** Source: 49 CFR 180.205(c), case D04. */
describe('A cylinder whose re-test is overdue', () => {
  it('is filled not without its reason, and flagged until it is empty', async () => {
    const cylinder = await recoveryCylinder({ retestDue: '2026-02-28' });
    const body = await recovered(cylinder.id, '500');
    expect((await ledger.post(body)).body).toMatchObject({
      code: 'reasonRequired',
      errors: [{ code: 'reasonForRetest', path: '/reason' }],
    });
    const answer = await posted(ledger.client, { ...body, reason: 'the only one on the roof' });
    expect(codes(answer.body.flags)).toEqual(['cylinderFilledPastRetest']);

    const unit = await ledger.unit('0.5', null);
    const out = groupOf('refill', '2026-03-04T10:00:00Z', {
      unitId: unit.id,
      entries: [massOf('500', inCylinder(cylinder.id), inUnit(unit.id))],
      statements: [{ about: 'unit', id: unit.id, is: 'notKnown' }],
    });
    await posted(ledger.client, out);
    const flags = (await ledger.client.get(`/flags?cylinderId=${cylinder.id}`)).body.items;
    expect(flags).toMatchObject([{ code: 'cylinderFilledPastRetest', closedBy: out.groupId }]);
  });

  it('is one from the month after: filled on any day of the month that is due, and used after it, as ever', async () => {
    const cylinder = await recoveryCylinder({ retestDue: '2026-03-01' });
    const answer = await posted(ledger.client, await recovered(cylinder.id, '500'));
    expect(answer.body.flags).toEqual([]);
    const unit = await ledger.unit('100', null);
    const used = groupOf('refill', '2026-04-04T10:00:00Z', {
      unitId: unit.id,
      entries: [massOf('100', inCylinder(cylinder.id), inUnit(unit.id))],
      statements: [{ about: 'unit', id: unit.id, is: 'notKnown' }],
    });
    expect((await ledger.post(used)).status).toBe(201);
  });
});
