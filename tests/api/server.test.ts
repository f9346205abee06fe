import { mkdtempSync, readdirSync, readFileSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 as uuidV7 } from 'uuid';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createDataSource } from '../../server/database/data-source.ts';
import { type RunningServer, startServer } from '../../server/main.ts';
import { foundFirm } from '../../server/people/found-firm.ts';
import { readSettings } from '../../server/settings.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';

const OWNER = { id: uuidV7(), name: 'Owner', email: 'owner@example.test', password: 'correct horse battery' };

let database: TestDatabase;
let home: string;
let server: RunningServer;
beforeAll(async () => {
  database = await createTestDatabase();
  const dataSource = await createDataSource({ url: database.urls.app }).initialize();
  const firm = {
    id: uuidV7(),
    name: 'Firm',
    jurisdiction: 'US',
    timeZone: 'UTC',
    locale: 'en-US',
    gwpSet: 'US-AIM',
  } as const;
  await foundFirm({ dataSource, now: () => new Date('2026-11-30T15:00:00Z'), newId: () => uuidV7() }, firm, OWNER);
  await dataSource.destroy();
});
afterAll(() => database.drop());
beforeEach(async () => {
  home = mkdtempSync(path.join(tmpdir(), 'home-'));
  const settings = readSettings({ TAREWRIGHT_HOME: home, LOG_LEVEL: 'silent' }, '/nowhere');
  server = await startServer({
    settings: { ...settings, port: 0, sessionSecret: 'a secret that only the tests know, of some length' },
    databaseUrls: database.urls,
  });
});
afterEach(() => rmSync(home, { recursive: true, force: true }));

const post = (address: string, body: object) =>
  fetch(`${server.address}/api/v1${address}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify(body),
  });

describe('The server', () => {
  it('says that it is ready, and with which version it answers', async () => {
    expect(await (await fetch(`${server.address}/api/v1/ready`)).json()).toEqual({ status: 'ready' });
    const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string };
    expect(await (await fetch(`${server.address}/api/v1/health`)).json()).toEqual({ status: 'ok', version });
    await server.close();
  });

  it('is not ready for a database that lacks what this version reads', async () => {
    await database.query('superuser', 'ALTER TABLE customer RENAME COLUMN note TO remark');
    const behind = await fetch(`${server.address}/api/v1/ready`);
    expect([behind.status, ((await behind.json()) as { code: string }).code]).toEqual([503, 'notReady']);
    await database.query('superuser', 'ALTER TABLE customer RENAME COLUMN remark TO note');
    expect((await fetch(`${server.address}/api/v1/ready`)).status).toBe(200);
    await server.close();
  });

  it('lets what is under way end before it stops, the mail behind an answer too, and then takes nothing more', async () => {
    const signingIn = post('/session', { email: OWNER.email, password: OWNER.password });
    const asked = await post('/session/password-reset', { email: OWNER.email });
    expect(asked.status).toBe(202);
    await server.close();

    expect((await signingIn).status).toBe(200);
    const folder = path.join(home, 'mail');
    const mails = readdirSync(folder).map((name) => JSON.parse(readFileSync(path.join(folder, name), 'utf8')));
    expect(mails).toMatchObject([{ to: [OWNER.email] }]);
    await expect(fetch(`${server.address}/api/v1/health`)).rejects.toThrow();
  });

  it('keeps mail where only its user can read it', async () => {
    await post('/session/password-reset', { email: OWNER.email });
    await server.close();
    const folder = path.join(home, 'mail');
    expect(statSync(folder).mode & 0o777).toBe(0o700);
    for (const name of readdirSync(folder)) expect(statSync(path.join(folder, name)).mode & 0o777).toBe(0o600);
  });
});
