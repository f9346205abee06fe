import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, startLedger } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

/** 40 CFR 82.156(a), Table 1: R-410A in a unit of 200 lb or more, machine made since 15 November 1993. */
const LEVEL = {
  required: { value: '10', unit: 'inHgVacuum' },
  reached: { value: '10.5', unit: 'inHgVacuum' },
  exception: null,
  clause: '40 CFR 82.156(a), Table 1',
};

async function recovered(recoveryLevel?: unknown, by: 'recovery' | 'vacuum' = 'recovery') {
  const unit = await ledger.unit('1340', '1340');
  const cylinder = await ledger.cylinder(null, { kind: 'recovery' });
  return groupOf('recovery', '2026-03-02T10:00:00Z', {
    unitId: unit.id,
    entries: [massOf('1340', inUnit(unit.id), inCylinder(cylinder.id))],
    statements: [{ about: 'unit', id: unit.id, is: 'empty', by }],
    ...(recoveryLevel === undefined ? {} : { recoveryLevel }),
  });
}
const viewOf = async (groupId: string) => (await ledger.client.get(`/entry-groups/${groupId}`)).body;
const contentOf = async (groupId: string): Promise<Record<string, unknown>> => {
  const [row] = await app.database.query<{ content: string }>(
    'superuser',
    'select content from journal_record where record_id = $1',
    [groupId],
  );
  return JSON.parse(row?.content ?? '{}');
};

describe('The level to which a unit was evacuated', () => {
  it('stands in the chained record as it was told, required and reached with their clause, and is read from there', async () => {
    const group = await recovered(LEVEL);
    await posted(ledger.client, group);
    expect((await viewOf(group.groupId)).recoveryLevel).toEqual(LEVEL);
    expect((await contentOf(group.groupId)).recoveryLevel).toEqual(LEVEL);

    const leaking = { required: LEVEL.required, exception: 'leaking', clause: LEVEL.clause };
    const other = await recovered(leaking);
    await posted(ledger.client, other);
    expect((await viewOf(other.groupId)).recoveryLevel).toEqual({ ...leaking, reached: null });
  });

  it('is in no record where none was told, as in those from before it was asked for', async () => {
    for (const group of [await recovered(), await recovered(null)]) {
      await posted(ledger.client, group);
      expect((await viewOf(group.groupId)).recoveryLevel).toBeNull();
      expect(Object.keys(await contentOf(group.groupId))).not.toContain('recoveryLevel');
    }
  });

  it('is part of what was posted under the id: another level is other content', async () => {
    const group = await recovered(LEVEL);
    const first = await posted(ledger.client, group);
    const again = await ledger.post(group);
    expect([again.status, again.body]).toEqual([200, first.body]);
    const deeper = { ...LEVEL, reached: { value: '12', unit: 'inHgVacuum' } };
    expect((await ledger.post({ ...group, recoveryLevel: deeper })).body.code).toBe('idReused');
  });

  it('belongs to a completed recovery, in the unit of the law, as a figure or a reason why another applies', async () => {
    const refusal = async (level: object, by: 'recovery' | 'vacuum' = 'recovery') => {
      const { status, body } = await ledger.post(await recovered(level, by));
      return [status, body.errors?.[0]?.path, body.errors?.[0]?.code];
    };
    expect(await refusal(LEVEL, 'vacuum')).toEqual([422, '/recoveryLevel', 'levelOfCompletedRecovery']);
    expect(await refusal({ ...LEVEL, reached: null })).toEqual([422, '/recoveryLevel/reached', 'levelReachedRequired']);
    const absolute = { value: '25', unit: 'mmHgAbsolute' };
    expect(await refusal({ ...LEVEL, reached: absolute })).toEqual([422, '/recoveryLevel/reached', 'levelUnitDiffers']);
    const [, path] = await refusal({ ...LEVEL, reached: { ...LEVEL.reached, value: '-3' } });
    expect(path).toBe('/recoveryLevel/reached/value');
    expect((await refusal({ ...LEVEL, deep: true }))[2]).toBe('unknownKey');
  });

  it('goes with the group that is posted in the place of a wrong one', async () => {
    const wrong = await recovered(LEVEL);
    await posted(ledger.client, wrong);
    const right = {
      ...wrong,
      groupId: uuid(),
      entries: wrong.entries.map((entry) => ({ ...entry, id: uuid() })),
      recoveryLevel: { ...LEVEL, reached: { value: '11', unit: 'inHgVacuum' } },
    };
    await posted(
      ledger.client,
      { groupId: uuid(), schema: 1, reason: 'gauge read wrongly', replacement: right },
      `/entry-groups/${wrong.groupId}/reversal`,
    );
    expect((await viewOf(right.groupId)).recoveryLevel.reached.value).toBe('11');
    expect((await viewOf(wrong.groupId)).recoveryLevel.reached.value).toBe('10.5');
  });

  it('is not shown to a reader of some sites, who does not see the journal', async () => {
    const group = await recovered(LEVEL);
    await posted(ledger.client, group);
    const person = await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [ledger.site.id] });
    const { status, body } = await (await app.signIn(person)).get(`/entry-groups/${group.groupId}`);
    expect([status, body.recoveryLevel, body.hash]).toEqual([200, null, null]);
  });
});
