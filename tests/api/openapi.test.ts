import { mkdirSync, mkdtempSync, writeFileSync } from 'node:fs';
import { request } from 'node:http';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PERMISSIONS } from '../../shared/permissions/roles.ts';
import { startTestApp, type TestApp } from '../support/app.ts';

interface Operation {
  operationId: string;
  summary: string;
  security: Record<string, string[]>[];
  'x-permission'?: string;
  parameters?: { name: string; in: string }[];
  requestBody?: { content: Record<string, { schema: Record<string, unknown> }> };
  responses: Record<string, { description: string; content?: Record<string, unknown> }>;
}
interface Document {
  openapi: string;
  servers: { url: string }[];
  paths: Record<string, Record<string, Operation>>;
}

let app: TestApp;
let document: Document;
beforeAll(async () => {
  app = await startTestApp();
  document = (await app.visitor().get<Document>('/openapi.json')).body;
});
afterAll(() => app.close());

const operations = () =>
  Object.entries(document.paths).flatMap(([route, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({ route, method, operation })),
  );

describe('The API description', () => {
  it('is OpenAPI 3.1 and describes itself, sign-in and every calculation', () => {
    expect(document.openapi).toBe('3.1.0');
    expect(document.servers).toEqual([{ url: `${app.url}/api/v1` }]);
    for (const route of ['/openapi.json', '/session', '/people/{id}', '/calculations/charge', '/health', '/ready']) {
      expect(Object.keys(document.paths)).toContain(route);
    }
  });

  it('gives every operation a summary, a name of its own and what can be refused', () => {
    const names = operations().map(({ operation }) => operation.operationId);
    expect(new Set(names).size).toBe(names.length);
    for (const { route, operation } of operations()) {
      expect(operation.summary, route).toMatch(/\S/);
      expect(operation.responses, route).toHaveProperty('500');
      const refusals = Object.entries(operation.responses).filter(([status]) => Number(status) >= 400);
      for (const [, { content }] of refusals) expect(Object.keys(content ?? {})).toEqual(['application/problem+json']);
    }
  });

  it('tells the truth about access: whoever is not signed in gets 401 exactly where it says that sign-in is needed', async () => {
    for (const { route, method, operation } of operations()) {
      const address = route.replaceAll(/\{\w+\}/g, app.parts.newId());
      const { status } = await app
        .visitor()
        .send(method.toUpperCase(), address, operation.requestBody ? { body: {} } : {});
      const needsSignIn = operation.security.length > 0;
      expect([route, method, status === 401]).toEqual([route, method, needsSignIn]);
      expect(operation.responses, `${method} ${route} ${status}`).toHaveProperty(String(status));
      if (needsSignIn) expect(operation.responses).toHaveProperty('401');
    }
  });

  it('names only permissions that exist, and a role without one gets 403 and nothing else', async () => {
    const reader = await app.signIn('reader');
    for (const { route, method, operation } of operations()) {
      const permission = operation['x-permission'] as keyof typeof PERMISSIONS | undefined;
      if (permission === undefined) continue;
      expect(Object.keys(PERMISSIONS)).toContain(permission);
      if ((PERMISSIONS[permission] as readonly string[]).includes('reader')) continue;
      const address = route.replaceAll(/\{\w+\}/g, app.parts.newId());
      const answer = await reader.send<{ code: string }>(
        method.toUpperCase(),
        address,
        operation.requestBody ? { body: {} } : {},
      );
      expect([route, method, answer.status, answer.body.code]).toEqual([route, method, 403, 'notPermitted']);
    }
  });

  it('closes every request body that is an object to unknown keys', () => {
    for (const { route, operation } of operations()) {
      const schema = operation.requestBody?.content['application/json']?.schema;
      if (schema?.type === 'object') expect([route, schema.additionalProperties]).toEqual([route, false]);
    }
  });

  it('carries the limits that validate: lengths, formats, least and most', () => {
    const schema = document.paths['/session']?.post?.requestBody?.content['application/json']?.schema;
    expect(schema).toMatchObject({
      required: ['email', 'password'],
      properties: { password: { minLength: 1, maxLength: 200 } },
    });
    const list = document.paths['/people']?.get?.parameters?.map(({ name, in: place }) => `${place} ${name}`);
    expect(list).toEqual(['query cursor', 'query limit', 'query role', 'query active']);
  });

  it('leads from a problem’s type to every code and its sentence', async () => {
    const { body } = await app.visitor().get('/problems', { headers: { 'Accept-Language': 'es' } });
    const notFound = body.items.find(({ code }: { code: string }) => code === 'notFound');
    expect(notFound).toEqual({
      code: 'notFound',
      status: 404,
      message: 'En esta dirección no hay nada que usted pueda ver.',
    });
  });
});

describe('The readable reference', () => {
  it('comes whole from this server, without a script or style inside the page', async () => {
    const page = await app.visitor().get<string>('/api/docs');
    expect(page.status).toBe(200);
    const addresses = [...page.body.matchAll(/(?:src|href)="(\/[^"]+)"/g)].map((match) => String(match[1]));
    expect(addresses).toEqual(['/api/docs/swagger-ui.css', '/api/docs/swagger-ui-bundle.js', '/api/docs/start.js']);
    expect(page.body).not.toMatch(/<style|<script>|style="|https?:/);
    for (const address of addresses) expect((await app.visitor().get(address)).status).toBe(200);
  });
});

describe('The client’s files', () => {
  it('are kept for a year when named by their content, asked for again otherwise, and the page opens on every address of its own', async () => {
    const folder = mkdtempSync(path.join(tmpdir(), 'client-'));
    mkdirSync(path.join(folder, 'assets'));
    writeFileSync(path.join(folder, 'index.html'), '<!doctype html><title>Page</title>');
    writeFileSync(path.join(folder, 'sw.js'), '// worker');
    writeFileSync(path.join(folder, 'assets/main-abc123.js'), 'export {}'.padEnd(3000));
    writeFileSync(path.join(folder, '.env'), 'SECRET=1');
    const served = await startTestApp({ parts: { clientFolder: folder } });
    try {
      const get = (address: string, headers: Record<string, string> = {}) =>
        fetch(served.url + address, { headers: { Accept: 'text/html,*/*', ...headers } });
      for (const address of ['/', '/units/0190b1c2', '/charge?job=newInstall']) {
        const page = await get(address);
        expect([page.status, page.headers.get('cache-control')]).toEqual([200, 'no-cache']);
        expect(await page.text()).toContain('<title>Page');
      }
      const asset = await get('/assets/main-abc123.js', { 'Accept-Encoding': 'gzip' });
      expect(asset.headers.get('cache-control')).toBe('public, max-age=31536000, immutable');
      expect(asset.headers.get('content-encoding')).toBe('gzip');
      expect((await get('/sw.js')).headers.get('cache-control')).toBe('no-cache');
      expect((await get('/assets/main-older.js')).status).toBe(404);
      expect(await (await get('/.env')).text()).not.toContain('SECRET');
      expect((await get('/%2e%2e/%2e%2e/etc/passwd')).status).not.toBe(500);
      expect((await get('/api/v1/nothing')).headers.get('content-type')).toMatch(/^application\/problem\+json/);
      expect((await get('/units/1', { Accept: 'application/json' })).status).toBe(404);
    } finally {
      await served.close();
    }
  });
});

describe('Kept mail', () => {
  it('is shown on this machine, with its links, and nothing in it runs', async () => {
    const boss = await app.signIn(app.owner);
    const name = '<script>alert(1)</script>';
    await boss.post('/invitations', { id: app.parts.newId(), email: 'kept@example.test', name, roles: ['technician'] });
    const response = await fetch(`${app.url}/dev/mail`);
    const page = await response.text();
    expect(page).toContain('kept@example.test');
    expect(page).toMatch(/<a href="http:\/\/127\.0\.0\.1:\d+\/invitation#token=[\w-]+">/);
    expect(page).not.toContain(name);
    expect(page).toContain('&lt;script&gt;');
  });

  it('is not shown under a foreign name that was pointed at this machine', async () => {
    const status = await new Promise<number | undefined>((resolve, reject) => {
      request(`${app.url}/dev/mail`, { headers: { Host: 'elsewhere.example' } }, (response) => {
        response.resume();
        resolve(response.statusCode);
      })
        .once('error', reject)
        .end();
    });
    expect(status).toBe(404);
  });

  it('is not shown where a mail server sends it', async () => {
    const sending = await startTestApp({ parts: { keptMail: null } });
    try {
      expect((await fetch(`${sending.url}/dev/mail`)).status).toBe(404);
    } finally {
      await sending.close();
    }
  });
});
