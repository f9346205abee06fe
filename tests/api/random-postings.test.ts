import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { VerificationResult } from '../../shared/proof/proof.schema.ts';
import { firstBrokenRecord } from '../database/chain-from-rows.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { Performance } from '../support/perform-postings.ts';
import { deeds } from '../support/random-postings.ts';

/** A fixed seed, so that a red run can be repeated; `RANDOM_RUNS` and `RANDOM_SEED` search further. */
const RUNS = Number(process.env.RANDOM_RUNS ?? 12);
const SEED = Number(process.env.RANDOM_SEED ?? 20261203);

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const rows = <Row extends object>(firmId: string, sql: string) => app.database.query<Row>('superuser', sql, [firmId]);
const DIFFERENCES = ['cylinderDifference', 'unitDifference', 'supplierShortFill'];

async function holds(performance: Performance): Promise<void> {
  const { ledger, books } = performance;
  const { id: firmId } = ledger.firm;
  // Balances, by a model that only adds up what it was told.
  const balances = await rows<{ line: string }>(
    firmId,
    `select place_key || ' ' || refrigerant || ' ' || mass_micrograms as line from balance
      where firm_id = $1 and mass_micrograms <> 0`,
  );
  expect(balances.map(({ line }) => line).sort()).toEqual(books.balances());
  const months = await rows<{ line: string }>(
    firmId,
    `select concat_ws(' ', month, refrigerant, from_kind, to_kind, mass_micrograms, entry_count) as line
      from month_sum where firm_id = $1`,
  );
  expect(months.map(({ line }) => line).sort()).toEqual(books.monthSums());

  // Limits: nothing below zero, and nothing over a cylinder's limit without a reason.
  const below = books.balances().filter((line) => /^(cylinder|unit):.* -/.test(line));
  expect(below).toEqual([]);
  const unreasoned = await rows(
    firmId,
    `select c.tag from cylinder c join balance b on b.firm_id = c.firm_id and b.place_id = c.id
      where c.firm_id = $1 and c.stamped_limit_micrograms is not null group by c.firm_id, c.id, c.tag
      having sum(b.mass_micrograms) > min(c.stamped_limit_micrograms) and not exists (select from entry e
        join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
        where e.firm_id = c.firm_id and e.to_id = c.id and g.reason is not null)`,
  );
  expect(unreasoned).toEqual([]);

  // One gapless sequence, each record's hash over the one before, each entry told once.
  const chain = await rows<{ sequence: string; content: string; hash: Buffer }>(
    firmId,
    `select sequence::text, content, hash from journal_record where firm_id = $1 order by journal_record.sequence`,
  );
  expect(firstBrokenRecord(chain)).toBeNull();
  expect(chain.length).toBe(await ledger.sequence());
  expect(chain.filter(({ content }) => content.includes('"type":"entry"'))).toHaveLength(books.count());

  // What stands as a difference is on the list to be settled, gram for gram, and no loss is less than nothing.
  const { items } = await performance.checklist('2026-10');
  for (const kind of DIFFERENCES) {
    const listed = items.reduce(
      (sum, item) =>
        item.kind === 'difference' && item.difference.kind === kind ? sum - item.difference.standsG : sum,
      0,
    );
    expect([kind, listed.toFixed(6)]).toEqual([kind, books.heldByKindG(kind).toFixed(6)]);
  }
  const { total } = (await ledger.client.get('/emissions')).body;
  expect((total.totalG + total.beforeOurCareG).toFixed(6)).toBe(books.heldByKindG('atmosphere').toFixed(6));
  expect(total.totalG).toBeGreaterThanOrEqual(0);

  const checked = await fetch(`${app.url}/api/v1/journal/verification`, {
    headers: { Cookie: String(ledger.client.cookie) },
  });
  const told = (await checked.text()).trim().split('\n').at(-1) ?? '';
  expect(JSON.parse(told) as VerificationResult).toMatchObject({ fault: null, result: 'intact' });
}

describe('Random postings through HTTP: valid and not, at once, repeated, late, reversed, settled, months closed', () => {
  it('leave balances, limits, sequence and chain true, as a second, naive model says', async () => {
    const answered = new Map<string, number>();
    await fc.assert(
      fc.asyncProperty(deeds, async (all) => {
        const performance = await Performance.start(app);
        for (const deed of all) await performance.perform(deed);
        await holds(performance);
        for (const [key, count] of performance.answered) answered.set(key, (answered.get(key) ?? 0) + count);
      }),
      { numRuns: RUNS, seed: SEED, endOnFailure: true },
    );
    if (process.env.RANDOM_RUNS) console.info(Object.fromEntries([...answered].sort()));
    // Each was done and answered so at least once: nothing is promised in vain.
    expect([...answered.keys()]).toEqual(
      expect.arrayContaining([
        ...['charge 201', 'charge 422', 'weigh 201', 'recover 201', 'buy 201', 'refused 422'],
        ...['sendAgain 200', 'sendChanged 409', 'atOnce 200', 'atOnce 201', 'reverse 201', 'reverse 422'],
        ...['settle 201', 'reverseSettlement 201', 'reverseSettlement 422', 'close 201'],
      ]),
    );
  }, 3_600_000);
});
