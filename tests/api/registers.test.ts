import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { type Ledger, siteOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

interface RegisterRecord {
  content: {
    version: number;
    before: Record<string, unknown> | null;
    after: Record<string, unknown>;
    recordedBy: string;
  };
}
const recordsOf = async (noun: string, subjectId: string) => {
  const rows = await app.database.query<{ content: string }>(
    'superuser',
    'SELECT content FROM journal_record WHERE noun = $1 AND subject_id = $2 ORDER BY version',
    [noun, subjectId],
  );
  return rows.map(({ content }) => JSON.parse(content) as RegisterRecord['content']);
};
const wordsOf = (recordField: string) =>
  app.database.query<{ content: string }>(
    'superuser',
    `SELECT content FROM personal_text WHERE field = $1 AND firm_id = $2`,
    [recordField, ledger.firm.id],
  );

/** Each register with a body that makes a row, a change, and a field that is not allowed. */
const registers = () => {
  const customerId = uuid();
  return [
    {
      path: '/customers',
      noun: 'customer',
      body: { id: customerId, name: 'Ada Firth', email: 'ada@example.test', phone: null },
      change: { name: 'Ada Firth-Lowe' },
    },
    { path: '/sites', noun: 'site', body: siteOf(ledger.customer.id), change: { altitudeM: 1600.5 } },
    {
      path: '/parties',
      noun: 'party',
      body: { id: uuid(), kind: 'reclaimer', name: 'Clear Gas' },
      change: { note: 'weekdays only' },
    },
    {
      path: '/tools',
      noun: 'tool',
      body: { id: uuid(), kind: 'scale', name: 'Scale 2', scale: { resolutionG: 2.5, spanErrorRelative: 0.001 } },
      change: { lastCheckedOn: '2026-11-01' },
    },
  ];
};

describe('A register', () => {
  it('makes a row once: the same request again answers the same, other content under its id is refused', async () => {
    for (const { path, body, change } of registers()) {
      const first = await ledger.client.post(path, body);
      expect(first.status, path).toBe(201);
      const sequence = await ledger.sequence();

      const again = await ledger.client.post(path, body);
      expect({ status: again.status, body: again.body }, path).toEqual({ status: 200, body: first.body });
      const other = await ledger.client.post(path, { ...body, ...change });
      expect([other.status, other.body.code], path).toEqual([409, 'idReused']);
      expect(await ledger.sequence(), path).toBe(sequence);
    }
  });

  it('still knows the first request after the row was changed', async () => {
    for (const { path, body, change } of registers()) {
      await ledger.client.post(path, body);
      const changed = await ledger.client.patch(`${path}/${body.id}`, 1, change);
      expect(changed.body, path).toMatchObject({ ...change, version: 2 });
      const again = await ledger.client.post(path, body);
      expect({ status: again.status, body: again.body }, path).toEqual({ status: 200, body: changed.body });
    }
  });

  it('chains what stood before and after each change, numbers as decimals, in the transaction of the change', async () => {
    for (const { path, noun, body, change } of registers()) {
      await ledger.client.post(path, body);
      await ledger.client.patch(`${path}/${body.id}`, 1, change);
      const [made, changed] = await recordsOf(noun, body.id);
      expect(made, path).toMatchObject({ version: 1, before: null, recordedBy: ledger.owner.id });
      expect(changed, path).toMatchObject({ version: 2, before: made?.after });
      expect(changed?.after, path).not.toEqual(made?.after);
    }
    const [site] = registers().filter(({ noun }) => noun === 'site');
    await ledger.client.post('/sites', site?.body);
    await ledger.client.patch(`/sites/${site?.body.id}`, 1, { altitudeM: 1600.5 });
    expect((await recordsOf('site', String(site?.body.id)))[1]?.after).toMatchObject({ altitudeM: '1600.5' });
  });

  it('keeps words that name a person beside the chain, which holds only their salted hash', async () => {
    const id = uuid();
    await ledger.client.post('/customers', { id, name: 'Quill Marrable', email: 'quill@example.test' });
    await ledger.client.patch(`/customers/${id}`, 1, { email: null });

    const [made, changed] = await recordsOf('customer', id);
    expect(JSON.stringify([made, changed])).not.toMatch(/quill/i);
    expect(made?.after).toEqual({
      nameHash: expect.stringMatching(/^[0-9a-f]{64}$/),
      emailHash: expect.stringMatching(/^[0-9a-f]{64}$/),
      phoneHash: null,
      noteHash: null,
    });
    // What did not change keeps its hash, so that erasing the words once erases them everywhere.
    expect(changed?.after).toEqual({ ...made?.after, emailHash: null });
    expect((await wordsOf('name')).filter(({ content }) => content === 'Quill Marrable')).toHaveLength(1);
  });

  it('changes only what the caller has seen: 428 without If-Match, 412 with an old version', async () => {
    const id = uuid();
    await ledger.client.post('/customers', { id, name: 'Wexcombe Dairy' });
    expect((await ledger.client.patch(`/customers/${id}`, null, { name: 'x' })).status).toBe(428);
    expect((await ledger.client.patch(`/customers/${id}`, 1, { name: 'Dairy' })).headers.get('etag')).toBe('"2"');
    expect((await ledger.client.patch(`/customers/${id}`, 1, { name: 'y' })).status).toBe(412);
    expect((await ledger.client.get(`/customers/${id}`)).body.name).toBe('Dairy');
  });

  it('makes no new version of a change that changes nothing', async () => {
    const id = uuid();
    await ledger.client.post('/customers', { id, name: 'Wexcombe Baths' });
    expect((await ledger.client.patch(`/customers/${id}`, 1, { name: 'Wexcombe Baths' })).body.version).toBe(1);
    expect(await recordsOf('customer', id)).toHaveLength(1);
  });

  it('says where a reference leads nowhere, and keeps nothing', async () => {
    const site = siteOf(uuid());
    expect((await ledger.client.post('/sites', site)).body).toMatchObject({
      status: 422,
      errors: [{ path: '/customerId', code: 'notKnownHere' }],
    });
    expect((await ledger.client.get(`/sites/${site.id}`)).status).toBe(404);
    const tool = { id: uuid(), kind: 'gauge', name: 'Gauge', heldBy: uuid() };
    expect((await ledger.client.post('/tools', tool)).body.errors).toMatchObject([{ path: '/heldBy' }]);
  });

  it('wants the accuracy of a scale, and of nothing else', async () => {
    const tool = (fields: object) => ledger.client.post('/tools', { id: uuid(), name: 'Tool', ...fields });
    expect((await tool({ kind: 'scale' })).body.errors).toMatchObject([{ path: '/scale', code: 'required' }]);
    expect((await tool({ kind: 'gauge', scale: { resolutionG: 5 } })).body.errors).toMatchObject([
      { path: '/scale', code: 'notForThisKind' },
    ]);
  });

  it('shows nothing of another firm, and no reader writes', async () => {
    const other = await startLedger(app);
    expect((await other.client.get(`/customers/${ledger.customer.id}`)).status).toBe(404);
    expect((await other.client.patch(`/sites/${ledger.site.id}`, 1, { altitudeM: 1 })).status).toBe(404);
    expect((await other.client.get('/customers')).body.items.map(({ id }: { id: string }) => id)).toEqual([
      other.customer.id,
    ]);
    const reader = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id }));
    for (const { path, body } of registers()) expect((await reader.post(path, body)).status, path).toBe(403);
  });
});

