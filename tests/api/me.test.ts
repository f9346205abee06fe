import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_PASSWORD, type TestApp } from '../support/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

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
