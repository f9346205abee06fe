import { createHash, createPublicKey, verify } from 'node:crypto';
import { existsSync, mkdtempSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { DataSource } from 'typeorm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createDataSource } from '../../server/database/data-source.ts';
import { sealWhatIsDue } from '../../server/seals/seal.service.ts';
import type { SealKeyRow, SealRow } from '../../shared/proof/proof.schema.ts';
import { startTestApp, type TestApp, type TestPerson } from '../support/app.ts';
import type { TestClient } from '../support/test-client.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-seals-'));
const keyFile = path.join(home, 'keys', 'seal.key');
let app: TestApp;
let jobs: DataSource;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  jobs = await createDataSource({ url: app.database.urls.jobs, poolSize: 4 }).initialize();
});
afterAll(async () => {
  await jobs.destroy();
  await app.close();
  rmSync(home, { recursive: true, force: true });
});

let firmId: string;
let owner: TestPerson;
let client: TestClient;
beforeEach(async () => {
  const made = await app.addFirm({ timeZone: 'UTC' });
  firmId = made.firm.id;
  owner = made.owner;
  client = await app.signIn(owner);
});

const addRecord = async () => {
  const body = { id: app.parts.newId(), kind: 'supplier', name: 'Fallow Gas' };
  expect((await client.post('/parties', body)).status).toBe(201);
};
interface ChainRow {
  sequence: string;
  type: string;
  hash: string;
  content: string;
  recorded_by: string;
}
const chain = () =>
  app.database.query<ChainRow>(
    'superuser',
    `select sequence, type, encode(hash, 'hex') as hash, content, recorded_by from journal_record
       where firm_id = $1 order by sequence`,
    [firmId],
  );
const seals = async () => (await client.get<{ items: SealRow[] }>('/journal/seals')).body.items;
const keys = async () => (await client.get<{ items: SealKeyRow[]; held: boolean }>('/journal/keys')).body;
const sealedMails = async (to = owner.email) =>
  (await app.mails()).filter((mail) => mail.to.includes(to) && mail.subject.includes('sealed'));
const daily = () => sealWhatIsDue(app.parts, jobs);
const nextDay = () => app.clock.advance(24 * 3600 * 1000);

