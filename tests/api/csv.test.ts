import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { inCylinder, inUnit, type Ledger, massOf, posted, startLedger, weighIn } from '../support/ledger.ts';
import { linesByName, readCsv } from '../support/read-csv.ts';

let app: TestApp;
let ledger: Ledger;
let unitId: string;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500', { tag: '=HYPERLINK("http://example.test")' });
  const unit = await ledger.unit('1250', '1500', { tag: '@unit, "quoted"' }, 'factory');
  unitId = unit.id;
  await posted(ledger.client, {
    ...weighIn(ledger, { cylinderId: cylinder.id, unitId, beforeG: 9500, afterG: 9410 }),
    reason: '+1+1',
  });
  await posted(ledger.client, {
    ...weighIn(ledger, { cylinderId: cylinder.id, unitId, beforeG: 9410, afterG: 9400 }, {}, '2026-03-02T11:00:00Z'),
    readings: [],
    entries: [massOf('0', inCylinder(cylinder.id), inUnit(unitId), { mass: { value: '3.2', unit: 'oz' } })],
    reason: 'two lines\nof text',
  });
});
afterAll(() => app.close());

const asObjects = linesByName;

describe('The log as CSV', () => {
  it('holds the same entries as the list, in its order, as filtered', async () => {
    for (const query of ['', 'sort=occurredAt', `unitId=${unitId}&kind=extraCharge`, 'month=2026-03&sort=sequence']) {
      const listed = (await ledger.client.get(`/entries?limit=200&${query}`)).body.items;
      const answer = await ledger.client.get(`/entries.csv?${query}`);
      expect(answer.status).toBe(200);
      const lines = asObjects(answer.body);
      expect(lines.map(({ entryId }) => entryId)).toEqual(listed.map(({ id }: { id: string }) => id));
      expect(lines.map(({ massG }) => Number(massG))).toEqual(listed.map(({ massG }: { massG: number }) => massG));
    }
  });

  it('writes masses exactly, times in UTC, and names its file', async () => {
    const answer = await ledger.client.get('/entries.csv?kind=extraCharge');
    expect(answer.headers.get('content-type')).toBe('text/csv; charset=utf-8');
    expect(answer.headers.get('content-disposition')).toBe('attachment; filename=log-2026-11-30.csv');
    expect(asObjects(answer.body)[0]).toMatchObject({
      massG: '90.718474',
      typedValue: '3.2',
      typedUnit: 'oz',
      occurredAt: '2026-03-02T11:00:00Z',
      bookingMonth: '2026-03',
      reason: 'two lines\nof text',
    });
  });

  it('has heads in the words of who takes it out, with their unit, and says yes and no', async () => {
    const { head, lines } = readCsv((await ledger.client.get('/entries.csv?kind=extraCharge')).body);
    expect(head).toEqual(expect.arrayContaining(['no.', 'when (UTC)', 'mass (g)', 'recorded by', 'at least']));
    expect(lines.map((line) => [line.late, line['at least'], line['worked out by the program']])).toEqual([
      ['no', 'no', 'no'],
      ['no', 'no', 'no'],
    ]);
    const spanish = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));
    const { version } = (await spanish.get('/me')).body;
    await spanish.patch('/me', version, { preferences: { locale: 'es-ES' } });
    const inSpanish = readCsv((await spanish.get('/entries.csv?kind=extraCharge')).body);
    expect(inSpanish.head).toEqual(expect.arrayContaining(['n.º', 'cuándo (UTC)', 'masa (g)', 'registrado por']));
    expect(inSpanish.lines[0]).toMatchObject({ tardío: 'no', 'masa (g)': '90.718474' });
  });

  it('defuses every cell that a spreadsheet would run as a formula', async () => {
    const cells = readCsv((await ledger.client.get('/entries.csv')).body).lines.flatMap((line) => Object.values(line));
    expect(cells.filter((cell) => /^[=+@\t\r-]/.test(cell))).toEqual([]);
    expect(cells).toEqual(expect.arrayContaining([`'=HYPERLINK("http://example.test")`, `'@unit, "quoted"`, `'+1+1`]));
  });

  it('lets no filter write into its statement', async () => {
    const refused = await ledger.client.get(`/entries.csv?refrigerant=${encodeURIComponent("R-32' or '1'='1")}`);
    expect(refused.status).toBe(200);
    expect(asObjects(refused.body)).toEqual([]);
    expect((await ledger.client.get(`/entries.csv?unitId=${encodeURIComponent("x' or true --")}`)).status).toBe(422);
  });

  it('is for managers whole, for a technician their own work, for a reader what a reader sees', async () => {
    const technician = await app.addPerson(['technician'], { firmId: ledger.firm.id });
    const client = await app.signIn(technician);
    expect((await client.get('/entries.csv')).body).toMatchObject({
      status: 403,
      errors: [{ code: 'ownEntriesOnly', path: '/personId', allowed: technician.id }],
    });
    const own = await client.get(`/entries.csv?personId=${technician.id}`);
    expect({ status: own.status, lines: asObjects(own.body) }).toEqual({ status: 200, lines: [] });

    const nowhere = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [uuid()] }));
    expect(asObjects((await nowhere.get('/entries.csv')).body)).toEqual([]);
    const here = await app.signIn(
      await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [ledger.site.id] }),
    );
    const lines = asObjects((await here.get('/entries.csv?kind=extraCharge')).body);
    expect(lines).toHaveLength(2);
    // A reader of some sites learns no cylinder's tag.
    expect(lines[0]).toMatchObject({ from: 'cylinder', unit: `'@unit, "quoted"` });
    expect((await app.visitor().get('/entries.csv')).status).toBe(401);
  });

  it('leaves no connection behind when somebody hangs up in the middle', async () => {
    const hangUp = async () => {
      const abort = new AbortController();
      const request = fetch(`${app.url}/api/v1/entries.csv`, {
        headers: { Cookie: String(ledger.client.cookie) },
        signal: abort.signal,
      });
      setTimeout(() => abort.abort(), 1);
      await request.then((answer) => answer.text()).catch(() => undefined);
    };
    for (let index = 0; index < 12; index++) await hangUp();
    expect((await ledger.client.get('/entries.csv')).status).toBe(200);
    const open = async () =>
      (
        await app.database.query<{ n: number }>(
          'superuser',
          `SELECT count(*)::int AS n FROM pg_stat_activity WHERE datname = current_database() AND state LIKE 'idle in transaction%'`,
        )
      )[0]?.n;
    // What was hung up on ends behind the last answer.
    await expect.poll(open).toBe(0);
  });
});
