import { performance } from 'node:perf_hooks';
import pg from 'pg';
import { v7 as uuid } from 'uuid';
import { encodeCursor } from '../../server/http/keyset.ts';
import type { Parts } from '../../server/http/parts.ts';
import { cursorScope } from '../../server/lists/list-query.ts';
import { foundFirm } from '../../server/people/found-firm.ts';
import type { BooksResponse } from '../../shared/books/books.schema.ts';
import { entryListQuery } from '../../shared/entries/entry.schema.ts';
import { type ClonedDatabase, cloneTemplate } from '../support/cloned-database.ts';
import type { Bench, BenchContext, Figure } from './bench.ts';
import {
  type Browser,
  browserOf,
  replay,
  type SentStatement,
  startBenchServer,
  statementsOf,
} from './log-growth/bench-server.ts';
import { cylindersOf, idOf, type LoadedFirm, loadLog, loadRegisters, unitsOf } from './log-growth/load-log.ts';

/** `LOG_GROWTH=full` is five million entries and takes its time; `glance` only says whether it runs. */
const SIZES = {
  full: { smallFirms: 100, smallEntries: 40_000, largeEntries: 1_000_000 },
  part: { smallFirms: 10, smallEntries: 4_000, largeEntries: 100_000 },
  glance: { smallFirms: 2, smallEntries: 400, largeEntries: 10_000 },
};
const SIZE = SIZES[(process.env.LOG_GROWTH ?? 'part') as keyof typeof SIZES] ?? SIZES.part;
const NOW = new Date('2026-11-30T15:00:00.000Z');
const PASSWORD = 'correct horse battery';
const YEAR = { first: '2025-12', last: '2026-11', firstDay: '2025-12-01', lastDay: '2026-11-30' };
/** Different units and cylinders, each asked for in every round. */
const PATHS = 20;
const ROUNDS = 20;
/** Before anything counts, so that neither side is measured while Node.js still compiles what it runs. */
const WARM_UP_ROUNDS = 3;

async function found(parts: Parts, entryCount: number): Promise<LoadedFirm & { email: string }> {
  const firmId = uuid();
  const owner = { id: uuid(), name: 'Ada Firth', email: `${firmId}@example.test`, password: PASSWORD };
  const zone = { jurisdiction: 'US', timeZone: 'UTC', locale: 'en-US', gwpSet: 'US-AIM' } as const;
  await foundFirm(parts, { id: firmId, name: 'Bench', ...zone }, owner);
  return { firmId, personId: owner.id, entryCount, email: owner.email };
}

/** Loaded side by side, each on connections of its own: every firm has a head of its own. */
const LOADERS = 2;

/** The firms to compare: the large one and the last of the small ones. */
async function loadFirms(database: ClonedDatabase, parts: Parts, say: BenchContext['say']) {
  const start = performance.now();
  const sizes = [SIZE.largeEntries, ...Array.from({ length: SIZE.smallFirms }, () => SIZE.smallEntries)];
  const firms: (LoadedFirm & { email: string })[] = [];
  const waiting = [...sizes.keys()];
  const loader = async () => {
    const superuser = new pg.Client({ connectionString: database.urls.superuser });
    const app = new pg.Client({ connectionString: database.urls.app });
    await superuser.connect();
    await app.connect();
    try {
      for (let index = waiting.shift(); index !== undefined; index = waiting.shift()) {
        const firm = await found(parts, sizes[index] as number);
        await loadRegisters(superuser, firm);
        await loadLog(app, firm);
        firms[index] = firm;
      }
    } finally {
      await superuser.end();
      await app.end();
    }
  };
  await Promise.all(Array.from({ length: LOADERS }, loader));
  await database.query('superuser', 'vacuum analyze');
  const total = sizes.reduce((sum, size) => sum + size, 0);
  say(`${total} entries were posted in ${((performance.now() - start) / 1000).toFixed(0)} s`);
  return { large: firms[0] as LoadedFirm & { email: string }, small: firms.at(-1) as LoadedFirm & { email: string } };
}

