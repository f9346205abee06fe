import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp, type TestPerson } from '../support/app.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const buildToken = (change: object = {}) => ({
  id: app.parts.newId(),
  name: 'My script',
  scopes: ['read'],
  expiresOn: '2026-12-31',
  ...change,
});
const withToken = (secret: string) => app.visitor({ Authorization: `Bearer ${secret}` });
async function tokenOf(client: TestClient, change: object = {}): Promise<string> {
  const { status, body } = await client.post('/tokens', buildToken(change));
  expect(status).toBe(201);
  return body.secret;
}
async function demote(person: TestPerson, change: object): Promise<void> {
  const boss = await app.signIn(app.owner);
  const { body } = await boss.get(`/people/${person.id}`);
  expect((await boss.patch(`/people/${person.id}`, body.version, change)).status).toBe(200);
}

describe('Making a token', () => {
  it('shows its secret once and keeps only a hash', async () => {
    const client = await app.signIn('technician');
    const request = buildToken();
    const { status, body } = await client.post('/tokens', request);
    expect(status).toBe(201);
    expect(body).toMatchObject({
      id: request.id,
      name: 'My script',
      scopes: ['read'],
      expiresOn: '2026-12-31',
      lastUsedAt: null,
    });
    expect(body.secret).toMatch(/^twt_[\w-]{43}$/);
    const listed = await client.get('/tokens');
    expect(listed.body.items).toHaveLength(1);
    expect(JSON.stringify(listed.body)).not.toContain(body.secret);
    const rows = await app.database.query('superuser', 'SELECT row_to_json(t)::text AS row FROM personal_token t');
    expect(JSON.stringify(rows)).not.toContain(body.secret);
  });

  it('cannot be repeated: a second answer could not show the secret again', async () => {
    const client = await app.signIn('technician');
    const request = buildToken();
    await client.post('/tokens', request);
    expect((await client.post('/tokens', request)).body).toMatchObject({ status: 409, code: 'idReused' });
  });

  it('names the earliest and the latest day that it may end on', async () => {
    const client = await app.signIn('technician');
    const past = await client.post('/tokens', buildToken({ expiresOn: '2026-11-29' }));
    expect(past.body.errors).toMatchObject([
      { path: '/expiresOn', code: 'dayPast', given: '2026-11-29', allowed: '2026-11-30' },
    ]);
    const late = await client.post('/tokens', buildToken({ expiresOn: '2027-12-02' }));
    expect(late.body.errors).toMatchObject([{ path: '/expiresOn', code: 'dayTooLate', allowed: '2027-12-01' }]);
    expect((await client.post('/tokens', buildToken({ scopes: ['everything'] }))).body.errors).toMatchObject([
      { path: '/scopes/0', code: 'notAllowedValue' },
    ]);
  });

  it('is not possible with a token, and not for who only reads', async () => {
    const technician = await app.signIn('technician');
    const secret = await tokenOf(technician, { scopes: ['read', 'post', 'registers'] });
    expect((await withToken(secret).post('/tokens', buildToken())).status).toBe(403);
    const reader = await app.signIn('reader');
    expect((await reader.post('/tokens', buildToken())).status).toBe(403);
  });
});

describe('A token', () => {
  it('does what its scopes say and no more, though its person may', async () => {
    const boss = await app.signIn(app.owner);
    const program = withToken(await tokenOf(boss, { scopes: ['read'] }));
    expect((await program.get('/people')).status).toBe(200);
    expect((await program.get('/invitations')).body).toMatchObject({ status: 403, code: 'notPermitted' });
    expect((await program.get('/session')).body.permissions).toEqual(['records:read', 'people:read']);
  });

  it('cannot touch the account itself: name, password, sessions, firm', async () => {
    const person = await app.addPerson(['owner']);
    const client = await app.signIn(person);
    const program = withToken(await tokenOf(client, { scopes: ['read', 'post', 'registers'] }));
    expect((await program.patch('/me', null, { name: 'X' })).status).toBe(403);
    expect(
      (await program.put('/me/password', { currentPassword: 'a', newPassword: 'a long new password' })).status,
    ).toBe(403);
    expect((await program.delete('/session/everywhere')).status).toBe(403);
    expect((await program.put('/session/firm', { firmId: app.firm.id })).status).toBe(403);
    await program.delete('/session');
    expect((await client.get('/session')).status).toBe(200);
  });

  it('never does more than its person may at this moment', async () => {
    const person = await app.addPerson(['technician']);
    const program = withToken(await tokenOf(await app.signIn(person)));
    expect((await program.get('/people')).status).toBe(200);
    await demote(person, { roles: ['reader'] });
    expect((await program.get('/people')).status).toBe(403);
    await demote(person, { active: false });
    expect((await program.get('/session')).body).toMatchObject({ status: 401, code: 'tokenNotValid' });
  });

  it('ends at once when it is revoked, and with the day that it was made for', async () => {
    const client = await app.signIn('technician');
    const made = (await client.post('/tokens', buildToken())).body;
    const program = withToken(made.secret);
    expect((await program.get('/session')).status).toBe(200);
    expect((await client.delete(`/tokens/${made.id}`)).status).toBe(204);
    expect((await program.get('/session')).status).toBe(401);
    expect((await client.get('/tokens')).body.items).toEqual([]);
    expect((await client.delete(`/tokens/${made.id}`)).status).toBe(404);

    const short = withToken(await tokenOf(client, { expiresOn: '2026-12-01' }));
    app.clock.set('2026-12-01T23:59:59Z');
    expect((await short.get('/session')).status).toBe(200);
    app.clock.set('2026-12-02T00:00:00Z');
    expect((await short.get('/session')).status).toBe(401);
  });

  it('says when it was last used, within a minute', async () => {
    const client = await app.signIn('technician');
    const program = withToken(await tokenOf(client));
    await program.get('/session');
    await app.parts.background.settled();
    const first = app.parts.now().toISOString();
    app.clock.advance(30_000);
    await program.get('/session');
    await app.parts.background.settled();
    expect((await client.get('/tokens')).body.items[0].lastUsedAt).toBe(first);
    app.clock.advance(31_000);
    await program.get('/session');
    await app.parts.background.settled();
    expect((await client.get('/tokens')).body.items[0].lastUsedAt).toBe(app.parts.now().toISOString());
  });

  it('is its person’s alone: nobody else lists or revokes it, not even the owner', async () => {
    const client = await app.signIn('technician');
    const made = (await client.post('/tokens', buildToken())).body;
    const boss = await app.signIn(app.owner);
    expect((await boss.get('/tokens')).body.items.map(({ id }: { id: string }) => id)).not.toContain(made.id);
    expect((await boss.delete(`/tokens/${made.id}`)).status).toBe(404);
    expect((await withToken(made.secret).get('/session')).status).toBe(200);
  });

  it.each([
    'Bearer',
    'Bearer x',
    'Basic dGVzdDp0ZXN0',
    `Bearer twt_${'A'.repeat(43)}`,
    `Bearer ${'A'.repeat(5000)}`,
    'nonsense',
  ])('"%s" opens nothing', async (authorization) => {
    const answer = await app.visitor({ Authorization: authorization }).get('/session');
    expect(answer.status).toBe(401);
    expect(answer.body.code).toBe('tokenNotValid');
  });
});
