import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, siteOf, startLedger } from '../support/ledger.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const MOVED = '2026-03-10T12:00:00Z';

/** A unit at one customer's site, and the site of another customer, in another time zone, that it moves to. */
async function beforeTheMove() {
  const ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500');
  const unit = await ledger.unit('1290', '1290');
  const bakery = await ledger.made('/customers', { id: uuid(), name: 'Harbour Bakery' });
  const quay = await ledger.made('/sites', { ...siteOf(bakery.id), name: 'Quay 4', timeZone: 'Europe/Madrid' });
  return { ledger, cylinder, unit, bakery, quay };
}
type World = Awaited<ReturnType<typeof beforeTheMove>>;

const move = ({ unit, quay }: World, validFrom = MOVED) => ({
  path: `/units/${unit.id}/sites`,
  body: { id: uuid(), siteId: quay.id, validFrom },
});
const moved = async (world: World, validFrom = MOVED) => {
  const { path, body } = move(world, validFrom);
  await posted(world.ledger.client, body, path);
};
/** 100 g or so into a unit at full charge: by rule as much was lost before. */
const refill = async ({ ledger, cylinder, unit }: World, massG: string, at: string) => {
  const group = groupOf('refill', at, {
    unitId: unit.id,
    entries: [massOf(massG, inCylinder(cylinder.id), inUnit(unit.id))],
    statements: [{ about: 'unit', id: unit.id, is: 'full' }],
  });
  await posted(ledger.client, group);
  return group.groupId;
};
const lostBySite = async (client: TestClient): Promise<Record<string, number>> => {
  const { body } = await client.get('/emissions?by=site');
  const lines = body.lines as { label: string; totalG: number }[];
  return Object.fromEntries(lines.map(({ label, totalG }) => [label, totalG]));
};
const readerOf = async ({ firm }: Ledger, siteId: string) =>
  app.signIn(await app.addPerson(['reader'], { firmId: firm.id, siteIds: [siteId] }));
const groupsSeenBy = async (client: TestClient): Promise<string[]> => {
  const { body } = await client.get('/entries?limit=200');
  return [...new Set((body.items as { groupId: string }[]).map(({ groupId }) => groupId))].sort();
};