interface Asked {
  browser: Browser;
  firm: LoadedFirm;
}
type Page = (asked: Asked, n: number) => string;

/** The cursor before the last page: as if somebody had turned all the others. */
async function lastPages(database: ClonedDatabase, firmIds: readonly string[]): Promise<Map<string, string>> {
  const of = cursorScope('entries', entryListQuery.parse({}));
  const pages = new Map<string, string>();
  for (const firmId of firmIds) {
    const [row] = await database.query<{ sequence: string }>(
      'superuser',
      'select sequence::text from entry where firm_id = $1 order by firm_id, entry.sequence offset 40 limit 1',
      [firmId],
    );
    pages.set(firmId, `/entries?cursor=${encodeCursor(of, [String(row?.sequence)])}`);
  }
  return pages;
}

/** Evenly over all of a firm's, so that none stays in the cache because of its neighbour. */
const spread = (n: number, count: number) => Math.floor((n * count) / PATHS);

const percentile95 = (times: readonly number[]) =>
  times.toSorted((a, b) => a - b)[Math.ceil(times.length * 0.95) - 1] as number;

const middle = (times: readonly number[]) => times.toSorted((a, b) => a - b)[Math.floor(times.length / 2)] as number;

async function timed(work: () => Promise<unknown>): Promise<number> {
  const start = performance.now();
  await work();
  return performance.now() - start;
}

interface Compared {
  large: Asked;
  small: Asked;
  bare: pg.Client;
  say: BenchContext['say'];
}

async function measurePage(name: string, page: Page, { large, small, bare, say }: Compared): Promise<Figure[]> {
  const start = performance.now();
  const statements: SentStatement[][] = [];
  const paths: { large: string; small: string }[] = [];
  for (let n = 0; n < PATHS; n++) {
    const path = { large: page(large, n), small: page(small, n) };
    paths.push(path);
    await small.browser.get(path.small);
    statements.push(await statementsOf(() => large.browser.get(path.large)));
    await replay(bare, statements[n] as SentStatement[]);
  }
  const times = { http: [] as number[], bare: [] as number[], small: [] as number[] };
  for (let round = -WARM_UP_ROUNDS; round < ROUNDS; round++) {
    if (round === 0) for (const each of Object.values(times)) each.length = 0;
    for (const [n, path] of paths.entries()) {
      times.http.push(await timed(() => large.browser.get(path.large)));
      times.bare.push(await timed(() => replay(bare, statements[n] as SentStatement[])));
      times.small.push(await timed(() => small.browser.get(path.small)));
    }
  }
  const value = percentile95(times.http);
  const middles = [times.http, times.bare, times.small].map((each) => middle(each).toFixed(1)).join(', ');
  say(`${name}: middle of http, bare, small ${middles} ms; took ${((performance.now() - start) / 1000).toFixed(0)} s`);
  return [
    {
      name,
      value,
      unit: 'ms',
      against: percentile95(times.bare),
      againstWhat: `the same ${statements[0]?.length} statements by bare pg`,
      bar: { atMost: 3 },
    },
    {
      name: `${name}-growth`,
      value,
      unit: 'ms',
      against: percentile95(times.small),
      againstWhat: `the same of a firm with ${SIZE.smallEntries} entries`,
      bar: { atMost: 1.3 },
    },
  ];
}

const KIND = (end: 'from' | 'to') => `e.${end}_place || coalesce(':' || e.${end}_as, '')`;
const AGGREGATE = `select ${KIND('from')} as "from", ${KIND('to')} as "to", e.refrigerant, sum(e.mass_micrograms)::text as mass,
    count(*) from entry e where e.booking_month >= $1 and e.booking_month <= $2 group by 1, 2, 3`;

