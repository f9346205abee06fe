import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const NEW_PASSWORD = 'a new and long password';
const tokenIn = (text = '') => String(/reset-password#token=([\w-]+)/.exec(text)?.[1]);
const ask = (email: string) => app.visitor().post('/session/password-reset', { email });
const complete = (token: string, newPassword = NEW_PASSWORD) =>
  app.visitor().put('/session/password-reset', { token, newPassword });
const signIn = (email: string, password: string) => app.visitor().post('/session', { email, password });

describe('A forgotten password', () => {
  it('gets the same answer for an unknown address, and no mail', async () => {
    const { email } = await app.addPerson(['technician']);
    const mailsBefore = (await app.mails()).length;
    const unknown = await ask('nobody@example.test');
    expect((await app.mails()).length).toBe(mailsBefore);
    const known = await ask(email);
    expect((await app.mails()).length).toBe(mailsBefore + 1);
    expect([unknown.status, unknown.body]).toEqual([202, '']);
    expect([known.status, known.body]).toEqual([202, '']);
  });

  it('is replaced by the mailed link once, which ends every session', async () => {
    const person = await app.addPerson(['technician']);
    const phone = await app.signIn(person);
    await ask(person.email);
    const [mail] = await app.mails();
    expect(mail).toMatchObject({ to: [person.email], subject: 'Set a new Tarewright password' });
    expect(mail?.text).toContain(`${app.url}/reset-password#token=`);
    const token = tokenIn(mail?.text);

    expect((await complete(token)).status).toBe(204);
    expect((await phone.get('/session')).status).toBe(401);
    expect((await signIn(person.email, TEST_PASSWORD)).status).toBe(401);
    expect((await signIn(person.email, NEW_PASSWORD)).status).toBe(200);
    expect((await app.mails())[0]?.subject).toBe('Your Tarewright password was changed');

    const again = await complete(token, 'yet another long password');
    expect(again.body).toMatchObject({
      status: 422,
      code: 'linkNotValid',
      errors: [{ path: '/token', code: 'linkNotValid' }],
    });
    expect(JSON.stringify(again.body)).not.toContain(token);
    expect((await signIn(person.email, NEW_PASSWORD)).status).toBe(200);
  });

  it('lets one of two who open the link at once set theirs', async () => {
    const person = await app.addPerson(['technician']);
    await ask(person.email);
    const token = tokenIn((await app.mails())[0]?.text);
    const answers = await Promise.all([
      complete(token, 'the first long password'),
      complete(token, 'the second long password'),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 422]);
  });

  it('keeps nothing of a refused new password: the link still works', async () => {
    const person = await app.addPerson(['technician']);
    await ask(person.email);
    const token = tokenIn((await app.mails())[0]?.text);
    expect((await complete(token, 'short')).body).toMatchObject({
      status: 422,
      code: 'tooShort',
      errors: [{ path: '/newPassword' }],
    });
    expect((await complete(token)).status).toBe(204);
  });

  it('cannot be replaced an hour later, nor by a link before the newest', async () => {
    const person = await app.addPerson(['technician']);
    await ask(person.email);
    const first = tokenIn((await app.mails())[0]?.text);
    app.clock.advance(60_000);
    await ask(person.email);
    const second = tokenIn((await app.mails())[0]?.text);
    expect(second).not.toBe(first);
    expect((await complete(first)).body.code).toBe('linkNotValid');
    app.clock.advance(3600 * 1000);
    expect((await complete(second)).body.code).toBe('linkNotValid');
  });

  it('cannot be replaced by guessing', async () => {
    expect((await complete('A'.repeat(43))).body.code).toBe('linkNotValid');
  });

  it('is mailed for three times in a quarter of an hour and no more', async () => {
    const person = await app.addPerson(['technician']);
    const mailsBefore = (await app.mails()).length;
    for (let n = 0; n < 5; n++) {
      expect((await ask(person.email)).status).toBe(202);
      await app.parts.background.settled();
    }
    expect((await app.mails()).length).toBe(mailsBefore + 3);
  });

  it('is mailed about in the person’s language', async () => {
    const person = await app.addPerson(['technician']);
    const client = await app.signIn(person);
    await client.patch('/me', null, { preferences: { locale: 'es-ES' } });
    await ask(person.email);
    expect((await app.mails())[0]?.subject).toBe('Elija una nueva contraseña de Tarewright');
  });

  it('leaves no link and no password in the log', async () => {
    const person = await app.addPerson(['technician']);
    await ask(person.email);
    const token = tokenIn((await app.mails())[0]?.text);
    await complete(token);
    const log = app.logLines().join('\n');
    expect(log).toContain('"path":"/api/v1/session/password-reset"');
    expect(log).not.toContain(token);
    expect(log).not.toContain(NEW_PASSWORD);
    expect(log).not.toContain(person.email);
  });
});

describe('When the mail server refuses', () => {
  it('the log says so, and the answer tells nothing about the address', async () => {
    const refusing = await startTestApp({ environment: { SMTP_URL: 'smtp://127.0.0.1:9' } });
    try {
      const answer = await refusing.visitor().post('/session/password-reset', { email: refusing.owner.email });
      expect(answer.status).toBe(202);
      await refusing.parts.background.settled();
      expect(refusing.logLines().join('\n')).toContain('mail was not accepted');
    } finally {
      await refusing.close();
    }
  });
});