describe('A seal', () => {
  it('signs the head: Ed25519 over the RFC 8785 text of firm, sequence, hash, time and key, by nothing but node:crypto', async () => {
    const { status, body: seal } = await client.post<SealRow>('/journal/seals');
    expect(status).toBe(201);

    const rows = await chain();
    const sealed = rows.find(({ sequence }) => sequence === String(seal.sequence));
    expect(seal).toMatchObject({ record: rows.length, sequence: rows.length - 1, hash: sealed?.hash });
    const record = JSON.parse(rows.at(-1)?.content ?? '');
    const { keyId, publicKeyPem } = (await keys()).items[0] as SealKeyRow;
    const publicKey = createPublicKey(publicKeyPem);
    const der = publicKey.export({ format: 'der', type: 'spki' });
    expect(keyId).toBe(createHash('sha256').update(der).digest('hex'));
    const text = `{"at":"${seal.at}","firmId":"${firmId}","hash":"${seal.hash}","keyId":"${keyId}","sequence":"${seal.sequence}"}`;
    const isSigned = (signed: string) =>
      verify(null, Buffer.from(signed), publicKey, Buffer.from(record.signature, 'base64'));
    expect(isSigned(text)).toBe(true);
    expect(isSigned(text.replace(seal.at, '2026-11-30T15:00:00.001Z'))).toBe(false);
  });

  it('is a record of the chain by whoever made it, after the record of the key', async () => {
    await client.post('/journal/seals');

    const last = (await chain()).slice(-2);
    expect(last.map(({ type, recorded_by }) => [type, recorded_by])).toEqual([
      ['sealKey', owner.id],
      ['seal', owner.id],
    ]);
    expect((await seals())[0]?.by).toEqual({ id: owner.id, name: owner.name });
  });

  it('is not made again where nothing is unsealed', async () => {
    const first = await client.post<SealRow>('/journal/seals');
    const again = await client.post<SealRow>('/journal/seals');
    expect([again.status, again.body]).toEqual([200, first.body]);

    await addRecord();
    const third = await client.post<SealRow>('/journal/seals');
    expect([third.status, third.body.sequence]).toEqual([201, first.body.record + 1]);
    expect(await seals()).toHaveLength(2);
  });

  it('is made by owners only; everybody sees seals and keys', async () => {
    for (const role of ['technician', 'complianceManager', 'reader'] as const) {
      const other = await app.signIn(role);
      expect((await other.post('/journal/seals')).status).toBe(403);
      expect((await other.post('/journal/keys', { currentKeyId: null })).status).toBe(403);
      for (const address of ['/journal/seals', '/journal/keys', '/journal/state'])
        expect((await other.get(address)).status).toBe(200);
    }
  });

  it('shows what it does not cover yet', async () => {
    const before = (await client.get('/journal/state')).body;
    expect(before).toMatchObject({ lastSeal: null, keyId: null, unsealed: before.head.sequence });
    const { body: seal } = await client.post<SealRow>('/journal/seals');
    expect((await client.get('/journal/state')).body).toMatchObject({
      lastSeal: seal,
      unsealed: 0,
      keyId: seal.keyId,
      head: { sequence: seal.record },
      verifierSha256: createHash('sha256').update(readFileSync('shared/proof/verify.mjs')).digest('hex'),
    });
    await addRecord();
    expect((await client.get('/journal/state')).body.unsealed).toBe(1);
  });

  it('is of one firm: another sees none of it and has a key of its own', async () => {
    await client.post('/journal/seals');
    const other = await app.addFirm();
    const otherClient = await app.signIn(other.owner);
    expect((await otherClient.get('/journal/seals')).body.items).toEqual([]);
    await otherClient.post('/journal/seals');
    const otherKeys = (await otherClient.get<{ items: SealKeyRow[] }>('/journal/keys')).body.items;
    expect(otherKeys[0]?.keyId).not.toBe((await keys()).items[0]?.keyId);
  });

  it('is listed page by page', async () => {
    for (let count = 0; count < 3; count++) {
      await addRecord();
      await client.post('/journal/seals');
    }
    const first = (await client.get('/journal/seals?limit=2')).body;
    const second = (await client.get(`/journal/seals?limit=2&cursor=${first.nextCursor}`)).body;
    expect([...first.items, ...second.items]).toEqual(await seals());
    expect([first.items.length, second.items.length, second.nextCursor]).toEqual([2, 1, null]);
  });

  it('is mailed to every owner with head and fingerprint, and to nobody else', async () => {
    const second = await app.addPerson(['owner', 'technician'], { firmId });
    const manager = await app.addPerson(['complianceManager'], { firmId });
    const { body: seal } = await client.post<SealRow>('/journal/seals');

    for (const { email } of [owner, second]) {
      const [mail, ...more] = await sealedMails(email);
      expect(more).toEqual([]);
      expect(mail?.text).toContain(`${seal.sequence}:${seal.hash}`);
      expect(mail?.text).toContain((await keys()).items[0]?.fingerprint);
    }
    expect(await sealedMails(manager.email)).toEqual([]);
  });
});

describe('The key file', () => {
  it('is made on the first start, for this user alone, and nothing of it is in the database', async () => {
    await client.post('/journal/seals');
    expect(statSync(keyFile).mode & 0o777).toBe(0o600);
    expect(statSync(path.dirname(keyFile)).mode & 0o777).toBe(0o700);
    const secret = readFileSync(keyFile, 'utf8').trim().split('\n').at(-1) as string;
    expect(secret).toMatch(/^[0-9a-f]{64}$/);
    const texts = (await chain()).map(({ content }) => content).join('\n');
    expect(texts).not.toContain(secret);
    expect(texts).not.toContain(Buffer.from(secret, 'hex').toString('base64').slice(0, 40));
  });

  it('is closed again when somebody opened it to others', async () => {
    await client.post('/journal/seals');
    writeFileSync(keyFile, readFileSync(keyFile), { mode: 0o600 });
    const { chmodSync } = await import('node:fs');
    chmodSync(keyFile, 0o644);
    await client.get('/journal/keys');
    expect(statSync(keyFile).mode & 0o777).toBe(0o600);
  });

  it('that is lost stops sealing with a word about it, and stores nothing; a copy put back goes on', async () => {
    await client.post('/journal/seals');
    await addRecord();
    renameSync(keyFile, `${keyFile}.away`);
    const before = await chain();
    const refused = await client.post('/journal/seals');
    expect([refused.status, refused.body.code]).toEqual([409, 'sealKeyLost']);
    expect(await chain()).toEqual(before);
    expect((await keys()).held).toBe(false);

    renameSync(`${keyFile}.away`, keyFile);
    expect((await keys()).held).toBe(true);
    expect((await client.post('/journal/seals')).status).toBe(201);
  });
});

