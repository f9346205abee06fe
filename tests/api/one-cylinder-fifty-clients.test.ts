import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { firstBrokenRecord } from '../database/chain-from-rows.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, startLedger } from '../support/ledger.ts';
import { type Answered, TestClient } from '../support/test-client.ts';

const CLIENTS = 50;
const PEOPLE = 5;
const GROUPS_A_CLIENT = 2;
const OPENING_G = 9_500;

interface Sent {
  groupId: string;
  entryId: string;
  massG: number;
  answers: Answered[];
}

let app: TestApp;
let ledger: Ledger;
let cylinderId: string;
let sent: Sent[];
let firstFree: number;

/** Sends until the server has decided: too busy (the firm's head is waited for) is no answer, and a device sends again. */
async function decided(client: TestClient, body: unknown): Promise<Answered> {
  for (let attempt = 0; attempt < 20; attempt++) {
    const answer = await client.post('/entry-groups', body);
    if (answer.status < 500) return answer;
    if (answer.status !== 503) throw new Error(`answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  }
  throw new Error('was never decided');
}

/** 100 g, 101 g ... 199 g out of one cylinder of 9,500 g: 14,950 g in all, each of them sent twice at once. */
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
  cylinderId = (await ledger.cylinder(String(OPENING_G))).id;
  const unit = await ledger.unit('0', null, {}, 'notKnown');
  const clients: TestClient[] = [];
  for (let person = 0; person < PEOPLE; person++) {
    const signedIn = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    for (let index = 0; index < CLIENTS / PEOPLE; index++) {
      const client = new TestClient(app.url);
      client.cookie = signedIn.cookie;
      clients.push(client);
    }
  }
  firstFree = (await ledger.sequence()) + 1;
  const bodies = Array.from({ length: CLIENTS * GROUPS_A_CLIENT }, (_, index) => {
    const entry = massOf(String(100 + index), inCylinder(cylinderId), inUnit(unit.id));
    const at = new Date(Date.parse('2026-03-02T10:00:00Z') + index * 60_000).toISOString();
    return { massG: 100 + index, body: groupOf('extraCharge', at, { unitId: unit.id, entries: [entry] }), entry };
  });
  sent = await Promise.all(
    bodies.map(async ({ massG, body, entry }, index): Promise<Sent> => {
      const client = clients[index % CLIENTS] as TestClient;
      const answers = await Promise.all([decided(client, body), decided(client, body)]);
      return { groupId: body.groupId, entryId: entry.id, massG, answers };
    }),
  );
}, 180_000);
afterAll(() => app.close());

const isAccepted = ({ answers }: Sent) => answers.every(({ status }) => status === 201 || status === 200);
const accepted = () => sent.filter(isAccepted);
const refused = () => sent.filter((each) => !isAccepted(each));
const sum = (masses: readonly number[]) => masses.reduce((total, mass) => total + mass, 0);

interface RecordRow {
  sequence: string;
  recordId: string;
  content: string;
  hash: Buffer;
}
const chain = () =>
  app.database.query<RecordRow>(
    'superuser',
    `select sequence::text, record_id as "recordId", content, hash from journal_record j where firm_id = $1
      order by j.sequence`,
    [ledger.firm.id],
  );

describe('Fifty clients that post at once against one cylinder', () => {
  it('get one answer for each group, however often it is sent: posted once and found once, or refused by the book', () => {
    expect(accepted().length).toBeGreaterThan(0);
    expect(refused().length).toBeGreaterThan(0);
    for (const { answers } of accepted()) {
      expect(answers.map(({ status }) => status).sort()).toEqual([200, 201]);
      expect(answers[0]?.body).toEqual(answers[1]?.body);
    }
    for (const { answers } of refused()) {
      expect(answers.map(({ status, body }) => [status, body.code])).toEqual([
        [422, 'exceedsBook'],
        [422, 'exceedsBook'],
      ]);
    }
  });

  it('take no more than was in it: the rest is the opening less what was accepted', async () => {
    const leftG = OPENING_G - sum(accepted().map(({ massG }) => massG));
    expect(leftG).toBeGreaterThanOrEqual(0);
    expect(await ledger.contentG(cylinderId)).toBe(leftG);
    // Nothing that would still have fitted was turned away.
    expect(Math.min(...refused().map(({ massG }) => massG))).toBeGreaterThan(leftG);
  });

  it('never find it below nothing, after any entry of the chain', async () => {
    let micrograms = 0n;
    const below: string[] = [];
    for (const { sequence, content } of await chain()) {
      const record = JSON.parse(content);
      if (record.type !== 'entry') continue;
      if (record.to.id === cylinderId) micrograms += BigInt(record.massMicrograms);
      if (record.from.id === cylinderId) micrograms -= BigInt(record.massMicrograms);
      if (micrograms < 0n) below.push(sequence);
    }
    expect(below).toEqual([]);
    expect(Number(micrograms) / 1e6).toBe(await ledger.contentG(cylinderId));
    const told = accepted().map(
      ({ answers }) =>
        answers[0]?.body.balances.find(({ place }: { place: { id?: string } }) => place.id === cylinderId).massG,
    );
    expect(Math.min(...told)).toBeGreaterThanOrEqual(0);
    // Each answer saw the books between two postings: no two of them saw the same.
    expect(new Set(told).size).toBe(told.length);
  });

  it('find every group that was accepted in the chain, once, and none that was refused', async () => {
    const records = (await chain()).filter(({ sequence }) => Number(sequence) >= firstFree);
    const expected = accepted().flatMap(({ groupId, entryId }) => [groupId, entryId]);
    expect(records.map(({ recordId }) => recordId).sort()).toEqual(expected.sort());
    const rows = await app.database.query<{ id: string }>(
      'superuser',
      `select id from entry where firm_id = $1 and from_id = $2`,
      [ledger.firm.id, cylinderId],
    );
    expect(rows.map(({ id }) => id).sort()).toEqual(
      accepted()
        .map(({ entryId }) => entryId)
        .sort(),
    );
  });

  it('leave a sequence without a gap and a chain that is intact up to the head', async () => {
    const records = await chain();
    expect(records.map(({ sequence }) => Number(sequence))).toEqual(records.map((_, index) => index + 1));
    expect(firstBrokenRecord(records)).toBeNull();
    const [head] = await app.database.query<{ sequence: string; hash: Buffer }>(
      'superuser',
      'select sequence::text, hash from firm_head where firm_id = $1',
      [ledger.firm.id],
    );
    expect(head).toEqual({ sequence: records.at(-1)?.sequence, hash: records.at(-1)?.hash });
  });
});
