import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const A_DAY_MS = 24 * 3600 * 1000;
const AN_HOUR_MS = 3600 * 1000;
const startedSessions = async () =>
  (await app.database.query<{ n: number }>('superuser', 'SELECT count(*)::int AS n FROM session'))[0]?.n;

describe('Signing in', () => {
  it('answers an unknown address and a wrong password alike, and starts no session', async () => {
    const before = await startedSessions();
    const visitor = app.visitor();
    const unknown = await visitor.post('/session', { email: 'nobody@example.test', password: TEST_PASSWORD });
    const wrong = await visitor.post('/session', { email: app.owner.email, password: 'not the password' });

    expect(unknown.status).toBe(401);
    expect({ ...unknown.body, requestId: '' }).toEqual({ ...wrong.body, requestId: '' });
    expect(unknown.body).toMatchObject({ code: 'wrongCredentials', errors: [] });
    expect(visitor.cookie).toBeNull();
    expect(await startedSessions()).toBe(before);
  });

  it('takes the address however the phone’s keyboard wrote it', async () => {
    const person = await app.addPerson(['technician']);
    const answer = await app
      .visitor()
      .post('/session', { email: ` ${person.email.toUpperCase()} `, password: TEST_PASSWORD });
    expect(answer.status).toBe(200);
  });

  it('says who one is, for which firm, and what one may do', async () => {
    const client = await app.signIn('technician');
    const { body } = await client.get('/session');
    expect(body).toMatchObject({
      firm: app.firm,
      firms: [{ id: app.firm.id, name: app.firm.name }],
      roles: ['technician'],
      siteIds: null,
    });
    expect(body.permissions).toContain('entries:post');
    expect(body.permissions).not.toContain('people:manage');
    expect(body.person.preferences).toEqual({
      locale: 'en-US',
      mass: 'lbOz',
      length: 'ft',
      pressure: 'psig',
      temperature: 'F',
      vacuum: 'micron',
      theme: 'system',
    });
  });

  it('limits a reader to the sites given, and nobody who works for the firm', async () => {
    const siteIds = [app.parts.newId()];
    const reader = await app.signIn(await app.addPerson(['reader'], { siteIds }));
    expect((await reader.get('/session')).body).toMatchObject({ siteIds, permissions: ['records:read'] });
    const worker = await app.signIn(await app.addPerson(['reader', 'technician'], { siteIds }));
    expect((await worker.get('/session')).body.siteIds).toBeNull();
  });

  it('sets a cookie that scripts and other sites cannot use, with an id that was not there before', async () => {
    const planted = 'tarewright=s%3Aplanted.signature';
    const client = app.visitor();
    client.cookie = planted;
    const answer = await client.post('/session', { email: app.owner.email, password: TEST_PASSWORD });
    const [setCookie] = answer.headers.getSetCookie();
    expect(setCookie).toMatch(/^tarewright=/);
    expect(setCookie).toMatch(/; HttpOnly/);
    expect(setCookie).toMatch(/; SameSite=Lax/);
    expect(setCookie).not.toMatch(/planted/);

    const again = await client.post('/session', { email: app.owner.email, password: TEST_PASSWORD });
    expect(again.headers.getSetCookie()[0]).not.toBe(setCookie);
  });

  it('ends the earlier session of the same browser', async () => {
    const client = await app.signIn(app.owner);
    const earlier = client.cookie;
    await client.post('/session', { email: app.owner.email, password: TEST_PASSWORD });
    const old = app.visitor();
    old.cookie = earlier;
    expect((await old.get('/session')).status).toBe(401);
  });

  it('keeps no session id in the database that would open one', async () => {
    const client = await app.signIn('technician');
    const id = String(/s%3A([^.]+)\./.exec(String(client.cookie))?.[1]);
    const rows = await app.database.query<{ sid: string }>('superuser', 'SELECT sid FROM session');
    expect(rows.map(({ sid }) => sid)).not.toContain(id);
    expect(rows.map(({ sid }) => sid)).toContain(createHash('sha256').update(id).digest('hex'));
  });

  it('stops an account after ten failures, right password or not, and lets it in again a quarter of an hour later', async () => {
    const person = await app.addPerson(['technician']);
    const signIn = (password: string) => app.visitor().post('/session', { email: person.email, password });
    for (let attempt = 0; attempt < 10; attempt++) expect((await signIn('wrong password')).status).toBe(401);

    const stopped = await signIn(TEST_PASSWORD);
    expect(stopped.status).toBe(429);
    expect(stopped.body).toMatchObject({
      code: 'tooManySignIns',
      detail: 'Too many failed sign-ins. Try again in 15 minutes.',
    });
    expect(stopped.headers.get('retry-after')).toBe('900');
    expect((await app.visitor().post('/session', { email: app.owner.email, password: TEST_PASSWORD })).status).toBe(
      200,
    );

    app.clock.advance(15 * 60 * 1000 + 1);
    expect((await signIn(TEST_PASSWORD)).status).toBe(200);
  });

  it('lets no more than ten of many simultaneous guesses be judged', async () => {
    const person = await app.addPerson(['technician']);
    const guesses = Array.from({ length: 25 }, (_, n) =>
      app.visitor().post('/session', { email: person.email, password: `wrong guess ${n}` }),
    );
    const statuses = (await Promise.all(guesses)).map(({ status }) => status);
    expect(statuses.filter((status) => status === 401).length).toBeLessThanOrEqual(10);
    expect(statuses.filter((status) => status === 429).length).toBeGreaterThanOrEqual(15);
    app.clock.advance(15 * 60 * 1000 + 1);
  });

  it('stops an address that tries many accounts', async () => {
    const guess = (n: number) =>
      app.visitor().post('/session', { email: `spray-${n}@example.test`, password: 'wrong password' });
    const statuses: number[] = [];
    for (let n = 0; n < 52; n++) statuses.push((await guess(n)).status);
    expect(statuses.slice(0, 50)).not.toContain(429);
    expect(statuses.slice(50)).toEqual([429, 429]);
    app.clock.advance(15 * 60 * 1000 + 1);
  });

  it('tells somebody who was taken out of every firm so, and only after the right password', async () => {
    const person = await app.addPerson(['technician']);
    await app.database.query('superuser', 'ALTER TABLE membership DISABLE TRIGGER USER');
    await app.database.query('superuser', 'UPDATE membership SET active = false WHERE person_id = $1', [person.id]);
    await app.database.query('superuser', 'ALTER TABLE membership ENABLE TRIGGER USER');
    const signIn = (password: string) => app.visitor().post('/session', { email: person.email, password });
    expect((await signIn('wrong password')).body.code).toBe('wrongCredentials');
    expect((await signIn(TEST_PASSWORD)).body).toMatchObject({ status: 403, code: 'noActiveFirm' });
  });
});