describe('A list', () => {
  it('comes in keyset pages that miss and repeat nothing, in the order asked for', async () => {
    const own = await startLedger(app);
    const names = Array.from({ length: 23 }, (_, index) => `Customer ${String(index % 7)}`);
    for (const name of names) await own.made('/customers', { id: uuid(), name });
    const seen: { id: string; name: string }[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const query: string = cursor === '' ? '' : `&cursor=${encodeURIComponent(cursor)}`;
      const { body } = await own.client.get(`/customers?limit=5&sort=-name${query}`);
      seen.push(...body.items);
      cursor = body.nextCursor;
    }
    expect(seen.map(({ name }) => name)).toEqual([...names, 'Wexcombe Mill'].sort().reverse());
    expect(new Set(seen.map(({ id }) => id)).size).toBe(24);
  });

  it('refuses a cursor of another sort, one that was tampered with, and filters that it does not have', async () => {
    const own = await startLedger(app);
    for (const name of ['a', 'b', 'c']) await own.made('/customers', { id: uuid(), name });
    const { body } = await own.client.get('/customers?limit=1');
    const codeOf = async (query: string) => (await own.client.get(`/customers?${query}`)).body.errors[0].code;

    expect(await codeOf(`limit=1&sort=-name&cursor=${body.nextCursor}`)).toBe('cursorNotValid');
    const [of, , id] = JSON.parse(Buffer.from(body.nextCursor, 'base64url').toString());
    const forged = Buffer.from(JSON.stringify([of, id, 'not a uuid'])).toString('base64url');
    expect(await codeOf(`limit=1&cursor=${forged}`)).toBe('cursorNotValid');
    expect(await codeOf('colour=red')).toBe('unknownKey');
    expect(await codeOf('limit=0')).toBe('tooSmall');
    expect(await codeOf('sort=id')).toBe('notAllowedValue');
  });

  it('finds units by tag, name, serial, address, site and customer, all words wanted, no wildcards', async () => {
    const own = await startLedger(app);
    const unit = await own.unit('1290', '1290', {
      tag: '0412',
      name: 'back bedroom 100%',
      serials: [{ part: 'outdoor', serial: 'QX-7741' }],
    });
    const other = await own.unit('1290', '1290', { tag: '0413', name: 'hall' });
    const found = async (search: string) =>
      (await own.client.get(`/units?search=${encodeURIComponent(search)}`)).body.items.map(
        ({ id }: { id: string }) => id,
      );

    for (const words of ['0412', 'BEDROOM', 'qx-77', 'back wexcombe', '100%'])
      expect(await found(words)).toEqual([unit.id]);
    expect(await found('mill lane')).toEqual([unit.id, other.id]);
    expect(await found('0412 hall')).toEqual([]);
    expect(await found('0_12')).toEqual([]);
    const byTag = await own.client.get('/cylinders?search=nothing');
    expect(byTag.body).toEqual({ items: [], nextCursor: null });
  });
});

