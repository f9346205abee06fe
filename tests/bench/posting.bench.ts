import { Agent, createServer, request as httpRequest, type IncomingMessage } from 'node:http';
import type { AddressInfo } from 'node:net';
import pg from 'pg';
import { pino } from 'pino';
import { v7 as uuid } from 'uuid';
import { createApp } from '../../server/app.ts';
import { createDataSource } from '../../server/database/data-source.ts';
import { backgroundWork } from '../../server/http/background-work.ts';
import type { Parts } from '../../server/http/parts.ts';
import { canonicalText } from '../../server/journal/canonical-text.ts';
import { foundFirm } from '../../server/people/found-firm.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { readSettings } from '../../server/settings.ts';
import type { JournalRecord } from '../../shared/journal/record.schema.ts';
import { type ClonedDatabase, cloneTemplate } from '../support/cloned-database.ts';
import type { Bench, BenchContext } from './bench.ts';

const GROUPS_A_BLOCK = 100;
const BLOCKS = 6;
const PASSWORD = 'correct horse battery';
const SINCE = '2026-01-05T08:00:00Z';

interface Answer {
  status: number;
  body: string;
  cookie: string | null;
}

/** One browser on one connection that stays open, sending one request after the other. */
function browserAt(url: string) {
  const agent = new Agent({ keepAlive: true, maxSockets: 1 });
  let cookie = '';
  const post = async (path: string, body: unknown): Promise<Answer> => {
    const text = JSON.stringify(body);
    const headers = {
      Origin: url,
      'Content-Type': 'application/json',
      'Content-Length': Buffer.byteLength(text),
      ...(cookie ? { Cookie: cookie } : {}),
    };
    const response = await new Promise<IncomingMessage>((resolve, reject) => {
      httpRequest(`${url}/api/v1${path}`, { method: 'POST', agent, headers }, resolve).on('error', reject).end(text);
    });
    const chunks: Buffer[] = [];
    for await (const chunk of response) chunks.push(chunk as Buffer);
    cookie = response.headers['set-cookie']?.[0]?.split(';')[0] ?? cookie;
    return { status: response.statusCode ?? 0, body: Buffer.concat(chunks).toString(), cookie };
  };
  const made = async (path: string, body: unknown): Promise<string> => {
    const answer = await post(path, body);
    if (answer.status !== 201 && answer.status !== 200)
      throw new Error(`${path} answered ${answer.status}: ${answer.body}`);
    return answer.body;
  };
  return { made, close: () => agent.destroy() };
}
type Browser = ReturnType<typeof browserAt>;

/** The server as it runs in production, on this database, with its clock standing. */
async function startServer(database: ClonedDatabase) {
  const server = createServer();
  await new Promise<void>((resolve) => {
    server.listen(0, '127.0.0.1', resolve);
  });
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const log = pino({ level: 'silent' });
  const parts: Parts = {
    settings: {
      ...readSettings({ PUBLIC_URL: url }, '/nowhere'),
      sessionSecret: 'a secret of this bench alone, long enough',
    },
    dataSource: await createDataSource({ url: database.urls.app }).initialize(),
    reference: loadReferenceData(),
    mailer: {
      send: () => Promise.reject(new Error('nobody mails')),
      close: async () => {},
    } as unknown as Parts['mailer'],
    keptMail: null,
    background: backgroundWork(log),
    log,
    now: () => new Date('2026-11-30T15:00:00.000Z'),
    newId: () => uuid(),
    checkAnswers: false,
    clientFolder: null,
    version: '0.0.0-bench',
  };
  server.on('request', createApp(parts));
  return {
    url,
    parts,
    async close() {
      server.closeAllConnections();
      server.close();
      await parts.background.settled();
      await parts.dataSource.destroy();
    },
  };
}