describe('A change of key', () => {
  it('is signed by the key before, chained, sealed by the new one and mailed', async () => {
    await client.post('/journal/seals');
    const [old] = (await keys()).items as [SealKeyRow];
    const answer = await client.post<{ items: SealKeyRow[] }>('/journal/keys', { currentKeyId: old.keyId });
    expect(answer.status).toBe(201);
    const [fresh] = answer.body.items as [SealKeyRow, SealKeyRow];
    expect(answer.body.items).toHaveLength(2);
    expect(fresh.keyId).not.toBe(old.keyId);
    expect([fresh.signed, old.signed]).toEqual(['byTheOneBefore', 'first']);

    const record = JSON.parse((await chain()).at(-2)?.content ?? '');
    const text =
      `{"at":"${fresh.at}","firmId":"${firmId}","keyId":"${fresh.keyId}",` +
      `"previousKeyId":"${old.keyId}","publicKey":"${record.key.publicKey}"}`;
    const signature = Buffer.from(record.signature, 'base64');
    expect(verify(null, Buffer.from(text), createPublicKey(old.publicKeyPem), signature)).toBe(true);
    expect((await seals())[0]?.keyId).toBe(fresh.keyId);
    expect((await sealedMails())[0]?.text).toContain(fresh.fingerprint);
  });

  it('happens once: whoever names a key that is not the current one any more gets 412', async () => {
    await client.post('/journal/seals');
    const [old] = (await keys()).items as [SealKeyRow];
    const answers = await Promise.all([1, 2].map(() => client.post('/journal/keys', { currentKeyId: old.keyId })));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 412]);
    expect((await keys()).items).toHaveLength(2);
  });

  it('takes the last line of the key file: after a leak a new line replaces the secret itself', async () => {
    await client.post('/journal/seals');
    const [old] = (await keys()).items as [SealKeyRow];
    const whole = readFileSync(keyFile, 'utf8');
    try {
      writeFileSync(keyFile, `${whole}${'5e'.repeat(32)}\n`);
      await client.post('/journal/keys', { currentKeyId: old.keyId });
      const records = (await chain())
        .filter(({ type }) => type === 'sealKey')
        .map(({ content }) => JSON.parse(content));
      expect(records[1].secretId).not.toBe(records[0].secretId);
      expect(records[1].signature).toMatch(/==$/);

      // The old line may go once every firm has a newer key.
      writeFileSync(keyFile, `${'5e'.repeat(32)}\n`);
      await addRecord();
      expect((await client.post('/journal/seals')).status).toBe(201);
    } finally {
      writeFileSync(keyFile, whole);
    }
  });

  it('after the key was lost for good has to be asked for as such, and is not signed', async () => {
    await client.post('/journal/seals');
    const [old] = (await keys()).items as [SealKeyRow];
    const whole = readFileSync(keyFile, 'utf8');
    try {
      writeFileSync(keyFile, `${'7a'.repeat(32)}\n`);
      const refused = await client.post('/journal/keys', { currentKeyId: old.keyId });
      expect([refused.status, refused.body.code]).toEqual([409, 'sealKeyLost']);
      const made = await client.post('/journal/keys', { currentKeyId: old.keyId, currentKeyLost: true });
      expect([made.status, made.body.items[0].signed, made.body.held]).toEqual([201, 'unsigned', true]);
    } finally {
      writeFileSync(keyFile, whole);
    }
  });
});

