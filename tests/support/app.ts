import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Writable } from 'node:stream';
import { pino } from 'pino';
import { v7 as uuidV7 } from 'uuid';
import { createApp } from '../../server/app.ts';
import { createDataSource } from '../../server/database/data-source.ts';
import { backgroundWork } from '../../server/http/background-work.ts';
import type { Parts } from '../../server/http/parts.ts';
import { REDACTED_PATHS } from '../../server/http/request-log.ts';
import { type KeptMail, startMailCatcher } from '../../server/mail/mail-catcher.ts';
import { smtpMailer } from '../../server/mail/smtp-mailer.ts';
import { addColleague, foundFirm } from '../../server/people/found-firm.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { readSettings } from '../../server/settings.ts';
import type { Role } from '../../shared/permissions/roles.ts';
import type { Session } from '../../shared/session/session.schema.ts';
import { createTestDatabase, type TestDatabase } from './database.ts';
import { TestClient } from './test-client.ts';

/** When the clock of a test app starts. Tests move it; it never moves by itself. */
export const TEST_START = '2026-11-30T15:00:00.000Z';
/** Every test person's. */
export const TEST_PASSWORD = 'correct horse battery';

export interface TestPerson {
  id: string;
  name: string;
  email: string;
  firmId: string;
}

export interface TestApp {
  url: string;
  parts: Parts;
  database: TestDatabase;
  firm: Session['firm'];
  owner: TestPerson;
  clock: { advance(milliseconds: number): void; set(instant: string): void };
  /** Every line of the server's log so far. */
  logLines(): string[];
  /** Kept mail, newest first, after whatever still runs behind an answer has ended. */
  mails(): Promise<KeptMail[]>;
  /** A new person of the firm, by role. */
  addPerson(roles: Role[], options?: { firmId?: string; siteIds?: string[]; name?: string }): Promise<TestPerson>;
  /** A second firm with its owner. */
  addFirm(change?: Partial<Session['firm']>): Promise<{ firm: Session['firm']; owner: TestPerson }>;
  /** A browser in which nobody is signed in. */
  visitor(headers?: Record<string, string>): TestClient;
  /** A browser in which this person is signed in; given a role, in which a new person of that role is. */
  signIn(who: Role | TestPerson): Promise<TestClient>;
  close(): Promise<void>;
}

interface TestAppOptions {
  environment?: NodeJS.ProcessEnv;
  parts?: Partial<Parts>;
  /** The application reaches PostgreSQL through this port instead of its own: for tests that cut the wire. */
  databasePort?: (port: number) => Promise<number>;
}

/** The whole server on a fresh database of its own, with a real SMTP server that keeps the mail, listening on loopback. */
export async function startTestApp(options: TestAppOptions = {}): Promise<TestApp> {
  const { environment = {}, parts: changed = {}, databasePort } = options;
  const database = await createTestDatabase();
  const databaseUrl = new URL(database.urls.app);
  if (databasePort) databaseUrl.port = String(await databasePort(Number(databaseUrl.port)));
  const lines: string[] = [];
  const logTo = new Writable({
    write(chunk, _encoding, done) {
      lines.push(...String(chunk).split('\n').filter(Boolean));
      done();
    },
  });
  const log = pino({ level: 'info', redact: { paths: REDACTED_PATHS, censor: '[redacted]' } }, logTo);
  let time = Date.parse(TEST_START);
  const now = () => new Date(time);
  const newId = () => uuidV7();

  const server = createServer();
  await listen(server);
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const settings = readSettings({ PUBLIC_URL: url, LOG_LEVEL: 'info', ...environment }, '/nowhere');
  const dataSource = await createDataSource({ url: databaseUrl.href, poolSize: 8 }).initialize();
  const catcher = await startMailCatcher({ folder: null, log, now, newId });
  const parts: Parts = {
    settings: { ...settings, sessionSecret: 'a secret that only the tests know, of some length' },
    dataSource,
    reference: loadReferenceData(),
    mailer: smtpMailer({
      smtpUrl: settings.smtpUrl ?? catcher.smtpUrl,
      from: 'Tarewright <no-reply@tarewright.test>',
      log,
    }),
    keptMail: catcher,
    background: backgroundWork(log),
    log,
    now,
    newId,
    checkAnswers: true,
    clientFolder: null,
    version: '0.0.0-test',
    ...changed,
  };
  server.on('request', createApp(parts));

  let people = 0;
  const describePerson = (firmId: string, name?: string): TestPerson => {
    people += 1;
    return { id: newId(), name: name ?? `Person ${people}`, email: `person-${people}@example.test`, firmId };
  };
  const addFirm: TestApp['addFirm'] = async (change = {}) => {
    const firm: Session['firm'] = {
      id: newId(),
      name: `Firm ${people + 1}`,
      jurisdiction: 'US',
      timeZone: 'America/New_York',
      locale: 'en-US',
      gwpSet: 'US-AIM',
      ...change,
    };
    const owner = describePerson(firm.id);
    await foundFirm(parts, firm, { ...owner, password: TEST_PASSWORD });
    return { firm, owner };
  };
  const { firm, owner } = await addFirm();

  const addPerson: TestApp['addPerson'] = async (roles, { firmId = firm.id, siteIds, name } = {}) => {
    const person = describePerson(firmId, name);
    await addColleague(parts, firmId, { ...person, password: TEST_PASSWORD }, { roles, siteIds: siteIds ?? null });
    return person;
  };
  const visitor: TestApp['visitor'] = (headers) => new TestClient(url, headers);

  return {
    url,
    parts,
    database,
    firm,
    owner,
    clock: {
      advance: (milliseconds) => {
        time += milliseconds;
      },
      set: (instant) => {
        time = Date.parse(instant);
      },
    },
    logLines: () => [...lines],
    async mails() {
      await parts.background.settled();
      return catcher.mails();
    },
    addPerson,
    addFirm,
    visitor,
    async signIn(who) {
      const person = typeof who === 'string' ? await addPerson([who]) : who;
      const client = visitor();
      const answer = await client.post('/session', { email: person.email, password: TEST_PASSWORD });
      if (answer.status !== 200) throw new Error(`sign-in answered ${answer.status}: ${JSON.stringify(answer.body)}`);
      return client;
    },
    async close() {
      server.closeAllConnections();
      await new Promise<void>((resolve) => server.close(() => resolve()));
      await parts.background.settled();
      await parts.mailer.close();
      await catcher.close();
      await dataSource.destroy();
      await database.drop();
    },
  };
}

function listen(server: Server): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
}