/** A signed-in owner of a new firm with a cylinder, a unit and a scale. */
async function prepare(browser: Browser, parts: Parts) {
  const firmId = uuid();
  const owner = { id: uuid(), name: 'Ada Firth', email: `${firmId}@example.test`, password: PASSWORD };
  const firm = {
    id: firmId,
    name: 'Bench',
    jurisdiction: 'US',
    timeZone: 'UTC',
    locale: 'en-US',
    gwpSet: 'US-AIM',
  } as const;
  await foundFirm(parts, firm, owner);
  await browser.made('/session', { email: owner.email, password: PASSWORD });
  const ids = { customer: uuid(), site: uuid(), unit: uuid(), cylinder: uuid(), scale: uuid() };
  const mass = (value: string) => ({ value, unit: 'g' });
  await browser.made('/customers', { id: ids.customer, name: 'Wexcombe Mill' });
  await browser.made('/sites', {
    id: ids.site,
    customerId: ids.customer,
    name: 'Mill Lane',
    addressLines: ['1 Mill Lane'],
    timeZone: 'UTC',
    altitudeM: 12,
    jurisdiction: 'US',
  });
  await browser.made('/tools', { id: ids.scale, kind: 'scale', name: 'Scale 1', scale: { resolutionG: 5 } });
  await browser.made('/cylinders', {
    id: ids.cylinder,
    tag: '7741',
    kind: 'refillable',
    refrigerant: 'R-32',
    tare: { id: uuid(), mass: mass('7700'), validFrom: SINCE },
  });
  await browser.made('/units', {
    id: ids.unit,
    siteId: ids.site,
    tag: '0412',
    name: 'back bedroom',
    applianceKind: 'comfortCooling',
    refrigerant: 'R-32',
    refrigerantFrom: '2026-01-01',
    fullCharge: { id: uuid(), mass: mass('1340'), method: 'manufacturer', validFrom: SINCE },
    initialCharge: { state: 'factory', mass: mass('1250'), at: SINCE, entryId: uuid(), groupId: uuid() },
  });
  return { firmId, personId: owner.id, ...ids };
}
type Prepared = Awaited<ReturnType<typeof prepare>>;

/** Weighed in, then taken out again: 90 g, both readings each, so that every group is like the first two. */
function groupNumber(index: number, { unit, cylinder, scale }: Prepared) {
  const isIn = index % 2 === 0;
  const [before, after] = isIn ? ['17200', '17110'] : ['17110', '17200'];
  const reading = (moment: string, value: string) => {
    return { id: uuid(), cylinderId: cylinder, toolId: scale, moment, mode: 'gross', value, unit: 'g' };
  };
  const [from, to] = [
    { place: 'cylinder', id: cylinder },
    { place: 'unit', id: unit },
  ];
  return {
    groupId: uuid(),
    schema: 1,
    kind: isIn ? 'extraCharge' : 'overchargeRemoved',
    unitId: unit,
    occurredAt: new Date(Date.parse('2026-03-01T00:00:00Z') + index * 60_000).toISOString(),
    readings: [reading('before', before as string), reading('after', after as string)],
    entries: [
      {
        id: uuid(),
        refrigerant: 'R-32',
        mass: { value: '90', unit: 'g' },
        from: isIn ? from : to,
        to: isIn ? to : from,
        howKnown: 'weighed',
      },
    ],
  };
}

/** The same records with other ids and a later time, and the states that belong to them: what the function is given. */
interface Template {
  records: JournalRecord[];
  placeStates: unknown[];
}

async function readTemplates(client: pg.Client, groupIds: readonly string[]): Promise<Template[]> {
  const templates: Template[] = [];
  for (const groupId of groupIds) {
    const { rows } = await client.query<{ content: string }>(
      `select content from journal_record where record_id = $1 or record_id in (select id from entry where group_id = $1)
        order by sequence`,
      [groupId],
    );
    const states = await client.query(
      `select place, place_id as id, known, state, last_occurred_at as "lastOccurredAt" from place_state`,
    );
    templates.push({ records: rows.map(({ content }) => JSON.parse(content)), placeStates: states.rows });
  }
  return templates;
}

