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

describe('One’s own account', () => {
  it('changes name and units, and keeps what was not named', async () => {
    const client = await app.signIn('technician');
    const { body: me } = await client.get('/me');
    const changed = await client.patch('/me', null, { name: 'Ada Pipe', preferences: { mass: 'g' } });
    expect(changed.status).toBe(200);
    expect(changed.body).toMatchObject({
      name: 'Ada Pipe',
      preferences: { mass: 'g', length: 'ft' },
      version: me.version + 1,
    });
    const later = await client.patch('/me', null, { preferences: { length: 'm' } });
    expect(later.body.preferences).toMatchObject({ mass: 'g', length: 'm' });
  });

  it('answers in the person’s language where the request names none', async () => {
    const client = await app.signIn('technician');
    await client.patch('/me', null, { preferences: { locale: 'es-US' } });
    const own = await client.get('/nothing', { headers: { 'Accept-Language': '*' } });
    expect(own.body.title).toBe('No encontrado');
    const asked = await client.get('/nothing', { headers: { 'Accept-Language': 'en-GB' } });
    expect(asked.body.title).toBe('Not found');
  });
});

describe('Changing the password', () => {
  it('takes the current one, ends every other session, keeps this one under a new id, and says so by mail', async () => {
    const person = await app.addPerson(['technician']);
    const [phone, desk] = [await app.signIn(person), await app.signIn(person)];
    const earlier = phone.cookie;
    const newPassword = 'another long password';
    const answer = await phone.put('/me/password', { currentPassword: TEST_PASSWORD, newPassword });
    expect(answer.status).toBe(204);
    expect(phone.cookie).not.toBe(earlier);
    expect((await phone.get('/session')).status).toBe(200);
    expect((await desk.get('/session')).status).toBe(401);

    const signIn = (password: string) => app.visitor().post('/session', { email: person.email, password });
    expect((await signIn(TEST_PASSWORD)).status).toBe(401);
    expect((await signIn(newPassword)).status).toBe(200);
    const [mail] = await app.mails();
    expect(mail).toMatchObject({ to: [person.email], subject: 'Your Tarewright password was changed' });
  });

  it('refuses a wrong current one beside its field, and throttles guessing', async () => {
    const person = await app.addPerson(['technician']);
    const client = await app.signIn(person);
    const change = (currentPassword: string) =>
      client.put('/me/password', { currentPassword, newPassword: 'another long password' });
    const wrong = await change('not the password');
    expect(wrong.body).toMatchObject({
      status: 422,
      code: 'currentPasswordWrong',
      errors: [{ path: '/currentPassword' }],
    });
    for (let attempt = 1; attempt < 10; attempt++) await change('not the password');
    expect((await change(TEST_PASSWORD)).status).toBe(429);
    expect((await client.get('/session')).status).toBe(200);
  });

  it('names the least length of a new one and never repeats what was typed', async () => {
    const client = await app.signIn('technician');
    const answer = await client.put('/me/password', { currentPassword: TEST_PASSWORD, newPassword: 'too short' });
    expect(answer.body).toMatchObject({
      status: 422,
      errors: [{ path: '/newPassword', code: 'tooShort', allowed: 12 }],
    });
    expect(JSON.stringify(answer.body)).not.toContain('too short');
  });
});