describe('A session', () => {
  it('ends with signing out, and a copy of its cookie opens nothing', async () => {
    const client = await app.signIn('technician');
    const copy = app.visitor();
    copy.cookie = client.cookie;
    expect((await client.delete('/session')).status).toBe(204);
    expect((await copy.get('/session')).body).toMatchObject({ status: 401, code: 'signInRequired' });
  });

  it('ends after seven days without a request, and is kept by one a day', async () => {
    const used = await app.signIn('technician');
    const unused = await app.signIn('technician');
    for (let day = 0; day < 8; day++) {
      app.clock.advance(A_DAY_MS);
      expect((await used.get('/session')).status).toBe(200);
      await app.parts.background.settled();
    }
    expect((await unused.get('/session')).status).toBe(401);
  });

  it('ends thirty days after sign-in, however much it is used', async () => {
    const client = await app.signIn('technician');
    for (let day = 0; day < 29; day++) {
      app.clock.advance(A_DAY_MS);
      expect((await client.get('/session')).status).toBe(200);
      await app.parts.background.settled();
    }
    app.clock.advance(A_DAY_MS + AN_HOUR_MS);
    expect((await client.get('/session')).status).toBe(401);
  });

  it('is not written again with every request', async () => {
    const client = await app.signIn('technician');
    const writes = async () => {
      await app.parts.background.settled();
      const [row] = await app.database.query<{ n: number }>(
        'superuser',
        'SELECT max(xmin::text::bigint)::int AS n FROM session',
      );
      return row?.n;
    };
    const before = await writes();
    await client.get('/session');
    await client.get('/session');
    expect(await writes()).toBe(before);
    app.clock.advance(6 * 60 * 1000);
    await client.get('/session');
    expect(await writes()).not.toBe(before);
  });

  it('ends everywhere at once, for this person alone', async () => {
    const person = await app.addPerson(['technician']);
    const [phone, desk, other] = [await app.signIn(person), await app.signIn(person), await app.signIn('technician')];
    expect((await phone.delete('/session/everywhere')).status).toBe(204);
    expect((await phone.get('/session')).status).toBe(401);
    expect((await desk.get('/session')).status).toBe(401);
    expect((await other.get('/session')).status).toBe(200);
  });

  it('shows a role that was taken away at the next request', async () => {
    const person = await app.addPerson(['technician', 'owner']);
    const client = await app.signIn(person);
    expect((await client.get('/session')).body.permissions).toContain('people:manage');
    const boss = await app.signIn(app.owner);
    const { body } = await boss.get(`/people/${person.id}`);
    await boss.patch(`/people/${person.id}`, body.version, { roles: ['technician'] });
    expect((await client.get('/session')).body.permissions).not.toContain('people:manage');
    expect((await client.get('/invitations')).status).toBe(403);
  });

  it('with a forged or cut cookie is nobody’s', async () => {
    const client = await app.signIn('technician');
    for (const cookie of [
      'tarewright=',
      'tarewright=s%3Ax.y',
      String(client.cookie).slice(0, -3),
      `${client.cookie}x`,
    ]) {
      const forged = app.visitor();
      forged.cookie = cookie;
      expect((await forged.get('/session')).status).toBe(401);
    }
  });

  it('works for one of the person’s firms, can change to another, and starts in the one worked in last', async () => {
    const { firm: second, owner } = await app.addFirm({ name: 'Second firm', jurisdiction: 'EU', locale: 'es-ES' });
    const { firm: third } = await app.addFirm({ name: 'Third firm' });
    const client = await app.signIn(owner);
    expect((await client.get('/session')).body.firm.id).toBe(second.id);

    const refused = await client.put('/session/firm', { firmId: third.id });
    expect(refused.body).toMatchObject({
      status: 422,
      code: 'notAMember',
      errors: [{ path: '/firmId', code: 'notAMember' }],
    });
    expect((await client.put('/session/firm', { firmId: app.parts.newId() })).body.code).toBe('notAMember');
  });
});
