import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type History, NOTE, startHistory } from '../proof/history.ts';
import { bench, download, FILES, runVerifier, unpack } from '../proof/packages.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, posted } from '../support/ledger.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-packages-'));
let app: TestApp;
let history: History;
beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  history = await startHistory(app);
});
afterAll(async () => {
  await app.close();
  rmSync(home, { recursive: true, force: true });
  rmSync(bench, { recursive: true, force: true });
});

interface Line {
  sequence: number;
  hash: string;
  contentHash?: string;
  content?: { type: string; id: string; noun?: string; subjectId?: string; [name: string]: unknown };
  words?: number;
}
async function packed(query: string) {
  const zip = await download(app.url, history, query);
  const folder = await unpack(zip);
  const text = (name: string) => readFileSync(path.join(folder, name), 'utf8');
  const lines: Line[] = text('records.jsonl')
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line));
  const records = lines.filter(({ words }) => words === undefined);
  return { zip, folder, text, lines, records, whole: records.flatMap(({ content }) => (content ? [content] : [])) };
}
const journal = () =>
  history.rows<{ sequence: string; hash: string; content: string }>(
    `select sequence, encode(hash, 'hex') as hash, content from journal_record where FIRM order by sequence`,
  );
const aboutChain = ['seal', 'sealKey', 'export'];
const everything = 'from=2000-01-01&to=2099-12-31';