describe('A unit that is moved', () => {
  it('stands at its new site from then on, in one more version of the unit, with a record of both', async () => {
    const world = await beforeTheMove();
    const { ledger, unit, quay, bakery } = world;
    const { path, body } = move(world);
    const answer = await posted(ledger.client, body, path);
    expect(answer.body).toEqual({
      id: body.id,
      unitId: unit.id,
      siteId: quay.id,
      siteName: 'Quay 4',
      customerId: bakery.id,
      customerName: 'Harbour Bakery',
      validFrom: '2026-03-10T12:00:00.000Z',
    });
    expect((await ledger.client.get(`/units/${unit.id}`)).body).toMatchObject({
      siteId: quay.id,
      customerName: 'Harbour Bakery',
      version: 2,
      book: { known: true, massG: 1290 },
    });
    const history = (await ledger.client.get(path)).body.items as { siteName: string }[];
    expect(history.map(({ siteName }) => siteName)).toEqual(['Quay 4', 'Mill Lane']);
    const records = await app.database.query<{ noun: string; version: number; after: object }>(
      'superuser',
      `select noun, version, content::jsonb -> 'after' as after from journal_record
        where firm_id = $1 and (subject_id = $2 or (subject_id = $3 and version = 2)) order by sequence`,
      [ledger.firm.id, body.id, unit.id],
    );
    expect(records).toMatchObject([
      { noun: 'unit', version: 2, after: { siteId: quay.id } },
      { noun: 'unitSite', version: 1, after: { unitId: unit.id, siteId: quay.id } },
    ]);
  });

  it('is moved once however often it is sent, and not to nowhere, to where it stands, or tomorrow', async () => {
    const world = await beforeTheMove();
    const { ledger, unit } = world;
    const { path, body } = move(world);
    const first = await posted(ledger.client, body, path);
    const again = await ledger.client.post(path, body);
    expect([again.status, again.body]).toEqual([200, first.body]);
    expect((await ledger.client.post(path, { ...body, siteId: ledger.site.id })).body.code).toBe('idReused');

    const refusal = async (change: object) => {
      const { status, body: problem } = await ledger.client.post(path, { ...body, id: uuid(), ...change });
      return [status, problem.errors?.[0]?.path, problem.errors?.[0]?.code];
    };
    expect(await refusal({})).toEqual([422, '/siteId', 'standsThereAlready']);
    expect(await refusal({ siteId: uuid() })).toEqual([422, '/siteId', 'notKnownHere']);
    const future = { siteId: ledger.site.id, validFrom: '2027-01-01T00:00:00Z' };
    expect(await refusal(future)).toEqual([422, '/validFrom', 'inFuture']);
    expect((await ledger.client.post(`/units/${uuid()}/sites`, { ...body, id: uuid() })).status).toBe(404);
    const other = await startLedger(app);
    expect((await other.client.post(path, { ...body, id: uuid() })).status).toBe(404);
    expect((await ledger.client.get(`/units/${unit.id}`)).body.version).toBe(2);
  });

  it('is moved by whoever works on it, not by a reader', async () => {
    const world = await beforeTheMove();
    const { path, body } = move(world);
    const as = async (role: 'technician' | 'reader') =>
      app.signIn(await app.addPerson([role], { firmId: world.ledger.firm.id }));
    expect((await (await as('reader')).post(path, body)).status).toBe(403);
    expect((await (await as('technician')).post(path, body)).status).toBe(201);
  });

  it('leaves what happened before at the site before, also what is sent late; the book goes with it', async () => {
    const world = await beforeTheMove();
    const { ledger, unit, quay, bakery } = world;
    await refill(world, '100', '2026-03-02T10:00:00Z');
    await moved(world);
    const after = await refill(world, '50', '2026-03-20T10:00:00Z');
    await refill(world, '20', '2026-03-05T10:00:00Z');

    expect(await lostBySite(ledger.client)).toEqual({ 'Mill Lane': 120, 'Quay 4': 50 });
    const byCustomer = (await ledger.client.get('/emissions?by=customer')).body.lines;
    expect(byCustomer).toMatchObject([
      { label: 'Wexcombe Mill', totalG: 120 },
      { key: bakery.id, label: 'Harbour Bakery', totalG: 50 },
    ]);
    expect(await ledger.bookG(unit.id)).toBe(1290);
    expect((await ledger.client.get(`/entry-groups/${after}`)).body.timeZone).toBe(quay.timeZone);
  });

  it('may be told late: what was posted in between is read where it happened', async () => {
    const world = await beforeTheMove();
    const { ledger } = world;
    await refill(world, '100', '2026-03-02T10:00:00Z');
    const between = await refill(world, '50', '2026-03-20T10:00:00Z');
    expect(await lostBySite(ledger.client)).toEqual({ 'Mill Lane': 150 });
    await moved(world);
    expect(await lostBySite(ledger.client)).toEqual({ 'Mill Lane': 100, 'Quay 4': 50 });
    expect((await ledger.client.get(`/entry-groups/${between}`)).body.timeZone).toBe('Europe/Madrid');
  });

  it('goes out of the sight of who reads the site before, who keeps seeing what happened there', async () => {
    const world = await beforeTheMove();
    const { ledger, unit, quay } = world;
    const [here, there] = [await readerOf(ledger, ledger.site.id), await readerOf(ledger, quay.id)];
    const before = await refill(world, '100', '2026-03-02T10:00:00Z');
    const between = await refill(world, '50', '2026-03-20T10:00:00Z');
    const opening = (await groupsSeenBy(here)).filter((id) => id !== before && id !== between);
    expect([opening.length, await groupsSeenBy(there)]).toEqual([1, []]);

    await moved(world);
    const after = await refill(world, '30', '2026-03-25T10:00:00Z');
    expect(await groupsSeenBy(here)).toEqual([...opening, before].sort());
    expect(await groupsSeenBy(there)).toEqual([between, after].sort());
    expect((await here.get(`/units/${unit.id}`)).status).toBe(404);
    expect((await there.get(`/units/${unit.id}`)).body).toMatchObject({ siteId: quay.id, book: { massG: 1290 } });
    const status = async (client: TestClient, id: string) => (await client.get(`/entry-groups/${id}`)).status;
    expect([await status(here, before), await status(here, between), await status(here, after)]).toEqual([
      200, 404, 404,
    ]);
    expect([await status(there, before), await status(there, between), await status(there, after)]).toEqual([
      404, 200, 200,
    ]);
    expect(await lostBySite(there)).toEqual({ 'Quay 4': 80 });
    expect(await lostBySite(here)).toEqual({ 'Mill Lane': 100 });
    const sites = (await there.get(`/units/${unit.id}/sites`)).body.items as { siteName: string }[];
    expect(sites.map(({ siteName }) => siteName)).toEqual(['Quay 4']);
  });

  it('keeps its jobs at the site where they were opened', async () => {
    const world = await beforeTheMove();
    const { ledger, unit } = world;
    const jobAt = (openedAt: string) =>
      ledger.made('/jobs', { id: uuid(), unitId: unit.id, kind: 'install', openedAt });
    const [old, moving] = [await jobAt('2026-03-01T08:00:00Z'), await jobAt('2026-03-10T13:00:00Z')];
    await moved(world);
    const siteOfJob = async (id: string) => (await ledger.client.get(`/jobs/${id}`)).body.siteName;
    expect([await siteOfJob(old.id), await siteOfJob(moving.id)]).toEqual(['Mill Lane', 'Quay 4']);
  });
});
