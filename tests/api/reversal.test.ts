import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, startLedger, weighIn } from '../support/ledger.ts';
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

const A_DAY_MS = 24 * 3600 * 1000;
const reversalOf = (fields: Record<string, unknown> = {}) => ({
  groupId: uuid(),
  schema: 1,
  reason: 'wrong cylinder',
  ...fields,
});
const reverse = (groupId: string, body: unknown = reversalOf(), client: TestClient = ledger.client) =>
  client.post(`/entry-groups/${groupId}/reversal`, body);

async function charged(client: TestClient = ledger.client) {
  const cylinder = await ledger.cylinder('9500');
  const unit = await ledger.unit('1250', '1340', {}, 'factory');
  const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9410 });
  await posted(client, body);
  return { cylinder, unit, groupId: body.groupId, body };
}

describe('Reversing a group', () => {
  it('sends its masses back at their own time, ties the two together and counts neither twice', async () => {
    const { cylinder, unit, groupId } = await charged();
    const body = reversalOf();
    const answer = await reverse(groupId, body);

    expect(answer.status).toBe(201);
    expect(answer.body.entries).toMatchObject([
      {
        from: inUnit(unit.id),
        to: inCylinder(cylinder.id),
        massG: 90,
        occurredAt: '2026-03-02T10:00:00.000Z',
        correctsGroupId: groupId,
        addedByServer: false,
      },
    ]);
    expect(await ledger.contentG(cylinder.id)).toBe(9500);
    const original = (await ledger.client.get(`/entry-groups/${groupId}`)).body;
    const reversal = (await ledger.client.get(`/entry-groups/${body.groupId}`)).body;
    expect(original).toMatchObject({ reversedByGroupId: body.groupId, reversesGroupId: null, replacedByGroupId: null });
    expect(reversal).toMatchObject({ reversesGroupId: groupId, reason: 'wrong cylinder', kind: 'extraCharge' });
    const listed = await ledger.client.get(`/entries?unitId=${unit.id}&without=reversed`);
    expect(listed.body.items.map(({ kind }: { kind: string }) => kind)).toEqual(['factoryCharge']);
  });

  it('answers a resend as before, and other content under its id with a conflict', async () => {
    const { groupId } = await charged();
    const body = reversalOf();
    const first = await reverse(groupId, body);
    const again = await reverse(groupId, { ...body, deviceSentAt: '2026-11-30T14:00:00Z' });
    expect({ status: again.status, body: again.body }).toEqual({ status: 200, body: first.body });

    expect((await reverse(groupId, { ...body, reason: 'another' })).body).toMatchObject({
      status: 409,
      code: 'idReused',
    });
    const other = await charged();
    expect((await reverse(other.groupId, body)).body).toMatchObject({ status: 409, code: 'idReused' });
  });

  it('is refused for a reversal, and a second time', async () => {
    const { groupId } = await charged();
    const body = reversalOf();
    await reverse(groupId, body);

    expect((await reverse(body.groupId)).body).toMatchObject({ status: 422, code: 'reversalOfReversal' });
    expect((await reverse(groupId)).body).toMatchObject({ status: 422, code: 'alreadyReversed' });
    expect((await reverse(uuid())).status).toBe(404);
    expect((await reverse(groupId, reversalOf({ reason: '' }))).body.errors[0]).toMatchObject({ path: '/reason' });
  });

  it('posts its replacement with it, or neither', async () => {
    const { cylinder, unit, groupId } = await charged();
    const right = await ledger.cylinder('7400');
    const sequence = await ledger.sequence();
    const tooMuch = groupOf('extraCharge', '2026-03-02T10:00:00Z', {
      unitId: unit.id,
      entries: [massOf('7401', inCylinder(right.id), inUnit(unit.id))],
    });

    const refused = await reverse(groupId, reversalOf({ replacement: tooMuch }));
    expect(refused.body).toMatchObject({
      status: 422,
      code: 'exceedsBook',
      errors: [{ path: '/replacement/entries/0/mass', given: '7401', allowed: '7400' }],
    });
    expect(await ledger.sequence()).toBe(sequence);
    expect(await ledger.contentG(cylinder.id)).toBe(9410);

    const replacement = weighIn(ledger, { cylinderId: right.id, unitId: unit.id, beforeG: 7400, afterG: 7310 });
    const answer = await reverse(groupId, reversalOf({ replacement }));
    expect(answer.status).toBe(201);
    expect(await ledger.contentG(cylinder.id)).toBe(9500);
    expect(await ledger.contentG(right.id)).toBe(7310);
    expect(await ledger.bookG(unit.id)).toBe(1340);
    const { body: original } = await ledger.client.get(`/entry-groups/${groupId}`);
    expect(original.replacedByGroupId).toBe(replacement.groupId);
  });

  it('leaves no cylinder below nothing: what was taken from it since has to be explained first', async () => {
    const cylinder = await ledger.cylinder(null);
    const purchase = groupOf('purchase', '2026-03-01T08:00:00Z', {
      entries: [
        massOf('1000', { place: 'supplier', id: ledger.supplier.id }, inCylinder(cylinder.id), { howKnown: 'invoice' }),
      ],
    });
    await posted(ledger.client, purchase);
    const unit = await ledger.unit('0', null, {}, 'notKnown');
    const taken = groupOf('extraCharge', '2026-03-02T08:00:00Z', {
      unitId: unit.id,
      entries: [massOf('90', inCylinder(cylinder.id), inUnit(unit.id))],
    });
    await posted(ledger.client, taken);

    expect((await reverse(purchase.groupId)).body).toMatchObject({ status: 422, code: 'exceedsBook' });
    expect(await ledger.contentG(cylinder.id)).toBe(910);
  });
});