describe('A proof package', () => {
  it('holds each record of the log in order, whole or as its hash, and nothing that is not in the log', async () => {
    const { records } = await packed(`unitId=${history.unit.id}`);
    const rows = await journal();
    expect(records.map(({ sequence, hash }) => [sequence, hash])).toEqual(
      rows.slice(0, records.length).map(({ sequence, hash }) => [Number(sequence), hash]),
    );
    for (const [index, line] of records.entries()) {
      const content = String(rows[index]?.content);
      if (line.content) expect(line.content).toEqual(JSON.parse(content));
      else expect(line.contentHash).toBe(createHash('sha256').update(content).digest('hex'));
    }
  });

  it('about a unit holds what concerns it whole: register, groups, entries, and of the rest two hashes a line', async () => {
    const { records, whole } = await packed(`unitId=${history.unit.id}`);
    const own = whole.filter(({ type }) => !aboutChain.includes(type));
    expect(new Set(own.map(({ type, noun }) => noun ?? type))).toEqual(
      new Set(['unit', 'unitRefrigerant', 'unitSite', 'unitFullCharge', 'group', 'entry']),
    );
    for (const content of own) expect(JSON.stringify(content)).toContain(history.unit.id);
    const log = (await journal()).filter(({ content }) => /"type":"(entry|group)"/.test(content));
    const concerning = log.filter(({ content }) => content.includes(history.unit.id));
    expect(own.filter(({ type }) => type === 'entry' || type === 'group')).toHaveLength(concerning.length);
    for (const line of records.filter(({ content }) => !content))
      expect(Object.keys(line)).toEqual(['sequence', 'hash', 'contentHash']);
  });

  it('about a unit discloses nothing of any other, in any of its files', async () => {
    const { text } = await packed(`unitId=${history.unit.id}&words=true`);
    const others = [
      history.otherUnit.id,
      history.otherCustomer.id,
      'Tin Mill',
      'Upper Yard',
      'U0004',
      history.ledger.owner.email,
    ];
    for (const name of FILES.filter((file) => file !== 'summary.pdf'))
      expect(others.filter((word) => text(name).includes(word))).toEqual([]);
  });

  it('about a customer holds the customer, its sites and what is at them, and nothing of another customer', async () => {
    const { whole } = await packed(`customerId=${history.otherCustomer.id}`);
    const own = whole.filter(({ type }) => !aboutChain.includes(type));
    expect(own.filter(({ noun }) => noun === 'customer').map(({ subjectId }) => subjectId)).toEqual([
      history.otherCustomer.id,
      history.otherCustomer.id,
    ]);
    expect(own.map(({ noun }) => noun)).toContain('site');
    expect(own.filter(({ type }) => type === 'entry').length).toBeGreaterThan(3);
    expect(JSON.stringify(own)).not.toContain(history.unit.id);
  });

  it('about a period holds what happened in it, both days included in the firm’s zone', async () => {
    const of = async (query: string) =>
      (await packed(query)).whole
        .filter(({ type }) => type === 'group')
        .map(({ kind, occurredAt }) => [kind, occurredAt]);
    expect(await of('from=2026-03-03&to=2026-03-03')).toEqual([['purchase', '2026-03-03T10:00:00.000Z']]);
    expect((await of('from=2026-03-02&to=2026-03-03')).map(([kind]) => kind)).toEqual(['extraCharge', 'purchase']);
    expect(await of('from=2027-01-01&to=2027-01-31')).toEqual([]);
    const all = await packed(everything);
    expect(all.records.filter(({ content }) => !content)).toEqual([]);
  });

  it('ends with a seal over the record of who took it out', async () => {
    const { records } = await packed(`unitId=${history.unit.id}`);
    const [last, before] = [records.at(-1)?.content, records.at(-2)?.content];
    expect(last).toMatchObject({
      type: 'seal',
      seal: { sequence: String(records.at(-2)?.sequence), hash: records.at(-2)?.hash },
    });
    expect(before).toMatchObject({
      type: 'export',
      document: 'proofPackage',
      format: 'zip',
      recordedBy: history.ledger.owner.id,
      about: { kind: 'unit', id: history.unit.id, words: false },
    });
    const again = await packed(everything);
    expect(again.records.length).toBe(records.length + 2);
    expect(again.whole.filter(({ type }) => type === 'export').length).toBeGreaterThan(1);
  });

  it('discloses no other export than its own', async () => {
    await packed(`customerId=${history.otherCustomer.id}`);
    const { whole } = await packed(`unitId=${history.unit.id}`);
    expect(whole.filter(({ type }) => type === 'export')).toHaveLength(1);
  });

  it('is intact to the verifier that it brings along, in both languages', async () => {
    const { folder } = await packed(`unitId=${history.unit.id}&words=true`);
    const own = path.join(folder, 'verify.mjs');
    expect((await runVerifier(folder, [], own)).lines[0]).toBe('intact');
    expect((await runVerifier(folder, ['--es'], own)).lines[0]).toBe('intacto');
    const { verifierSha256 } = (await history.client.get('/journal/state')).body;
    expect(createHash('sha256').update(readFileSync(own)).digest('hex')).toBe(verifierSha256);
  });

  it('brings words beside the records only when asked for', async () => {
    expect((await packed(everything)).text('records.jsonl')).not.toContain(NOTE);
    const without = await packed(`unitId=${history.unit.id}`);
    for (const name of ['records.jsonl', 'proof.json']) expect(without.text(name)).not.toContain('Ms Vane');
    const { lines, text } = await packed(`${everything}&words=true`);
    expect(text('records.jsonl')).toContain(NOTE);
    const note = lines.findIndex((line) => 'field' in line && (line as unknown as { field: string }).field === 'note');
    expect(lines[note - 1]?.content).toMatchObject({ type: 'group', id: history.notedGroupId });
  });

  it('explains itself in English and Spanish', async () => {
    const readme = (await packed(`unitId=${history.unit.id}`)).text('README.txt');
    expect(readme).toContain('node verify.mjs');
    expect(readme).toContain('How to check it');
    expect(readme).toContain('Cómo comprobarlo');
  });

  it('has a page to read on the paper of the country, A4 or Letter', async () => {
    const boxes = async (query: string) =>
      new Set((await packed(`unitId=${history.unit.id}${query}`)).text('summary.pdf').match(/MediaBox \[[^\]]*\]/g));
    expect(await boxes('')).toEqual(new Set(['MediaBox [0 0 612 792]'])); // a firm in the US
    expect(await boxes('&paper=A4')).toEqual(new Set(['MediaBox [0 0 595.28 841.89]']));
    expect((await history.client.get(`/proof-packages?unitId=${history.unit.id}&paper=A5`)).status).toBe(422);
  });
});

