import { hash } from 'node:crypto';
import { createReadStream, createWriteStream, mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { v7 as uuid } from 'uuid';
import { createDataSource } from '../../server/database/data-source.ts';
import { startServer } from '../../server/main.ts';
import { addColleague } from '../../server/people/found-firm.ts';
import { readSettings } from '../../server/settings.ts';
import { checkPackage, nodeTools, openPath } from '../../shared/proof/verify.mjs';
import { place, textOf } from '../database/record-texts.ts';
import { type Connection, connect, createTestFirm, POST } from '../database/test-firm.ts';
import { type ClonedDatabase, cloneTemplate } from '../support/cloned-database.ts';
import type { Bench, BenchContext, Figure } from './bench.ts';

const ENTRIES = 100_000;
const GROUPS_AT_ONCE = 10_000;
const PASSWORD = 'correct horse battery';

type Firm = Awaited<ReturnType<typeof createTestFirm>>;

/** Bought into a cylinder, charged from it into one of two units: two entries a group, through the posting function. */
async function fill(app: Connection, firm: Firm, entries: number): Promise<void> {
  const cylinder = place('cylinder', firm.recoveryCylinderId);
  for (let done = 0; done < entries / 2; done += GROUPS_AT_ONCE) {
    const texts = Array.from({ length: GROUPS_AT_ONCE }, (_, index) => {
      const unit = index % 20 === 0 ? firm.unitId : firm.otherUnitId;
      return firm.group({
        kind: 'extraCharge',
        unitId: unit,
        siteId: firm.siteId,
        entries: [
          { from: place('supplier', firm.supplierId), to: cylinder, massMicrograms: '91000000' },
          { from: cylinder, to: place('unit', unit) },
        ],
      });
    });
    await app.as(firm.scope, (query) => query(POST, [texts.flat().map(textOf), null]));
  }
}

/** The product's server on this database, and a manager of the firm signed in. */
async function openServer(database: ClonedDatabase, firmId: string, home: string) {
  const settings = readSettings(
    { TAREWRIGHT_HOME: home, SEAL_KEY_FILE: path.join(home, 'seal.key'), LOG_LEVEL: 'silent' },
    '/nowhere',
  );
  const dataSource = await createDataSource({ url: database.urls.app }).initialize();
  const person = { id: uuid(), name: 'Ada Firth', email: `${firmId}@example.test`, password: PASSWORD };
  const parts = { dataSource, now: () => new Date(), newId: () => uuid() };
  await addColleague(parts, firmId, person, { roles: ['complianceManager'] });
  await dataSource.destroy();
  const server = await startServer({
    settings: { ...settings, port: 0, sessionSecret: 'a secret of this bench alone, long enough' },
    databaseUrls: database.urls,
    clientFolder: home,
  });
  const signedIn = await fetch(`${server.address}/api/v1/session`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ email: person.email, password: PASSWORD }),
  });
  const cookie = String(signedIn.headers.getSetCookie()[0]?.split(';')[0]);
  const get = async (address: string) => {
    const response = await fetch(`${server.address}/api/v1${address}`, { headers: { Cookie: cookie } });
    if (response.status !== 200) throw new Error(`${address}: ${response.status} ${await response.text()}`);
    return response;
  };
  return { get, close: () => server.close() };
}

/** Takes away what is not reachable any more: how much of that V8 lets lie depends on the computer. */
function sweep(): void {
  setFlagsFromString('--expose-gc');
  (runInNewContext('gc') as () => void)();
}

async function secondsOf(work: () => Promise<unknown>): Promise<number> {
  const start = performance.now();
  await work();
  return (performance.now() - start) / 1000;
}

/** The bare thing: each line of the same file read and hashed once. */
async function hashEachLine(file: string): Promise<number> {
  let lines = 0;
  let rest: Buffer = Buffer.alloc(0);
  for await (const chunk of createReadStream(file, { highWaterMark: 262_144 })) {
    const bytes = rest.length > 0 ? Buffer.concat([rest, chunk]) : chunk;
    let from = 0;
    for (let to = bytes.indexOf(10); to !== -1; to = bytes.indexOf(10, from)) {
      hash('sha256', bytes.subarray(from, to), 'buffer');
      lines++;
      from = to + 1;
    }
    rest = bytes.subarray(from);
  }
  return lines;
}