describe('Who may reverse', () => {
  it('is a technician for their own groups, for a day', async () => {
    app.clock.set(TEST_START);
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    const own = await charged(technician);
    const late = await charged(technician);
    const others = await charged();

    expect((await reverse(others.groupId, reversalOf(), technician)).body).toMatchObject({
      status: 403,
      errors: [{ code: 'ownOnly' }],
    });
    app.clock.advance(A_DAY_MS);
    expect((await reverse(own.groupId, reversalOf(), technician)).status).toBe(201);
    app.clock.advance(1000);
    expect((await reverse(late.groupId, reversalOf(), technician)).body).toMatchObject({
      status: 403,
      errors: [{ code: 'ownForADay', allowed: '2026-12-01T15:00:00.000Z' }],
    });
    app.clock.set(TEST_START);
  });

  it('is a manager at any time, and no reader', async () => {
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    const { groupId } = await charged(technician);
    app.clock.advance(3 * A_DAY_MS);
    const reader = await app.signIn(await app.addPerson(['reader'], { firmId: ledger.firm.id }));
    const manager = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));

    expect((await reverse(groupId, reversalOf(), reader)).status).toBe(403);
    expect((await reverse(groupId, reversalOf(), manager)).status).toBe(201);
    app.clock.set(TEST_START);
  });
});

describe('An answer that is given later', () => {
  async function asked() {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1290', '1290');
    const body = weighIn(
      ledger,
      { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9200 },
      { kind: 'refill' },
    );
    const answer = await posted(ledger.client, body);
    expect(answer.body.flags.map(({ code }: { code: string }) => code)).toContain('askIfFull');
    return { unit, groupId: body.groupId };
  }
  const answerTo = (groupId: string, statement: unknown, id = uuid()) =>
    ledger.client.post(`/entry-groups/${groupId}/answer`, { groupId: id, schema: 1, statement });

  it('is judged as if it had been given at once; the change alone is posted', async () => {
    const { unit, groupId } = await asked();
    const id = uuid();
    const said = { about: 'unit', id: unit.id, is: 'moreThanFull' };
    const answer = await answerTo(groupId, said, id);

    expect(answer.status).toBe(201);
    expect(answer.body.entries).toMatchObject([
      { from: { place: 'atmosphere', as: 'inferred' }, to: inUnit(unit.id), massG: 300, correctsGroupId: groupId },
    ]);
    expect(answer.body.flags).toEqual(
      expect.arrayContaining([
        expect.objectContaining({ code: 'askIfFull', closedBy: id }),
        expect.objectContaining({ code: 'bookAboveFullCharge', massG: 300, closedBy: null }),
      ]),
    );
    expect((await answerTo(groupId, said, id)).body).toEqual(answer.body);
    const { body: group } = await ledger.client.get(`/entry-groups/${groupId}`);
    expect(group.statements).toEqual([{ about: 'unit', id: unit.id, is: 'moreThanFull', by: null }]);
  });

  it('can itself be reversed, and then nobody has answered', async () => {
    const { unit, groupId } = await asked();
    const id = uuid();
    await answerTo(groupId, { about: 'unit', id: unit.id, is: 'moreThanFull' }, id);
    expect(await ledger.bookG(unit.id)).toBe(1590);

    expect((await reverse(id)).status).toBe(201);
    expect(await ledger.bookG(unit.id)).toBe(1290);
    const { body } = await ledger.client.get(`/flags?unitId=${unit.id}&open=true`);
    expect(body.items.map(({ code }: { code: string }) => code)).toContain('askIfFull');
  });

  it('is refused where it answers nothing: another unit, a reversed group, an answer', async () => {
    const { unit, groupId } = await asked();
    const other = await ledger.unit('1000', '1000');
    const id = uuid();
    await answerTo(groupId, { about: 'unit', id: unit.id, is: 'full' }, id);

    const said = { about: 'unit', id: unit.id, is: 'full' };
    expect((await answerTo(groupId, { ...said, id: other.id })).body).toMatchObject({
      status: 422,
      code: 'unitNotInGroup',
    });
    expect((await answerTo(id, said)).body).toMatchObject({ status: 422, code: 'answerOfAnswer' });
    await reverse(groupId);
    expect((await answerTo(groupId, said)).body).toMatchObject({ status: 422, code: 'alreadyReversed' });
    expect((await answerTo(uuid(), said)).status).toBe(404);
  });
});

describe('A device’s time', () => {
  it('that no calendar has is refused in a reversal and an answer, too', async () => {
    const { unit, groupId } = await charged();
    const deviceSentAt = '0000-01-01T00:00:00Z';
    const expected = { status: 422, errors: [{ path: '/deviceSentAt', code: 'outOfCalendar' }] };
    expect((await reverse(groupId, reversalOf({ deviceSentAt }))).body).toMatchObject(expected);
    const answer = { groupId: uuid(), schema: 1, deviceSentAt, statement: { about: 'unit', id: unit.id, is: 'full' } };
    expect((await ledger.client.post(`/entry-groups/${groupId}/answer`, answer)).body).toMatchObject(expected);
  });
});
