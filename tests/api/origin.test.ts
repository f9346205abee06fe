import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

/** A change that another site's page would like to send in the name of who is signed in here. */
async function changeName(headers: Record<string, string>, cookie?: string | null) {
  const client = await app.signIn('technician');
  const response = await fetch(`${app.url}/api/v1/me`, {
    method: 'PATCH',
    body: JSON.stringify({ name: 'Changed' }),
    headers: { 'Content-Type': 'application/json', Cookie: cookie ?? String(client.cookie), ...headers },
  });
  return { status: response.status, code: ((await response.json()) as { code?: string }).code };
}

describe('A change that carries the session cookie', () => {
  it.each([
    ['our own origin', () => ({ Origin: app.url })],
    ['our own origin, as current browsers say it', () => ({ Origin: app.url, 'Sec-Fetch-Site': 'same-origin' })],
    ['no origin but the browser’s word that it is ours', () => ({ 'Sec-Fetch-Site': 'same-origin' })],
    ['this machine under its other name', () => ({ Origin: app.url.replace('127.0.0.1', 'localhost') })],
  ])('passes with %s', async (_what, headers) => {
    expect((await changeName(headers())).status).toBe(200);
  });

  it.each([
    ['another site', () => ({ Origin: 'https://elsewhere.example' })],
    ['another port of this machine', () => ({ Origin: 'http://127.0.0.1:1' })],
    ['another scheme', () => ({ Origin: app.url.replace('http:', 'https:') })],
    ['an address that only begins like ours', () => ({ Origin: `${app.url}.elsewhere.example` })],
    ['an origin that the browser hides', () => ({ Origin: 'null' })],
    ['no origin at all', () => ({})],
    ['a sister site', () => ({ Origin: app.url, 'Sec-Fetch-Site': 'same-site' })],
    ['an address typed by hand', () => ({ 'Sec-Fetch-Site': 'none' })],
    [
      'a Host header that claims the foreign name',
      () => ({ Origin: 'http://elsewhere.example', Host: 'elsewhere.example' }),
    ],
  ])('is refused with %s', async (_what, headers) => {
    expect(await changeName(headers())).toEqual({ status: 403, code: 'otherOrigin' });
  });

  it('is refused even when the cookie stands among others', async () => {
    const client = await app.signIn('technician');
    const cookie = `theme=dark; ${client.cookie}; tracking=none`;
    expect(await changeName({ Origin: 'https://elsewhere.example' }, cookie)).toEqual({
      status: 403,
      code: 'otherOrigin',
    });
  });
});

describe('A request without the cookie', () => {
  it('needs no origin: it carries nobody’s rights', async () => {
    const response = await fetch(`${app.url}/api/v1/calculations/joint-torque`, {
      method: 'POST',
      body: '{"odMm":6.35}',
      headers: { 'Content-Type': 'application/json', Origin: 'https://elsewhere.example' },
    });
    expect(response.status).toBe(200);
  });

  it('with a token needs no origin either, and a cookie beside it is not looked at', async () => {
    const client = await app.signIn('technician');
    const made = await client.post('/tokens', {
      id: app.parts.newId(),
      name: 'script',
      scopes: ['read'],
      expiresOn: '2026-12-31',
    });
    const boss = await app.signIn(app.owner);
    const response = await fetch(`${app.url}/api/v1/session`, {
      headers: { Authorization: `Bearer ${made.body.secret}`, Cookie: String(boss.cookie) },
    });
    expect(((await response.json()) as { roles: string[] }).roles).toEqual(['technician']);
    const wrong = await fetch(`${app.url}/api/v1/session`, {
      headers: { Authorization: 'Bearer nonsense', Cookie: String(boss.cookie) },
    });
    expect(wrong.status).toBe(401);
  });
});

describe('Reading', () => {
  it('needs no origin, and no other site gets to read the answer', async () => {
    const client = await app.signIn('technician');
    const response = await fetch(`${app.url}/api/v1/session`, {
      headers: { Cookie: String(client.cookie), Origin: 'https://elsewhere.example' },
    });
    expect(response.status).toBe(200);
    expect(response.headers.get('access-control-allow-origin')).toBeNull();
    expect(response.headers.get('cross-origin-resource-policy')).toBe('same-origin');
  });
});

describe('Every answer', () => {
  it('forbids scripts and styles that are not ours, frames around it, and guessing of types', async () => {
    const { headers } = await app.visitor().get('/health');
    const policy = String(headers.get('content-security-policy'));
    expect(policy).toContain("script-src 'self'");
    expect(policy).toContain("style-src 'self'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toMatch(/unsafe|upgrade-insecure/);
    expect(headers.get('x-content-type-options')).toBe('nosniff');
    expect(headers.get('x-powered-by')).toBeNull();
    expect(headers.get('strict-transport-security')).toBeNull();
  });

  it('behind TLS demands TLS, and the cookie is secure and bound to the host', async () => {
    const behind = await startTestApp({
      environment: { PUBLIC_URL: 'https://records.example.test', TRUST_PROXY: '1' },
    });
    try {
      const answer = await behind
        .visitor({ Origin: 'https://records.example.test', 'X-Forwarded-Proto': 'https' })
        .post('/session', {
          email: behind.owner.email,
          password: 'correct horse battery',
        });
      expect(answer.status).toBe(200);
      expect(answer.headers.getSetCookie()[0]).toMatch(
        /^__Host-tarewright=.*; Path=\/; .*HttpOnly; Secure; SameSite=Lax$/,
      );
      expect(answer.headers.get('strict-transport-security')).toContain('max-age=31536000');
      expect(answer.headers.get('content-security-policy')).toContain('upgrade-insecure-requests');
    } finally {
      await behind.close();
    }
  });
});
