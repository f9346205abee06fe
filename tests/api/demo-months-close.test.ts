import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { HT, harrowTansy } from '../../server/demo/harrow-tansy/firm.ts';
import { harrowTansyHistory } from '../../server/demo/harrow-tansy/history.ts';
import { loadFirm } from '../../server/demo/load-demo.ts';
import type { BooksResponse, DifferencesResponse } from '../../shared/books/books.schema.ts';
import type { Checklist, CloseResponse, OpenItem, PeriodsResponse } from '../../shared/periods/periods.schema.ts';
import { firstBrokenRecord } from '../database/chain-from-rows.ts';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';
import { posted } from '../support/ledger.ts';
import type { TestClient } from '../support/test-client.ts';

const NOW = new Date('2026-12-10T15:20:00Z');
const LAST_FULL_MONTH = '2026-11';

let app: TestApp;
let owner: TestClient;
/** In the order in which they were closed. */
const closed: {
  month: string;
  answer: CloseResponse;
  books: BooksResponse;
  carried: OpenItem[];
  settled: OpenItem[];
}[] = [];

async function get<T>(path: string): Promise<T> {
  const answer = await owner.get(path);
  if (answer.status !== 200) throw new Error(`${path} answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  return answer.body;
}
const booksOf = (from: string, to = from) => get<BooksResponse>(`/books?from=${from}&to=${to}`);
const checklistOf = (month: string) => get<Checklist>(`/periods/checklist?month=${month}`);
const openOf = ({ items }: Checklist) => items.filter(({ needsDecision, carried }) => needsDecision && !carried);

async function lastSupplierOf(cylinderId: string): Promise<string | undefined> {
  const [purchase] = await app.database.query<{ supplierId: string }>(
    'superuser',
    `select from_id as "supplierId" from entry where firm_id = $1 and to_id = $2 and from_place = 'supplier'
      order by sequence desc limit 1`,
    [harrowTansy.firm.id, cylinderId],
  );
  return purchase?.supplierId;
}

/**
 * As the owner does it: what a supplier filled short is the supplier's, and what somebody may still find is carried by the
 * manager. Then the month is signed off.
 */
async function settleCarryAndClose(month: string): Promise<void> {
  const open = openOf(await checklistOf(month));
  const settled: OpenItem[] = [];
  for (const item of open) {
    if (item.kind !== 'difference' || item.difference.kind !== 'supplierShortFill') continue;
    const to = { place: 'supplier', id: await lastSupplierOf(item.difference.subject.id) };
    const body = { id: uuid(), month, key: item.key, to, reason: 'credited by the supplier' };
    await posted(owner, body, '/periods/settlements');
    settled.push(item);
  }
  const carried = openOf(await checklistOf(month));
  if (carried.length > 0) {
    const items = carried.map(({ key }) => ({ id: uuid(), key }));
    const body = { month, carriedBy: HT.ilse.id, reason: 'asked, and looked for', items };
    await posted(owner, body, '/periods/carried');
  }
  const { sumsHash } = await checklistOf(month);
  const { body: answer } = await posted(owner, { id: uuid(), month, sumsHash }, '/periods');
  closed.push({ month, answer, books: await booksOf(month), carried, settled });
}

beforeAll(async () => {
  app = await startTestApp();
  const { reference, dataSource } = app.parts;
  const world = { dataSource, reference, password: TEST_PASSWORD };
  await loadFirm(world, harrowTansy, harrowTansyHistory(NOW, reference));
  app.clock.set(NOW.toISOString());
  owner = await app.signIn({ ...HT.merrin, firmId: harrowTansy.firm.id });
  for (let count = 0; count < 60; count++) {
    const { next } = await get<PeriodsResponse>('/periods');
    if (next === null) break;
    await settleCarryAndClose(next);
  }
}, 480_000);
afterAll(() => app.close());

interface EntryRow {
  month: string;
  from: string;
  to: string;
  mass: string;
  isReversal: boolean;
}
const KIND = (end: 'from' | 'to') =>
  `e.${end}_place || case when e.${end}_place = 'atmosphere' then ':' || e.${end}_as else '' end`;

/** What each kind of place held at both ends of a month and what went in and out, added up from the entries alone. */
function placesFrom(entries: readonly EntryRow[], month: string) {
  const places = new Map<string, { start: bigint; in: bigint; out: bigint; end: bigint }>();
  const at = (kind: string) => {
    const place = places.get(kind) ?? { start: 0n, in: 0n, out: 0n, end: 0n };
    places.set(kind, place);
    return place;
  };
  for (const { month: booked, from, to, mass, isReversal } of entries) {
    if (booked > month) continue;
    const micrograms = BigInt(mass);
    at(from).end -= micrograms;
    at(to).end += micrograms;
    if (booked < month) {
      at(from).start -= micrograms;
      at(to).start += micrograms;
    } else if (from !== to) {
      // A reversal takes back what went the other way.
      if (isReversal) {
        at(to).out -= micrograms;
        at(from).in -= micrograms;
      } else {
        at(from).out += micrograms;
        at(to).in += micrograms;
      }
    }
  }
  const grams = (micrograms: bigint) => Number(micrograms) / 1e6;
  return [...places]
    .filter(([, place]) => place.start !== 0n || place.in !== 0n || place.out !== 0n)
    .map(([kind, place]) => {
      const { start, in: came, out, end } = place;
      return { kind, startG: grams(start), inG: grams(came), outG: grams(out), endG: grams(end) };
    })
    .sort(byKind);
}
const byKind = (a: { kind: string }, b: { kind: string }) => (a.kind < b.kind ? -1 : 1);

const entriesOfFirm = () =>
  app.database.query<EntryRow>(
    'superuser',
    `select e.booking_month as month, ${KIND('from')} as from, ${KIND('to')} as to, e.mass_micrograms::text as mass,
        e.reverses_entry_id is not null as "isReversal"
      from entry e where e.firm_id = $1`,
    [harrowTansy.firm.id],
  );

describe('Three years of the first demo firm', () => {
  it('close month by month, in order, from the first with an entry to the last that is over', async () => {
    const [first] = await app.database.query<{ month: string }>(
      'superuser',
      `select min(booking_month) as month from entry where firm_id = $1`,
      [harrowTansy.firm.id],
    );
    const expected: string[] = [];
    for (let month = String(first?.month); month <= LAST_FULL_MONTH; month = monthAfter(month)) expected.push(month);
    expect(expected.length).toBeGreaterThanOrEqual(36);
    expect(closed.map(({ month }) => month)).toEqual(expected);
    for (const { month, answer } of closed) expect(answer).toMatchObject({ month, firstOpenMonth: monthAfter(month) });
    const periods = await get<PeriodsResponse>('/periods');
    expect(periods).toMatchObject({ firstOpenMonth: '2026-12', next: null });
    expect(periods.items.filter(({ state }) => state === 'closed')).toHaveLength(expected.length);
  });

  it('leave nothing undecided: what was settled or carried is in the record that was signed off', async () => {
    for (const { month, carried } of closed) {
      const { signedOff, undecided, state } = await checklistOf(month);
      expect([month, state, undecided]).toEqual([month, 'closed', 0]);
      expect(signedOff?.byName).toBe(HT.merrin.name);
      expect(signedOff?.carried.map(({ key }) => key).sort()).toEqual(carried.map(({ key }) => key).sort());
      for (const { name } of signedOff?.carried ?? []) expect(name).toBe(HT.ilse.name);
    }
    expect(closed.flatMap(({ carried }) => carried).length).toBeGreaterThan(0);
    expect(closed.flatMap(({ settled }) => settled).length).toBeGreaterThan(0);
  });

  it('are sealed at each close', () => {
    const sealed = closed.map(({ answer }) => (answer.seal?.record ?? 0) >= answer.recordSequence);
    expect(sealed).toEqual(closed.map(() => true));
  });

  it('have books that a fresh sum over their entries gives again, for each month, to the microgram', async () => {
    const entries = await entriesOfFirm();
    expect(entries.length).toBeGreaterThan(1_200);
    for (const { month } of closed) {
      const { places } = await booksOf(month);
      expect({ month, places: places.toSorted(byKind) }).toEqual({ month, places: placesFrom(entries, month) });
    }
  });

  it('keep the books of a closed month as they were signed off, whatever was closed after it', async () => {
    for (const { month, books } of closed) {
      const { places, equation, differences } = await booksOf(month);
      expect({ month, places, equation, differences }).toEqual({
        month,
        places: books.places,
        equation: books.equation,
        differences: books.differences,
      });
    }
  });

  it('show the cylinder that does not balance in the first row of the differences, in the hands of Bram', async () => {
    const [flag, ...others] = await app.database.query<{ id: string; tag: string }>(
      'superuser',
      `select c.id, c.tag from flag f join cylinder c on c.firm_id = f.firm_id and c.id = f.subject_id
        where f.firm_id = $1 and f.code = 'cylinderNotExplained' and f.closed_at is null`,
      [harrowTansy.firm.id],
    );
    expect(others).toEqual([]);
    const from = String(closed[0]?.month);
    const { items } = await get<DifferencesResponse>(`/books/differences?from=${from}&to=2026-12`);
    expect(items.length).toBeGreaterThan(1);
    expect(items[0]).toMatchObject({
      verdict: 'notExplained',
      subject: { kind: 'cylinder', id: flag?.id, label: flag?.tag },
    });
    expect(items[0]?.standsG).toBeLessThan(-4 * 453.59237);
    expect(items[0]?.heldBetween.map(({ name }) => name)).toContain(HT.bram.name);
  });

  it('leave the chain intact', async () => {
    const chain = await app.database.query<{ sequence: string; content: string; hash: Buffer }>(
      'superuser',
      'select sequence::text, content, hash from journal_record j where firm_id = $1 order by j.sequence',
      [harrowTansy.firm.id],
    );
    expect(chain.length).toBeGreaterThan(1_200);
    expect(firstBrokenRecord(chain)).toBeNull();
  });
});

function monthAfter(month: string): string {
  const [year, number] = month.split('-').map(Number) as [number, number];
  return number === 12 ? `${year + 1}-01` : `${year}-${String(number + 1).padStart(2, '0')}`;
}