describe('Asking for a proof package', () => {
  it.each([
    ['nothing', '', '', 'proofSubject'],
    ['two subjects', 'unitId=018f0000-0000-7000-8000-000000000001&from=2026-01-01&to=2026-01-31', '', 'proofSubject'],
    ['half a period', 'from=2026-01-01', '/to', 'required'],
    ['a period backwards', 'from=2026-02-01&to=2026-01-31', '/to', 'periodBackwards'],
    ['a unit that is not there', 'unitId=018f0000-0000-7000-8000-000000000001', '/unitId', 'notKnownHere'],
    ['a customer that is not there', 'customerId=018f0000-0000-7000-8000-000000000001', '/customerId', 'notKnownHere'],
    ['another word', 'unit=1', '/unit', 'unknownKey'],
  ])('with %s is refused, and nothing is recorded', async (_what, query, pointer, code) => {
    const before = await history.ledger.sequence();
    const { status, body } = await history.client.get(`/proof-packages?${query}`);
    expect(status).toBe(422);
    expect(body.errors).toContainEqual(expect.objectContaining({ path: pointer, code }));
    expect(await history.ledger.sequence()).toBe(before);
  });

  it('is for those who make exports', async () => {
    for (const role of ['technician', 'reader'] as const)
      expect((await (await app.signIn(role)).get(`/proof-packages?${everything}`)).status).toBe(403);
    expect((await (await app.signIn('complianceManager')).get(`/proof-packages?${everything}`)).status).toBe(200);
  });

  it('does nothing for a look ahead (HEAD) and for another site’s link', async () => {
    const before = await history.ledger.sequence();
    const head = await fetch(`${app.url}/api/v1/proof-packages?${everything}`, {
      method: 'HEAD',
      headers: { Cookie: String(history.client.cookie) },
    });
    expect(head.status).toBe(405);
    const headers = { 'Sec-Fetch-Site': 'cross-site' };
    const linked = await history.client.get(`/proof-packages?${everything}`, { headers });
    expect([linked.status, linked.body.code]).toEqual([403, 'otherOrigin']);
    expect(await history.ledger.sequence()).toBe(before);
  });

  it('says so when the log cannot be sealed, and records no export', async () => {
    const before = await history.ledger.sequence();
    const file = path.join(home, 'keys', 'seal.key');
    const held = readFileSync(file);
    rmSync(file);
    const refused = await history.client.get(`/proof-packages?${everything}`);
    expect([refused.status, refused.body.code]).toEqual([409, 'sealKeyLost']);
    expect(await history.ledger.sequence()).toBe(before);
    const { writeFileSync } = await import('node:fs');
    writeFileSync(file, held, { mode: 0o600 });
  });

  it('about a customer holds of a unit that came from another only what happened there since', async () => {
    const { ledger, unit, otherCustomer, otherSite } = history;
    const ofUnit = async () =>
      (await packed(`customerId=${otherCustomer.id}`)).whole.filter(
        ({ type, unitId }) => (type === 'entry' || type === 'group') && unitId === unit.id,
      );
    await posted(
      ledger.client,
      { id: uuid(), siteId: otherSite.id, validFrom: '2026-03-20T00:00:00Z' },
      `/units/${unit.id}/sites`,
    );
    expect(await ofUnit()).toEqual([]);
    const flat = groupOf('foundEmpty', '2026-03-21T10:00:00Z', {
      unitId: unit.id,
      statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'foundFlat' }],
    });
    await posted(ledger.client, { ...flat, kind: 'vacuum' });
    expect((await ofUnit()).map(({ type }) => type).sort()).toEqual(['entry', 'group']);
    const earlier = (await packed(`customerId=${ledger.customer.id}`)).whole;
    expect(
      earlier.some(({ type, kind, unitId }) => type === 'group' && kind === 'extraCharge' && unitId === unit.id),
    ).toBe(true);
    expect(JSON.stringify(earlier)).not.toContain(flat.groupId);
  });

  it('leaves the connections whole when downloads are broken off', async () => {
    for (let count = 0; count < 12; count++) {
      const gone = new AbortController();
      const response = await fetch(`${app.url}/api/v1/proof-packages?${everything}`, {
        headers: { Cookie: String(history.client.cookie) },
        signal: gone.signal,
      });
      gone.abort();
      await response.arrayBuffer().catch(() => undefined);
    }
    const intact = await download(app.url, history, everything);
    expect((await runVerifier(intact)).status).toBe(0);
    const [open] = await history.rows<{ count: string }>(
      `select count(*) from pg_stat_activity where datname = current_database() and state like 'idle in transaction%'`,
    );
    expect(open?.count).toBe('0');
  });
});