async function unpack(zip: string, folder: string): Promise<void> {
  mkdirSync(folder);
  const files = await openPath(zip, await nodeTools());
  for (const name of ['records.jsonl', 'seals.jsonl', 'public-keys.jsonl', 'proof.json'])
    await pipeline(Readable.from(files.open(name) ?? []), createWriteStream(path.join(folder, name)));
}

/** The quickest of five runs each, by turns, after one that warms up: only others make a run longer than it is. */
async function compare(name: string, folder: string, { say }: BenchContext): Promise<Figure> {
  const tools = await nodeTools();
  const verify = async () => checkPackage(await openPath(folder, tools), tools);
  const bare = () => hashEachLine(path.join(folder, 'records.jsonl'));
  const lines = await bare();
  await verify();
  const seconds: { verify: number[]; bare: number[] } = { verify: [], bare: [] };
  for (let run = 0; run < 5; run++) {
    seconds.verify.push(await secondsOf(verify));
    seconds.bare.push(await secondsOf(bare));
  }
  for (const [what, each] of Object.entries(seconds))
    say(`${name}, ${what}: ${each.map((one) => one.toFixed(2)).join(', ')} s for ${lines} lines`);
  return {
    name,
    value: lines / Math.min(...seconds.verify),
    unit: 'lines/s',
    against: lines / Math.min(...seconds.bare),
    againstWhat: 'SHA-256 of each of the same lines',
    bar: { atLeast: 0.25 },
  };
}

/**
 * Two packages of a firm, unpacked, and the server's own check of its log.
 * @returns how much more memory was reachable at the most than before, in bytes
 */
async function exportAndCheck(
  database: ClonedDatabase,
  firm: Firm,
  home: string,
  { say }: BenchContext,
): Promise<number> {
  const server = await openServer(database, firm.firmId, home);
  const held = () => {
    sweep();
    const { heapUsed, external } = process.memoryUsage();
    return heapUsed + external;
  };
  const before = held();
  let most = before;
  const watch = setInterval(() => {
    most = Math.max(most, held());
  }, 250);
  for (const [name, query] of [
    ['whole', 'from=2000-01-01&to=2099-12-31'],
    ['hidden', `unitId=${firm.unitId}`],
  ] as const) {
    const zip = path.join(home, `${name}.zip`);
    const seconds = await secondsOf(async () => {
      const response = await server.get(`/proof-packages?${query}`);
      await pipeline(Readable.fromWeb(response.body as never), createWriteStream(zip));
    });
    say(`${name}: exported in ${seconds.toFixed(1)} s`);
    await unpack(zip, path.join(home, name));
  }
  let result = '';
  const seconds = await secondsOf(async () => {
    const lines = (await (await server.get('/journal/verification')).text()).trim().split('\n');
    result = String(lines.at(-1));
  });
  clearInterval(watch);
  await server.close();
  const { result: verdict, records } = JSON.parse(result) as { result: string; records: number };
  if (verdict !== 'intact') throw new Error(result);
  say(`the server checks its own log of ${records} records, tables included, in ${seconds.toFixed(1)} s`);
  return most - before;
}

/**
 * How fast the verifier is that goes into each package, on packages that the product itself exported: one with all records
 * whole, one with nearly all as hashes. And how much memory the server takes to export and to check its own log.
 */
export const bench: Bench = {
  async run(context) {
    const { port } = await context.startPostgres();
    const database = await cloneTemplate({ port });
    const app = connect(database);
    const home = mkdtempSync(path.join(tmpdir(), 'tarewright-bench-'));
    try {
      const firm = await createTestFirm(app);
      context.say(`${ENTRIES} entries posted in ${(await secondsOf(() => fill(app, firm, ENTRIES))).toFixed(1)} s`);
      const grown = await exportAndCheck(database, firm, home, context);
      return [
        await compare('verification', path.join(home, 'whole'), context),
        await compare('verification-hidden', path.join(home, 'hidden'), context),
        {
          name: 'proof-memory',
          value: grown / 2 ** 20,
          unit: 'MB',
          against: null,
          bar: { atMost: 64 },
        },
      ];
    } finally {
      await app.close();
      await database.drop();
      rmSync(home, { recursive: true, force: true });
    }
  },
};
