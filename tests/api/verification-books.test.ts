import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { VerificationResult } from '../../shared/proof/proof.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, type Ledger, posted, readingOf, startLedger, weighIn } from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

let ledger: Ledger;
/** A month that was worked on: a difference settled, partly explained later, a charge reversed, a cylinder handed on. */
beforeEach(async () => {
  ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500');
  const unit = await ledger.unit('1250', '5000');
  const charge = (beforeG: number, afterG: number, at: string) =>
    weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG, afterG }, {}, at);
  const readings = [readingOf(cylinder.id, ledger.scale.id, 'only', 9_410)];
  await posted(ledger.client, groupOf('weighing', '2026-01-20T08:00:00Z', { readings }));
  const { items } = (await ledger.client.get('/periods/checklist?month=2026-01')).body;
  const settlement = {
    id: uuid(),
    month: '2026-01',
    key: items[0].key,
    to: { place: 'missing' },
    mass: { value: '80', unit: 'g' },
    reason: 'found out',
  };
  await posted(ledger.client, settlement, '/periods/settlements');
  await posted(ledger.client, charge(9_500, 9_460, '2026-01-10T10:00:00Z'));
  const wrong = charge(9_410, 9_400, '2026-01-25T10:00:00Z');
  await posted(ledger.client, wrong);
  const path = `/entry-groups/${wrong.groupId}/reversal`;
  await posted(ledger.client, { groupId: uuid(), schema: 1, reason: 'wrong unit' }, path);
  const handed = await ledger.client.patch(`/cylinders/${cylinder.id}`, 1, { heldBy: ledger.owner.id });
  expect(handed.status).toBe(200);
});

const verification = async (): Promise<VerificationResult> => {
  const response = await fetch(`${app.url}/api/v1/journal/verification`, {
    headers: { Cookie: String(ledger.client.cookie) },
  });
  return JSON.parse((await response.text()).trim().split('\n').at(-1) ?? '');
};
/** Somebody with full rights on the database, past its triggers. */
const faultAfter = async (sql: string) => {
  const ofFirm = sql.replaceAll('FIRM', `firm_id = '${ledger.firm.id}'`);
  await app.database.query('superuser', `set session_replication_role = 'replica'; ${ofFirm}`);
  return (await verification()).fault;
};

describe('The check of the log', () => {
  it('finds a log intact in which a difference was settled, taken back in part, and that settlement reversed', async () => {
    expect(await verification()).toMatchObject({ fault: null, result: 'intact' });
    const [settled] = await app.database.query<{ id: string }>(
      'superuser',
      `select group_id as id from entry where firm_id = $1 and kind = 'monthClose'`,
      [ledger.firm.id],
    );
    const path = `/entry-groups/${settled?.id}/reversal`;
    await posted(ledger.client, { groupId: uuid(), schema: 1, reason: 'it was not' }, path);
    expect(await verification()).toMatchObject({ fault: null, result: 'intact' });
  });

  it.each([
    ['the reversals in a sum by month', `update month_sum set reversal_micrograms = 0 where FIRM`, 'cylinder'],
    [
      'how much of a settlement was taken back',
      `update settlement_undo set mass_micrograms = mass_micrograms - 1 where FIRM`,
      'cylinderDifference',
    ],
    ['that a settlement was taken back', `delete from settlement_undo where FIRM`, 'cylinderDifference'],
    [
      'the book that the next posting is judged on',
      `update place_state set state = jsonb_set(state, '{state,book,R-410A}', '"1µg"') where FIRM and place = 'cylinder'`,
      'cylinder:',
    ],
  ])('names it when somebody changed %s', async (_what, sql, place) => {
    const fault = await faultAfter(sql);
    expect(fault).toMatchObject({ code: 'booksDiffer', values: { refrigerant: 'R-410A' } });
    expect(fault?.values.place).toContain(place);
  });

  it.each([
    ['who held a cylinder', `update cylinder_holder set held_by = null where FIRM and version = 2`, 'held_by'],
    ['since when', `update cylinder_holder set valid_from = valid_from - interval '1 day' where FIRM`, 'valid_from'],
  ])('names it when somebody changed %s, which says who is charged', async (_what, sql, column) => {
    expect(await faultAfter(sql)).toMatchObject({
      code: 'columnDiffers',
      sequence: expect.any(Number),
      values: { table: 'cylinder_holder', column },
    });
  });

  it('names a change of hands that was taken out, and one that was put in', async () => {
    const taken = await faultAfter(`delete from cylinder_holder where FIRM and version = 2`);
    expect(taken).toMatchObject({ code: 'rowMissing', values: { table: 'cylinder_holder' } });
    const put =
      await faultAfter(`insert into cylinder_holder select firm_id, cylinder_id, v, $$${ledger.owner.id}$$, valid_from
      from cylinder_holder, unnest(array[2, 3]) v where FIRM and version = 1`);
    expect(put).toMatchObject({ values: { table: 'cylinder_holder' } });
  });

  it('names a settlement that was made to go elsewhere', async () => {
    expect(await faultAfter(`update settlement set settled_to_id = '${ledger.supplier.id}' where FIRM`)).toMatchObject({
      values: { table: 'settlement', column: 'settled_to_id' },
    });
  });
});