/** What went in and out of each kind of place in the year, to the microgram. */
function inAndOut(rows: readonly { from: string; to: string; mass: string }[]): Record<string, [string, string]> {
  const sums = new Map<string, [bigint, bigint]>();
  const at = (kind: string) => sums.get(kind) ?? sums.set(kind, [0n, 0n]).get(kind) ?? [0n, 0n];
  for (const { from, to, mass } of rows) {
    at(to)[0] += BigInt(mass);
    at(from)[1] += BigInt(mass);
  }
  return Object.fromEntries([...sums].map(([kind, [came, went]]) => [kind, [String(came), String(went)]]));
}

async function measureBooks({ browser, firm }: Asked, bare: pg.Client): Promise<Figure> {
  const path = `/books?from=${YEAR.first}&to=${YEAR.last}`;
  const books: BooksResponse = JSON.parse(await browser.get(path));
  const aggregate = async () => {
    await bare.query('begin');
    await bare.query(`select set_config('app.firm_id', $1, true), set_config('app.person_id', $2, true)`, [
      firm.firmId,
      firm.personId,
    ]);
    const { rows } = await bare.query(AGGREGATE, [YEAR.first, YEAR.last]);
    await bare.query('commit');
    return rows;
  };
  const expected = inAndOut(await aggregate());
  for (const { kind, inG, outG } of books.places) {
    const told = [inG, outG].map((massG) => String(Math.round(massG * 1e6)));
    if (String(told) !== String(expected[kind] ?? [0, 0])) {
      throw new Error(`${kind}: the books say ${told}, the entries ${expected[kind]}`);
    }
    delete expected[kind];
  }
  if (Object.keys(expected).length > 0) throw new Error(`the books leave out ${Object.keys(expected)}`);
  const times = { http: [] as number[], bare: [] as number[] };
  for (let round = 0; round < 9; round++) {
    times.http.push(await timed(() => browser.get(path)));
    times.bare.push(await timed(aggregate));
  }
  return {
    name: 'books-year',
    value: middle(times.http),
    unit: 'ms',
    against: middle(times.bare),
    againstWhat: 'a bare aggregate over the entries of the year',
    bar: { atMost: 0.2 },
  };
}

/**
 * Pages of a long log through HTTP, 95th percentile: against the statements that the same request sends (session, person,
 * begin, setting, query, commit) repeated by bare pg, and against a firm with a twenty-fifth of the entries, whose units and
 * cylinders have as many each. And the books of a year against adding its entries up; they have to agree first.
 */
export const bench: Bench = {
  async run({ startPostgres, say }) {
    const { port } = await startPostgres();
    const database = await cloneTemplate({ port });
    const server = await startBenchServer(database.urls.app, NOW);
    const bare = new pg.Client({ connectionString: database.urls.app });
    await bare.connect();
    const browsers: Browser[] = [];
    try {
      const firms = await loadFirms(database, server.parts, say);
      const signedIn = async (firm: LoadedFirm & { email: string }): Promise<Asked> => {
        const browser = await browserOf(server.url, firm.email, PASSWORD);
        browsers.push(browser);
        return { browser, firm };
      };
      const [large, small] = [await signedIn(firms.large), await signedIn(firms.small)];
      const compared: Compared = { large, small, bare, say };
      const last = await lastPages(database, [firms.large.firmId, firms.small.firmId]);
      const unitLog: Page = ({ firm }, n) =>
        `/entries?sort=-occurredAt&unitId=${idOf('unit', spread(n, unitsOf(firm)), firm.firmId)}`;
      const statement: Page = ({ firm }, n) =>
        `/cylinders/${idOf('cylinder', spread(n, cylindersOf(firm)), firm.firmId)}/statement?from=${YEAR.firstDay}&to=${YEAR.lastDay}`;
      return [
        ...(await measurePage('log-first-page', () => '/entries', compared)),
        ...(await measurePage('log-last-page', ({ firm }) => String(last.get(firm.firmId)), compared)),
        ...(await measurePage('unit-log', unitLog, compared)),
        ...(await measurePage('statement', statement, compared)),
        await measureBooks(large, bare),
      ];
    } finally {
      for (const browser of browsers) browser.close();
      await bare.end();
      await server.close();
      await database.drop();
    }
  },
};
