import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ImportView } from '../../shared/imports/import.schema.ts';
import { registerRecord } from '../../shared/journal/record.schema.ts';
import type { TestApp } from '../support/app.ts';
import { CYLINDERS, errorsOf, guessed, HOW, importsOf, startImportApp, startImportLedger } from '../support/imports.ts';
import { type Ledger, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startImportApp();
});
afterAll(() => app.close());
const begin = async () => {
  ledger = await startImportLedger(app);
};
const { upload, ended, check, run, bring, headSequence } = importsOf(
  () => app,
  () => ledger,
);

const cylinderTable = (rows: number): string =>
  [
    'Tag,Kind,Refrigerant,Tare,Content',
    ...Array.from({ length: rows }, (_, row) => `C${row},refillable,R-32,7.6,${5 + (row % 7)}`),
  ].join('\n');

describe('An import', () => {
  it('is the office’s: readers and technicians are refused, and another firm finds nothing', async () => {
    await begin();
    const { body } = await upload('cylinders', CYLINDERS);
    for (const role of ['reader', 'technician'] as const) {
      const client = await app.signIn(await app.addPerson([role], { firmId: ledger.firm.id }));
      expect((await upload('cylinders', CYLINDERS, 'a.csv', client)).status).toBe(403);
      expect((await client.get(`/imports/${body.id}`)).status).toBe(403);
    }
    const manager = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));
    expect((await upload('cylinders', CYLINDERS, 'a.csv', manager)).status).toBe(201);
    const stranger = await startLedger(app);
    expect((await stranger.client.get(`/imports/${body.id}`)).status).toBe(404);
    expect((await stranger.client.post(`/imports/${body.id}/run`)).status).toBe(404);
  });

  it('needs its columns, and runs only once', async () => {
    await begin();
    const { body } = await upload('cylinders', CYLINDERS);
    const request = {
      columns: { tag: 0, nose: 1, kind: 40 },
      massUnit: 'kg',
      decimal: 'point',
      dateOrder: 'dmy',
      since: '2025-01-01',
    };
    const refused = await ledger.client.post(`/imports/${body.id}/check`, request);
    expect(refused.body.errors.map(({ path, code }: { path: string; code: string }) => [path, code])).toEqual([
      ['/columns/nose', 'unknownKey'],
      ['/columns/kind', 'tooLarge'],
      ['/columns/refrigerant', 'importColumnNeeded'],
      ['/columns/tare', 'importColumnNeeded'],
    ]);
    const done = await bring('cylinders', CYLINDERS);
    expect((await run(done)).made).toBe(2);
    expect(
      (
        await ledger.client.post(`/imports/${done.id}/check`, {
          ...request,
          columns: { tag: 0, kind: 1, refrigerant: 2, tare: 4 },
        })
      ).body.code,
    ).toBe('importDone');
  });

  it('is a record of the log with the file’s SHA-256, in the transaction of its rows; bringing in nothing is none', async () => {
    await begin();
    const done = await bring('cylinders', CYLINDERS);
    expect(done.sha256).toBe(createHash('sha256').update(CYLINDERS).digest('hex'));
    const records = () =>
      app.database.query<{ sequence: string; content: string; words: string }>(
        'superuser',
        `select j.sequence, j.content, t.content as words from journal_record j
          join personal_text t on t.firm_id = j.firm_id and t.record_id = j.record_id
          where j.firm_id = $1 and j.noun = 'import'`,
        [ledger.firm.id],
      );
    const [record, ...others] = await records();
    expect(others).toEqual([]);
    expect(record).toMatchObject({ sequence: String(done.recordSequence), words: 'table.csv' });
    expect(record?.content).not.toContain('table.csv');
    expect(registerRecord.parse(JSON.parse(String(record?.content)))).toMatchObject({
      noun: 'import',
      subjectId: done.id,
      recordedBy: ledger.owner.id,
      after: {
        kind: 'cylinders',
        sha256: done.sha256,
        rows: '2',
        made: '2',
        already: '0',
        readAs: { massUnit: 'kg', dateOrder: 'dmy', columns: { tag: 'Tag', tare: 'Tare' } },
      },
    });
    expect((await bring('cylinders', CYLINDERS)).recordSequence).toBeNull();
    expect(await records()).toHaveLength(1);
  });

  it('is told that a row which is here was read otherwise then', async () => {
    await begin();
    await bring('cylinders', CYLINDERS);
    const checked = await check('cylinders', CYLINDERS, { massUnit: 'lb' });
    expect(errorsOf(checked)).toEqual([[2, null, 'importReadOtherwise']]);
  });

  it('is stopped between two parts of its rows, and keeps nothing', async () => {
    await begin();
    const before = await headSequence();
    const table = cylinderTable(600);
    const read = await upload('cylinders', table);
    const request = { columns: guessed(read.body), ...HOW };
    const checking = await ledger.client.post<ImportView>(`/imports/${read.body.id}/check`, request);
    expect(checking.body.state).toBe('checking');
    const stopped = await ended(await ledger.client.post(`/imports/${read.body.id}/cancel`));
    expect([stopped.state, stopped.made]).toEqual(['cancelled', 0]);
    expect((await ledger.client.post(`/imports/${read.body.id}/run`)).body.code).toBe('importNotChecked');

    const checked = await ended(await ledger.client.post(`/imports/${read.body.id}/check`, request));
    expect([checked.state, checked.made]).toEqual(['checked', 600]);
    await ledger.client.post(`/imports/${read.body.id}/run`);
    const unkept = await ended(await ledger.client.post(`/imports/${read.body.id}/cancel`));
    expect([unkept.state, await headSequence()]).toEqual(['cancelled', before]);
  });

  it('of ten thousand rows is checked and brought in whole, with progress that rises', {
    timeout: 300_000,
  }, async () => {
    await begin();
    const read = await upload('cylinders', cylinderTable(10_000));
    const request = { columns: guessed(read.body), ...HOW };
    const path = `/imports/${read.body.id}`;
    const follow = async () => {
      const seen: number[] = [];
      for (;;) {
        const { body } = await ledger.client.get<ImportView>(path);
        if (body.state !== 'checking' && body.state !== 'running') return { body, seen };
        if (seen.at(-1) !== body.rowsDone) seen.push(body.rowsDone);
        await new Promise((resolve) => setTimeout(resolve, 50));
      }
    };
    const postMeanwhile = async () => {
      const customer = { id: crypto.randomUUID(), name: 'Meanwhile' };
      const statuses: number[] = [];
      do statuses.push((await ledger.client.post('/customers', customer)).status);
      while (statuses.at(-1) === 503);
      return statuses;
    };
    await ledger.client.post(`${path}/check`, request);
    const checked = await follow();
    expect([checked.body.state, checked.body.made, checked.body.errors]).toEqual(['checked', 10_000, []]);
    expect(checked.seen).toEqual(checked.seen.toSorted((a, b) => a - b));
    expect(checked.seen.filter((rows) => rows > 0 && rows < 10_000).length).toBeGreaterThan(2);
    await ledger.client.post(`${path}/run`);
    const [done, rival] = await Promise.all([follow(), postMeanwhile()]);
    // Whoever posts at the same time waits, or is told that the log is busy and comes through with the next try.
    expect(rival.filter((status) => status !== 503)).toEqual([201]);
    expect([done.body.state, done.body.made]).toEqual(['done', 10_000]);
    const [counted] = await app.database.query<{ cylinders: number; openings: number }>(
      'superuser',
      `select (select count(*)::int from cylinder where firm_id = $1) as cylinders,
        (select count(*)::int from entry where firm_id = $1 and from_place = 'opening') as openings`,
      [ledger.firm.id],
    );
    expect(counted).toEqual({ cylinders: 10_000, openings: 10_000 });
  });
});
