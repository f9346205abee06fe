import { Agent, createServer, request as httpRequest, type IncomingMessage } from 'node:http';
import type { AddressInfo } from 'node:net';
import pg from 'pg';
import { pino } from 'pino';
import { v7 as uuid } from 'uuid';
import { createApp } from '../../../server/app.ts';
import { createDataSource } from '../../../server/database/data-source.ts';
import { backgroundWork } from '../../../server/http/background-work.ts';
import type { Parts } from '../../../server/http/parts.ts';
import { loadReferenceData } from '../../../server/reference/load-reference-data.ts';
import { readSettings } from '../../../server/settings.ts';

/** The server as it runs in production, on this database, with its clock standing. */
export async function startBenchServer(appUrl: string, now: Date) {
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
    dataSource: await createDataSource({ url: appUrl }).initialize(),
    reference: loadReferenceData(),
    mailer: {
      send: () => Promise.reject(new Error('nobody mails')),
      close: async () => {},
    } as unknown as Parts['mailer'],
    keptMail: null,
    background: backgroundWork(log),
    log,
    now: () => now,
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

/** One signed-in browser on one connection that stays open, sending one request after the other. */
export async function browserOf(url: string, email: string, password: string) {
  const agent = new Agent({ keepAlive: true, maxSockets: 1 });
  let cookie = '';
  const send = async (method: string, path: string, body?: unknown): Promise<string> => {
    const text = body === undefined ? undefined : JSON.stringify(body);
    const headers = {
      Origin: url,
      ...(text === undefined ? {} : { 'Content-Type': 'application/json', 'Content-Length': Buffer.byteLength(text) }),
      ...(cookie ? { Cookie: cookie } : {}),
    };
    const response = await new Promise<IncomingMessage>((resolve, reject) => {
      httpRequest(`${url}/api/v1${path}`, { method, agent, headers }, resolve).on('error', reject).end(text);
    });
    const chunks: Buffer[] = [];
    for await (const chunk of response) chunks.push(chunk as Buffer);
    const answer = Buffer.concat(chunks).toString();
    if (response.statusCode !== 200) throw new Error(`${path} answered ${response.statusCode}: ${answer}`);
    cookie = response.headers['set-cookie']?.[0]?.split(';')[0] ?? cookie;
    return answer;
  };
  await send('POST', '/session', { email, password });
  return { get: (path: string) => send('GET', path), close: () => agent.destroy() };
}
export type Browser = Awaited<ReturnType<typeof browserOf>>;

export interface SentStatement {
  name?: string;
  text: string;
  values: unknown[];
}

/** Every statement that `work` sends to PostgreSQL from this process, in order, whoever sends it. */
export async function statementsOf(work: () => Promise<unknown>): Promise<SentStatement[]> {
  const sent: SentStatement[] = [];
  const prototype = pg.Client.prototype as unknown as { query: (...given: unknown[]) => unknown };
  const original = prototype.query;
  prototype.query = function (this: unknown, ...given: unknown[]) {
    const [first, second] = given as [string | SentStatement, unknown];
    if (typeof first === 'string') sent.push({ text: first, values: Array.isArray(second) ? second : [] });
    else sent.push({ ...(first.name ? { name: first.name } : {}), text: first.text, values: first.values ?? [] });
    return original.apply(this, given);
  };
  try {
    await work();
  } finally {
    prototype.query = original;
  }
  return sent;
}

/** The same statements on one plain connection. */
export async function replay(client: pg.Client, statements: readonly SentStatement[]): Promise<void> {
  for (const { name, text, values } of statements) await client.query(name ? { name, text, values } : { text, values });
}
