import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { changePreferences } from '../lib/preferences.ts';
import { http, NetworkError, Problem, queryString, whenSignedOut } from './http.ts';
import { placeAfterSignIn, signInPath } from './session.ts';

const asked: { url: string; init: RequestInit }[] = [];
let respond: () => Promise<Response>;

beforeEach(() => {
  asked.length = 0;
  vi.stubGlobal('fetch', (url: string, init: RequestInit) => {
    asked.push({ url, init });
    return respond();
  });
});
afterEach(() => vi.unstubAllGlobals());

const problem = (status: number, body: object) =>
  Promise.resolve(
    new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/problem+json' } }),
  );

describe('A request to the server', () => {
  it('asks in the person’s language, with the version that the change was made on', async () => {
    changePreferences({ locale: 'es-US' });
    respond = () => Promise.resolve(new Response('{"ok":true}'));
    await expect(http.patch('/units/1', { name: 'x' }, { version: 7 })).resolves.toEqual({ ok: true });
    expect(asked[0]?.url).toBe('/api/v1/units/1');
    expect(asked[0]?.init).toMatchObject({
      method: 'PATCH',
      credentials: 'same-origin',
      body: '{"name":"x"}',
      headers: { 'Accept-Language': 'es-US', 'If-Match': '"7"', 'Content-Type': 'application/json' },
    });
  });

  it('gives a refusal with its code, sentence, places and request id', async () => {
    const errors = [{ path: '/email', code: 'notEmail', message: 'This is not an e-mail address.', given: 'x' }];
    respond = () =>
      problem(422, { title: 'Not valid', detail: 'Look again.', code: 'notEmail', requestId: 'r-1', errors });
    const refused = await http.post('/session', {}).catch((error: unknown) => error);
    expect(refused).toBeInstanceOf(Problem);
    expect(refused).toMatchObject({ status: 422, code: 'notEmail', message: 'Look again.', requestId: 'r-1', errors });
  });

  it('reads only the status of a page that some proxy answers with', async () => {
    respond = () =>
      Promise.resolve(
        new Response('<h1>Bad gateway</h1>', {
          status: 502,
          statusText: 'Bad Gateway',
          headers: { 'content-type': 'text/html' },
        }),
      );
    await expect(http.get('/units')).rejects.toMatchObject({
      status: 502,
      code: 'http502',
      message: '502 Bad Gateway',
    });
  });

  it('tells a lost connection from an answer', async () => {
    respond = () => Promise.reject(new TypeError('Failed to fetch'));
    await expect(http.get('/units')).rejects.toBeInstanceOf(NetworkError);
  });

  it('says once that the session has ended, but not where a 401 is an answer', async () => {
    const ended = vi.fn();
    whenSignedOut(ended);
    respond = () => problem(401, { code: 'signInRequired' });
    await http.get('/session', { allowSignedOut: true }).catch(() => undefined);
    expect(ended).not.toHaveBeenCalled();
    await http.get('/units').catch(() => undefined);
    expect(ended).toHaveBeenCalledTimes(1);
  });

  it('leaves empty filters out of the address', () => {
    expect(queryString({ search: 'a b', kind: '', sort: undefined, cursor: null, open: false })).toBe(
      '?search=a+b&open=false',
    );
    expect(queryString({ search: '' })).toBe('');
  });
});

describe('The way through sign-in', () => {
  it('comes back to the same place', () => {
    const path = signInPath({ pathname: '/units/1/charge', search: '?a=1' });
    expect(placeAfterSignIn(new URL(path, 'http://x').searchParams.get('to'))).toBe('/units/1/charge?a=1');
    expect(signInPath({ pathname: '/', search: '' })).toBe('/sign-in');
  });

  it.each(['//evil.example', '/\\evil.example', 'https://evil.example', 'javascript:alert(1)', '', null])(
    'never leads to another site: %s',
    (to) => {
      expect(placeAfterSignIn(to)).toBe('/');
    },
  );
});
