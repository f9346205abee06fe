import { SMTPServer } from 'smtp-server';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
let boss: TestClient;
beforeAll(async () => {
  app = await startTestApp();
  boss = await app.signIn(app.owner);
});
afterAll(() => app.close());

let invited = 0;
const buildInvitation = (change: object = {}) => {
  invited += 1;
  return {
    id: app.parts.newId(),
    email: `new-${invited}@example.test`,
    name: `New ${invited}`,
    roles: ['technician'],
    ...change,
  };
};
const tokenIn = (text = '') => String(/invitation#token=([\w-]+)/.exec(text)?.[1]);
const newestToken = async () => tokenIn((await app.mails())[0]?.text);
const accept = (token: string, change: object = {}) => {
  const visitor = app.visitor();
  return visitor
    .post('/invitations/accept', { token, name: 'Chosen Name', password: 'a long chosen password', ...change })
    .then((answer) => ({ ...answer, visitor }));
};
const A_DAY_MS = 24 * 3600 * 1000;

describe('Inviting', () => {
  it('is the owner’s alone', async () => {
    expect((await app.visitor().post('/invitations', buildInvitation())).status).toBe(401);
    for (const role of ['technician', 'complianceManager', 'reader'] as const) {
      const client = await app.signIn(role);
      expect((await client.post('/invitations', buildInvitation())).body).toMatchObject({
        status: 403,
        code: 'notPermitted',
      });
      expect((await client.get('/invitations')).status).toBe(403);
    }
  });

  it('refuses an address of somebody who works here, beside the field', async () => {
    const person = await app.addPerson(['technician']);
    const answer = await boss.post('/invitations', buildInvitation({ email: person.email.toUpperCase() }));
    expect(answer.body).toMatchObject({
      status: 422,
      code: 'alreadyMember',
      errors: [{ path: '/email', given: person.email }],
    });
  });

  it('refuses sites that the firm does not have, another firm’s included', async () => {
    const strange = app.parts.newId();
    const answer = await boss.post('/invitations', buildInvitation({ roles: ['reader'], siteIds: [strange] }));
    expect(answer.body).toMatchObject({
      status: 422,
      code: 'notKnownHere',
      errors: [{ path: '/siteIds/0', given: strange }],
    });
  });

  it('invites and mails once however often the same request arrives, and refuses the id for anything else', async () => {
    const request = buildInvitation();
    const first = await boss.post('/invitations', request);
    const mails = (await app.mails()).length;
    expect(first.status).toBe(201);
    expect(first.body).toMatchObject({
      email: request.email,
      mailSent: true,
      acceptedAt: null,
      expiresAt: '2026-12-07T15:00:00.000Z',
    });
    const second = await boss.post('/invitations', request);
    expect([second.status, second.body]).toEqual([200, first.body]);
    expect((await app.mails()).length).toBe(mails);
    expect((await boss.post('/invitations', { ...request, name: 'Other' })).body).toMatchObject({
      status: 409,
      code: 'idReused',
    });
  });

  it('mails in the language asked for, with who invites, for which firm and until when', async () => {
    const request = buildInvitation({ locale: 'es-ES' });
    await boss.post('/invitations', request);
    const [mail] = await app.mails();
    expect(mail).toMatchObject({
      to: [request.email],
      subject: `${app.owner.name} le invita a Tarewright para ${app.firm.name}`,
    });
    expect(mail?.text).toContain('7 de diciembre de 2026');
    expect(mail?.text).toContain(`${app.url}/invitation#token=`);
  });

  it('cannot smuggle a second recipient or header into the mail by a name', async () => {
    const request = buildInvitation({ name: 'Eve\r\nBcc: spy@example.test', email: 'eve@example.test' });
    await boss.post('/invitations', request);
    const [mail] = await app.mails();
    expect(mail?.to).toEqual(['eve@example.test']);
  });

  it('lists invitations newest first, page by page', async () => {
    for (let n = 0; n < 3; n++) {
      app.clock.advance(1000);
      await boss.post('/invitations', buildInvitation());
    }
    const all = (await boss.get('/invitations')).body.items.map(({ id }: { id: string }) => id);
    const first = (await boss.get('/invitations?limit=2')).body;
    const second = (await boss.get(`/invitations?limit=2&cursor=${first.nextCursor}`)).body;
    expect([...first.items, ...second.items].map(({ id }) => id)).toEqual(all.slice(0, 4));
    expect(JSON.stringify(first)).not.toMatch(/token/i);
  });
});

describe('Accepting an invitation', () => {
  it('makes the account with the chosen name and password, in the roles given, and signs in', async () => {
    const request = buildInvitation({ roles: ['technician', 'complianceManager'], locale: 'es-US' });
    await boss.post('/invitations', request);
    const token = await newestToken();
    const preview = await app.visitor().post('/invitations/preview', { token });
    expect(preview.body).toEqual({
      firmName: app.firm.name,
      email: request.email,
      name: request.name,
      hasAccount: false,
    });

    const { status, body, visitor } = await accept(token);
    expect(status).toBe(200);
    expect(body).toMatchObject({
      person: { name: 'Chosen Name', email: request.email, preferences: { locale: 'es-US' } },
      firm: { id: app.firm.id },
      roles: ['technician', 'complianceManager'],
    });
    expect((await visitor.get('/session')).status).toBe(200);
    const listed = (await boss.get('/people')).body.items.find(
      ({ email }: { email: string }) => email === request.email,
    );
    expect(listed).toMatchObject({
      name: 'Chosen Name',
      roles: ['technician', 'complianceManager'],
      active: true,
      lastSignInAt: app.parts.now().toISOString(),
    });
  });

  it('works once', async () => {
    await boss.post('/invitations', buildInvitation());
    const token = await newestToken();
    const answers = await Promise.all([accept(token), accept(token)]);
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    expect((await accept(token)).body).toMatchObject({
      status: 422,
      code: 'linkNotValid',
      errors: [{ path: '/token' }],
    });
    expect((await app.visitor().post('/invitations/preview', { token })).body.code).toBe('linkNotValid');
  });

  it('works for seven days', async () => {
    await boss.post('/invitations', buildInvitation());
    const early = await newestToken();
    app.clock.advance(7 * A_DAY_MS - 1000);
    expect((await accept(early)).status).toBe(200);
    boss = await app.signIn(app.owner);
    await boss.post('/invitations', buildInvitation());
    const late = await newestToken();
    app.clock.advance(7 * A_DAY_MS);
    expect((await accept(late)).body.code).toBe('linkNotValid');
    boss = await app.signIn(app.owner);
  });

  it('works only by the newest mail, and not after it was taken back', async () => {
    const request = buildInvitation();
    await boss.post('/invitations', request);
    const first = await newestToken();
    expect((await boss.post(`/invitations/${request.id}/mail`)).body).toMatchObject({ mailSent: true });
    const second = await newestToken();
    expect((await accept(first)).body.code).toBe('linkNotValid');
    expect((await boss.delete(`/invitations/${request.id}`)).status).toBe(204);
    expect((await accept(second)).body.code).toBe('linkNotValid');
  });

  it('takes somebody with an account in another firm in, by that account’s password alone', async () => {
    const { owner } = await app.addFirm({ name: 'Elsewhere' });
    await boss.post('/invitations', buildInvitation({ email: owner.email }));
    const token = await newestToken();
    expect((await app.visitor().post('/invitations/preview', { token })).body.hasAccount).toBe(true);
    expect((await accept(token, { password: 'not that password' })).body).toMatchObject({
      status: 401,
      code: 'wrongCredentials',
    });
    const { status, body } = await accept(token, { password: TEST_PASSWORD });
    expect(status).toBe(200);
    expect(body.person.name).toBe(owner.name);
    expect(body.firm.id).toBe(app.firm.id);
    expect(body.firms.map(({ name }: { name: string }) => name)).toEqual(['Elsewhere', app.firm.name].sort());

    const client = await app.signIn(owner);
    expect((await client.get('/session')).body.firm.id).toBe(app.firm.id);
    expect((await client.put('/session/firm', { firmId: owner.firmId })).body.roles).toEqual(['owner']);
    expect((await client.get('/session')).body.firm.name).toBe('Elsewhere');
  });

  it('takes somebody back who was taken out, in the new roles', async () => {
    const person = await app.addPerson(['technician']);
    const { body } = await boss.get(`/people/${person.id}`);
    await boss.patch(`/people/${person.id}`, body.version, { active: false });
    await boss.post('/invitations', buildInvitation({ email: person.email, roles: ['complianceManager'] }));
    const answer = await accept(await newestToken(), { password: TEST_PASSWORD });
    expect(answer.body.roles).toEqual(['complianceManager']);
  });

  it('stands in the firm’s chain of records, signed by who joined', async () => {
    await boss.post('/invitations', buildInvitation());
    const { body } = await accept(await newestToken());
    const rows = await app.database.query<{ content: string }>(
      'superuser',
      "SELECT content FROM journal_record WHERE noun = 'membership' AND subject_id = $1",
      [body.person.id],
    );
    expect(rows.map(({ content }) => JSON.parse(content))).toMatchObject([
      {
        type: 'register',
        version: 1,
        before: null,
        after: { roles: ['technician'], active: true },
        recordedBy: body.person.id,
      },
    ]);
  });

  it('refuses to answer about an accepted one as if it were open', async () => {
    const request = buildInvitation();
    await boss.post('/invitations', request);
    await accept(await newestToken());
    expect((await boss.delete(`/invitations/${request.id}`)).body).toMatchObject({ status: 409, code: 'inUse' });
    expect((await boss.post(`/invitations/${request.id}/mail`)).body).toMatchObject({ status: 409, code: 'inUse' });
  });
});

describe('Another firm', () => {
  it('neither sees nor takes back our invitations', async () => {
    const request = buildInvitation();
    await boss.post('/invitations', request);
    const { owner } = await app.addFirm();
    const stranger = await app.signIn(owner);
    expect((await stranger.get('/invitations')).body).toEqual({ items: [], nextCursor: null });
    expect((await stranger.delete(`/invitations/${request.id}`)).status).toBe(404);
    expect((await stranger.post(`/invitations/${request.id}/mail`)).status).toBe(404);
  });
});

describe('When the mail server refuses the address', () => {
  it('the invitation stands and the answer says honestly that no mail went out', async () => {
    const server = new SMTPServer({
      disabledCommands: ['AUTH', 'STARTTLS'],
      logger: false,
      onRcptTo: (_address, _session, done) => done(Object.assign(new Error('no such mailbox'), { responseCode: 550 })),
    });
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.server.address() as { port: number };
    const refusing = await startTestApp({ environment: { SMTP_URL: `smtp://127.0.0.1:${port}` } });
    try {
      const client = await refusing.signIn(refusing.owner);
      const answer = await client.post('/invitations', buildInvitation());
      expect(answer.status).toBe(201);
      expect(answer.body.mailSent).toBe(false);
      expect((await client.get('/invitations')).body.items).toHaveLength(1);
      expect(refusing.logLines().join('\n')).toContain('"reason":"550"');
    } finally {
      await refusing.close();
      await new Promise<void>((resolve) => server.close(() => resolve()));
    }
  });
});
