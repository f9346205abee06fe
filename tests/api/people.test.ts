import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
let boss: TestClient;
beforeAll(async () => {
  app = await startTestApp();
  boss = await app.signIn(app.owner);
});
afterAll(() => app.close());

const named = (items: { name: string }[]) => items.map(({ name }) => name);

describe('Changing what somebody may do', () => {
  it('is the owner’s alone', async () => {
    const person = await app.addPerson(['technician']);
    for (const role of ['technician', 'complianceManager', 'reader'] as const) {
      const client = await app.signIn(role);
      expect((await client.patch(`/people/${person.id}`, 1, { roles: ['owner'] })).body).toMatchObject({
        status: 403,
        code: 'notPermitted',
      });
    }
  });

  it('asks for the version seen, and refuses one that is no longer it', async () => {
    const person = await app.addPerson(['technician']);
    const change = (version: number | null, roles: string[]) => boss.patch(`/people/${person.id}`, version, { roles });
    expect((await change(null, ['complianceManager'])).body).toMatchObject({ status: 428, code: 'versionRequired' });
    const first = await change(1, ['complianceManager']);
    expect([first.status, first.body.version, first.headers.get('etag')]).toEqual([200, 2, '"2"']);
    expect((await change(1, ['owner'])).body).toMatchObject({ status: 412, code: 'stale' });
    expect((await boss.get(`/people/${person.id}`)).body.roles).toEqual(['complianceManager']);
  });

  it('never leaves a firm without an active owner', async () => {
    const { firm, owner } = await app.addFirm();
    const only = await app.signIn(owner);
    const stepDown = await only.patch(`/people/${owner.id}`, 1, { roles: ['technician'] });
    expect(stepDown.body).toMatchObject({ status: 422, code: 'lastOwner', errors: [{ path: '/roles' }] });
    const leave = await only.patch(`/people/${owner.id}`, 1, { active: false });
    expect(leave.body).toMatchObject({ status: 422, code: 'lastOwner', errors: [{ path: '/active' }] });
    await app.addPerson(['owner'], { firmId: firm.id });
    expect((await only.patch(`/people/${owner.id}`, 1, { roles: ['technician'] })).status).toBe(200);
  });

  it('lets one of two owners fail who take each other’s role at once', async () => {
    const { firm, owner } = await app.addFirm();
    const second = await app.addPerson(['owner'], { firmId: firm.id });
    const [first, other] = [await app.signIn(owner), await app.signIn(second)];
    const answers = await Promise.all([
      first.patch(`/people/${second.id}`, 1, { roles: ['technician'] }),
      other.patch(`/people/${owner.id}`, 1, { roles: ['technician'] }),
    ]);
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    const rows = await app.database.query(
      'superuser',
      "SELECT FROM membership WHERE firm_id = $1 AND 'owner' = ANY (roles)",
      [firm.id],
    );
    expect(rows).toHaveLength(1);
  });

  it('refuses no roles, unknown roles, unknown keys and sites that the firm does not have', async () => {
    const person = await app.addPerson(['technician']);
    const refusal = async (change: object) => {
      const { body } = await boss.patch(`/people/${person.id}`, 1, change);
      return body.errors?.map(({ path, code }: { path: string; code: string }) => `${path} ${code}`);
    };
    expect(await refusal({ roles: [] })).toEqual(['/roles tooFew']);
    expect(await refusal({ roles: ['king'] })).toEqual(['/roles/0 notAllowedValue']);
    expect(await refusal({ email: 'other@example.test' })).toEqual(['/email unknownKey']);
    expect(await refusal({ siteIds: [app.parts.newId()] })).toEqual(['/siteIds/0 notKnownHere']);
    expect((await boss.get(`/people/${person.id}`)).body.version).toBe(1);
  });

  it('stands in the firm’s chain with what was before and after, and by whom', async () => {
    const person = await app.addPerson(['technician']);
    await boss.patch(`/people/${person.id}`, 1, { roles: ['technician', 'complianceManager'], van: 'Van 3' });
    const rows = await app.database.query<{ content: string }>(
      'superuser',
      "SELECT content FROM journal_record WHERE noun = 'membership' AND subject_id = $1 AND version = 2",
      [person.id],
    );
    expect(rows.map(({ content }) => JSON.parse(content))).toMatchObject([
      {
        before: { roles: ['technician'], van: null },
        after: { roles: ['technician', 'complianceManager'], van: 'Van 3' },
        recordedBy: app.owner.id,
      },
    ]);
  });

  it('signs somebody out of the firm who is taken out, and keeps their name for the records', async () => {
    const person = await app.addPerson(['technician']);
    const client = await app.signIn(person);
    await boss.patch(`/people/${person.id}`, 1, { active: false });
    expect((await client.get('/session')).status).toBe(401);
    expect((await boss.get(`/people/${person.id}`)).body).toMatchObject({ name: person.name, active: false });
  });
});

describe('The list of people', () => {
  it('is by name, in pages that neither skip nor repeat, whole for whoever reads it', async () => {
    const { firm, owner } = await app.addFirm();
    for (const name of ['Mo', 'Ada', 'Zoe', 'Ada', 'Él'])
      await app.addPerson(['technician'], { firmId: firm.id, name });
    const client = await app.signIn(owner);
    const all = (await client.get('/people')).body;
    expect(all.nextCursor).toBeNull();
    expect(all.items).toHaveLength(6);
    const seen: string[] = [];
    let cursor: string | null = '';
    while (cursor !== null) {
      const page: { body: { items: { id: string }[]; nextCursor: string | null } } = await client.get(
        `/people?limit=2${cursor && `&cursor=${cursor}`}`,
      );
      seen.push(...page.body.items.map(({ id }) => id));
      cursor = page.body.nextCursor;
    }
    expect(seen).toEqual(all.items.map(({ id }: { id: string }) => id));
  });

  it('can be narrowed to a role and to those who are active, and a cursor belongs to one filter', async () => {
    const { firm, owner } = await app.addFirm();
    const gone = await app.addPerson(['technician'], { firmId: firm.id, name: 'Gone' });
    await app.addPerson(['technician', 'complianceManager'], { firmId: firm.id, name: 'Here' });
    const client = await app.signIn(owner);
    await client.patch(`/people/${gone.id}`, 1, { active: false });
    expect(named((await client.get('/people?role=technician')).body.items)).toEqual(['Gone', 'Here']);
    expect(named((await client.get('/people?role=technician&active=true')).body.items)).toEqual(['Here']);
    const { nextCursor } = (await client.get('/people?role=technician&limit=1')).body;
    const other = await client.get(`/people?limit=1&cursor=${nextCursor}`);
    expect(other.body).toMatchObject({ status: 422, code: 'cursorNotValid', errors: [{ path: '/cursor' }] });
  });

  it('is for those who work for the firm', async () => {
    expect((await app.visitor().get('/people')).status).toBe(401);
    expect((await (await app.signIn('reader')).get('/people')).status).toBe(403);
    expect((await (await app.signIn('technician')).get('/people')).status).toBe(200);
  });

  it('shows no other firm’s people: 404 by id, absent in the list', async () => {
    const { owner } = await app.addFirm();
    const stranger = await app.signIn(owner);
    expect((await stranger.get(`/people/${app.owner.id}`)).body).toMatchObject({ status: 404, code: 'notFound' });
    expect((await stranger.patch(`/people/${app.owner.id}`, 1, { van: 'X' })).status).toBe(404);
    expect((await stranger.get('/people')).body.items.map(({ id }: { id: string }) => id)).toEqual([owner.id]);
  });
});
