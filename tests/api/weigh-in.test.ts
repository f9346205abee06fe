import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, readingOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

const START = '2026-11-30T10:00:00Z';

async function opened() {
  const cylinder = await ledger.cylinder('9500');
  const unit = await ledger.unit('1250', '1390', {}, 'factory');
  const body = groupOf('extraCharge', START, {
    unitId: unit.id,
    openWeighIn: true,
    readings: [
      readingOf(cylinder.id, ledger.scale.id, 'before', 9472, { hoseFull: true, hose: { value: '28', unit: 'g' } }),
    ],
  });
  await posted(ledger.client, body);
  return { cylinder, unit, groupId: body.groupId };
}
type Opened = Awaited<ReturnType<typeof opened>>;

const closing = ({ cylinder, unit, groupId }: Opened, fields: Record<string, unknown> = {}) =>
  groupOf('extraCharge', START, {
    unitId: unit.id,
    closesGroupId: groupId,
    readings: [readingOf(cylinder.id, ledger.scale.id, 'after', 9362)],
    entries: [massOf('138', inCylinder(cylinder.id), inUnit(unit.id))],
    ...fields,
  });

describe('An open weigh-in', () => {
  it('stays on the day of who started it, and on its cylinder, until it is weighed back', async () => {
    const weighIn = await opened();
    const { body: today } = await ledger.client.get('/today');
    expect(today.toWeighBack).toEqual([
      expect.objectContaining({
        groupId: weighIn.groupId,
        cylinderTag: weighIn.cylinder.tag,
        unitLabel: weighIn.unit.tag,
        startGrossG: 17172,
        hoseFull: true,
        hoseG: 28,
        startedAt: '2026-11-30T10:00:00.000Z',
        startedByName: ledger.owner.name,
      }),
    ]);
    const cylinder = () => ledger.client.get(`/cylinders/${weighIn.cylinder.id}`);
    expect((await cylinder()).body.openWeighInGroupId).toBe(weighIn.groupId);

    const answer = await posted(ledger.client, closing(weighIn));

    expect(answer.body.entries).toMatchObject([{ massG: 138, occurredAt: '2026-11-30T10:00:00.000Z' }]);
    expect((await cylinder()).body).toMatchObject({ contentG: 9362, openWeighInGroupId: null });
    expect((await ledger.client.get('/today')).body.toWeighBack).toEqual([]);
    const { body: group } = await ledger.client.get(`/entry-groups/${weighIn.groupId}`);
    expect(group).toMatchObject({ openWeighIn: true, closedByGroupId: expect.any(String) });
  });

  it('is closed by one group only, and may be closed anew when that one was reversed', async () => {
    const weighIn = await opened();
    const first = closing(weighIn);
    await posted(ledger.client, first);

    expect((await ledger.post(closing(weighIn))).body).toMatchObject({ status: 422, code: 'weighInNotOpen' });

    const replacement = closing(weighIn, {
      readings: [readingOf(weighIn.cylinder.id, ledger.scale.id, 'after', 9360)],
      entries: [massOf('140', inCylinder(weighIn.cylinder.id), inUnit(weighIn.unit.id))],
    });
    const reversal = { groupId: uuid(), schema: 1, reason: 'misread', replacement };
    await posted(ledger.client, reversal, `/entry-groups/${first.groupId}/reversal`);
    expect(await ledger.contentG(weighIn.cylinder.id)).toBe(9360);
    expect(await ledger.bookG(weighIn.unit.id)).toBe(1390);
  });

  it('is closed at its own time, for its own unit, with its own cylinder', async () => {
    const weighIn = await opened();
    const other = await opened();
    const refusalOf = async (fields: Record<string, unknown>) => {
      const { body } = await ledger.post(closing(weighIn, fields));
      return body.errors.map(({ path, code }: { path: string; code: string }) => [path, code]);
    };

    expect(await refusalOf({ occurredAt: '2026-11-30T14:00:00Z' })).toEqual([['/occurredAt', 'keepsOccurredAt']]);
    expect(await refusalOf({ unitId: other.unit.id })).toEqual([['/unitId', 'ofAnotherUnit']]);
    const elsewhere = [readingOf(other.cylinder.id, ledger.scale.id, 'after', 9362)];
    expect(await refusalOf({ readings: elsewhere })).toEqual([['/readings', 'closesItsCylinder']]);
    expect(await refusalOf({ closesGroupId: uuid() })).toEqual([['/closesGroupId', 'notKnownHere']]);
    expect((await ledger.client.get('/today')).body.toWeighBack.length).toBeGreaterThanOrEqual(2);
  });

  it('is one start reading and its unit, nothing else', async () => {
    const { cylinder, unit } = await opened();
    const start = readingOf(cylinder.id, ledger.scale.id, 'before', 9500);
    for (const parts of [
      { openWeighIn: true, readings: [start] },
      { openWeighIn: true, unitId: unit.id, readings: [start, readingOf(cylinder.id, ledger.scale.id, 'after', 9400)] },
      { openWeighIn: true, unitId: unit.id, readings: [] },
    ]) {
      const { body } = await ledger.post(groupOf('extraCharge', START, parts));
      expect(body.errors.map(({ code }: { code: string }) => code)).toContain('openWeighInForm');
    }
  });

  it('cannot be reversed while it is closed: the closing group goes first', async () => {
    const weighIn = await opened();
    const close = closing(weighIn);
    await posted(ledger.client, close);
    const reverse = (groupId: string) =>
      ledger.client.post(`/entry-groups/${groupId}/reversal`, { groupId: uuid(), schema: 1, reason: 'wrong cylinder' });

    expect((await reverse(weighIn.groupId)).body).toMatchObject({ status: 422, code: 'weighInClosed' });
    expect((await reverse(close.groupId)).status).toBe(201);
    expect(
      (await ledger.client.get('/today')).body.toWeighBack.map((row: { groupId: string }) => row.groupId),
    ).toContain(weighIn.groupId);
    expect((await reverse(weighIn.groupId)).status).toBe(201);
    expect(await ledger.contentG(weighIn.cylinder.id)).toBe(9500);
  });

  it('that another started is no other technician’s business, but the office’s', async () => {
    const weighIn = await opened();
    const technician = await app.signIn(await app.addPerson(['technician'], { firmId: ledger.firm.id }));
    expect((await technician.get('/today')).body.toWeighBack).toEqual([]);
    const office = await app.signIn(await app.addPerson(['complianceManager'], { firmId: ledger.firm.id }));
    expect((await office.get('/today')).body.toWeighBack.map((row: { groupId: string }) => row.groupId)).toContain(
      weighIn.groupId,
    );
  });
});