describe('The daily round', () => {
  it('seals each firm that has something new, by the program itself, and mails the head', async () => {
    await daily();
    expect((await seals())[0]).toMatchObject({ by: null, at: app.parts.now().toISOString() });
    expect(await sealedMails()).toHaveLength(1);

    await addRecord();
    await daily(); // the same day
    expect(await seals()).toHaveLength(1);
    nextDay();
    await daily();
    expect(await seals()).toHaveLength(2);
    nextDay();
    await daily(); // nothing new
    expect(await seals()).toHaveLength(2);
    expect(await sealedMails()).toHaveLength(2);
  });

  it('seals and mails once when several servers do it at the same time', async () => {
    nextDay();
    const others = await Promise.all(
      [1, 2].map(() => createDataSource({ url: app.database.urls.jobs, poolSize: 2 }).initialize()),
    );
    await Promise.all([jobs, ...others].map((each) => sealWhatIsDue(app.parts, each)));
    await Promise.all(others.map((each) => each.destroy()));
    expect(await seals()).toHaveLength(1);
    expect(await sealedMails()).toHaveLength(1);
  });

  it('tries a mail again that was not accepted, and one that a crashed server had taken', async () => {
    const parts = {
      ...app.parts,
      mailer: { ...app.parts.mailer, send: async () => ({ sent: false as const, reason: 'down' }) },
    };
    await sealWhatIsDue(parts, jobs);
    expect(await sealedMails()).toHaveLength(0);
    await daily();
    expect(await sealedMails()).toHaveLength(1);

    await app.database.query(
      'superuser',
      `update seal_mail set sent_at = null, claimed_until = $2 where firm_id = $1`,
      [firmId, new Date(app.parts.now().getTime() + 10 * 60_000)],
    );
    await daily();
    expect(await sealedMails()).toHaveLength(1);
    app.clock.advance(11 * 60_000);
    await daily();
    expect(await sealedMails()).toHaveLength(2);
  });

  it('mails nobody who is no owner any more when the mail can be sent', async () => {
    const leaving = await app.addPerson(['owner', 'technician'], { firmId });
    const parts = {
      ...app.parts,
      mailer: { ...app.parts.mailer, send: async () => ({ sent: false as const, reason: 'down' }) },
    };
    await sealWhatIsDue(parts, jobs);
    const { body } = await client.get(`/people/${leaving.id}`);
    expect((await client.patch(`/people/${leaving.id}`, body.version, { roles: ['technician'] })).status).toBe(200);
    await daily();
    expect(await sealedMails(leaving.email)).toEqual([]);
    expect(await sealedMails()).not.toEqual([]);
  });

  it('goes on with the other firms when the mails of one cannot be sent', async () => {
    await client.post('/journal/seals');
    await sealedMails();
    await app.database.query(
      'superuser',
      'update seal_mail set sent_at = null, claimed_until = null where firm_id = $1',
      [firmId],
    );
    const other = await app.addFirm();
    const send: typeof app.parts.mailer.send = (mail) =>
      mail.to === owner.email ? Promise.reject(new Error('a fault of the mailer')) : app.parts.mailer.send(mail);
    nextDay();
    await sealWhatIsDue({ ...app.parts, mailer: { ...app.parts.mailer, send } }, jobs);
    expect((await (await app.signIn(other.owner)).get('/journal/seals')).body.items).toHaveLength(1);
    expect(app.logLines().join('\n')).toContain('could not be mailed');
  });

  it('goes on with the other firms when one has lost its key', async () => {
    await client.post('/journal/seals');
    await app.database.query(
      'superuser',
      `alter table journal_record disable trigger all;
       update journal_record set content = regexp_replace(content, '"secretId":"[0-9a-f]{16}"', '"secretId":"0000000000000000"')
         where firm_id = '${firmId}' and type = 'sealKey';
       alter table journal_record enable trigger all`,
    );
    await addRecord();
    const other = await app.addFirm();
    nextDay();
    await daily();
    expect(await seals()).toHaveLength(1);
    expect((await (await app.signIn(other.owner)).get('/journal/seals')).body.items).toHaveLength(1);
    expect(app.logLines().join('\n')).toContain('could not be sealed');
  });
});

describe('An installation', () => {
  it('keeps the key where SEAL_KEY_FILE says', async () => {
    const file = path.join(home, 'elsewhere', 'shared.key');
    const other = await startTestApp({ environment: { SEAL_KEY_FILE: file } });
    try {
      expect((await (await other.signIn(other.owner)).post('/journal/seals')).status).toBe(201);
      expect(existsSync(file)).toBe(true);
    } finally {
      await other.close();
    }
  });
});