function textsLike({ records }: Template, occurredAt: string): string[] {
  const fresh = new Map<string, string>();
  const renamed = (id: string) => fresh.get(id) ?? fresh.set(id, uuid()).get(id) ?? id;
  for (const record of records) renamed(record.id);
  return records.map((record) => {
    if (record.type === 'group') {
      const readings = record.readings.map((reading) => ({ ...reading, id: renamed(reading.id) }));
      const entryIds = record.entryIds.map(renamed);
      return canonicalText({ ...record, id: renamed(record.id), occurredAt, readings, entryIds });
    }
    if (record.type === 'entry') {
      return canonicalText({ ...record, id: renamed(record.id), groupId: renamed(record.groupId), occurredAt });
    }
    throw new Error('a group and its entries');
  });
}

async function measure({ startPostgres, say }: BenchContext) {
  const { port } = await startPostgres();
  const database = await cloneTemplate({ port });
  const server = await startServer(database);
  const browser = browserAt(server.url);
  const client = new pg.Client({ connectionString: database.urls.app });
  await client.connect();
  try {
    const prepared = await prepare(browser, server.parts);
    const firm = [prepared.firmId, prepared.personId];
    let index = 0;
    const overHttp = async (groups: readonly unknown[]) => {
      const start = performance.now();
      for (const group of groups) await browser.made('/entry-groups', group);
      return groups.length / ((performance.now() - start) / 1000);
    };
    const bare = async (calls: readonly { texts: string[]; derived: string }[]) => {
      const start = performance.now();
      for (const { texts, derived } of calls) {
        await client.query('begin');
        await client.query(`select set_config('app.firm_id', $1, true), set_config('app.person_id', $2, true)`, firm);
        await client.query('select * from lock_head()');
        await client.query('select * from post_records($1::text[], $2::jsonb)', [texts, derived]);
        await client.query('commit');
      }
      return calls.length / ((performance.now() - start) / 1000);
    };
    const nextGroups = () => Array.from({ length: GROUPS_A_BLOCK }, () => groupNumber(index++, prepared));

    await browser.made('/entry-groups', {
      groupId: uuid(),
      schema: 1,
      kind: 'opening',
      occurredAt: SINCE,
      entries: [
        {
          id: uuid(),
          refrigerant: 'R-32',
          mass: { value: '9500', unit: 'g' },
          from: { place: 'opening' },
          to: { place: 'cylinder', id: prepared.cylinder },
          howKnown: 'estimated',
        },
      ],
    });
    const first = nextGroups();
    await overHttp(first);
    await client.query(`select set_config('app.firm_id', $1, false), set_config('app.person_id', $2, false)`, firm);
    const templates = await readTemplates(
      client,
      first.slice(-2).map(({ groupId }) => groupId),
    );
    const nextCalls = () =>
      Array.from({ length: GROUPS_A_BLOCK }, () => {
        const template = templates[index % 2] as Template;
        const occurredAt = groupNumber(index++, prepared).occurredAt;
        return {
          texts: textsLike(template, occurredAt),
          derived: JSON.stringify({ placeStates: template.placeStates }),
        };
      });
    await bare(nextCalls());

    const rates: { http: number[]; bare: number[] } = { http: [], bare: [] };
    for (let block = 0; block < BLOCKS; block++) {
      rates.http.push(await overHttp(nextGroups()));
      rates.bare.push(await bare(nextCalls()));
    }
    const middle = (numbers: number[]) => numbers.toSorted((a, b) => a - b)[Math.floor(numbers.length / 2)] as number;
    say(`http ${rates.http.map(Math.round).join(' ')}, bare ${rates.bare.map(Math.round).join(' ')} groups/s`);
    return { http: middle(rates.http), bare: middle(rates.bare) };
  } finally {
    browser.close();
    await client.end();
    await server.close();
  }
}

/**
 * Groups posted one at a time through HTTP with a session (two readings, one entry, judged), against the same posting
 * function called by bare pg with records and states of the same kind; fsync on for both. Blocks of both take turns, and
 * the middle of each counts.
 */
export const bench: Bench = {
  async run(context) {
    const { http, bare } = await measure(context);
    return {
      name: 'posting',
      value: http,
      unit: 'groups/s',
      against: bare,
      againstWhat: 'post_records by bare pg',
      bar: { atLeast: 0.25 },
    };
  },
};