describe('A job', () => {
  it('is opened for a unit and closed, not before it was opened', async () => {
    const unit = await ledger.unit('1290', '1290');
    const body = {
      id: uuid(),
      unitId: unit.id,
      kind: 'install',
      openedAt: '2026-03-02T08:00:00Z',
      title: 'Hang the head',
    };
    expect((await ledger.client.post('/jobs', body)).body).toMatchObject({ siteName: 'Mill Lane', closedAt: null });
    const close = (version: number, closedAt: string) => ledger.client.patch(`/jobs/${body.id}`, version, { closedAt });

    expect((await close(1, '2026-03-02T07:00:00Z')).body).toMatchObject({ status: 422, code: 'closedBeforeOpened' });
    expect((await close(1, '2026-03-02T17:00:00Z')).body).toMatchObject({
      version: 2,
      closedAt: '2026-03-02T17:00:00.000Z',
    });
    const listed = async (query: string) =>
      (await ledger.client.get(`/jobs?unitId=${unit.id}&${query}`)).body.items.map(({ id }: { id: string }) => id);
    expect(await listed('open=true')).toEqual([]);
    expect(await listed('open=false')).toEqual([body.id]);
  });
});

describe('Short lists to choose from', () => {
  it('are there without sign-in, with their version', async () => {
    const visitor = app.visitor();
    const { body } = await visitor.get('/reference/refrigerants');
    expect(body.items).toEqual(
      expect.arrayContaining([expect.objectContaining({ designation: 'R-32', safetyClass: 'A2L' })]),
    );
    expect(body.version).toMatch(/^\d{4}-\d\d-\d\d$/);
    expect((await visitor.get('/reference/tubes')).body.items.length).toBeGreaterThan(20);
    expect((await visitor.get('/reference/joints')).body.items.length).toBeGreaterThan(3);
  });
});
