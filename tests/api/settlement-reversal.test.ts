import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Checklist } from '../../shared/periods/periods.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  inCylinder,
  inUnit,
  type Ledger,
  massOf,
  posted,
  readingOf,
  startLedger,
  weighIn,
} from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const get = async (ledger: Ledger, path: string) => {
  const answer = await ledger.client.get(path);
  expect(answer.status, `${path}: ${JSON.stringify(answer.body)}`).toBe(200);
  return answer.body;
};
const checklist = (ledger: Ledger): Promise<Checklist> => get(ledger, '/periods/checklist?month=2026-01');
const settle = async (ledger: Ledger, key: string, place: string, grams?: string) => {
  const body = {
    id: uuid(),
    month: '2026-01',
    key,
    to: { place },
    reason: 'found out',
    ...(grams ? { mass: { value: grams, unit: 'g' } } : {}),
  };
  return String((await posted(ledger.client, body, '/periods/settlements')).body.groupId);
};
const reverse = (ledger: Ledger, groupId: string, replacement?: object) =>
  posted(
    ledger.client,
    { groupId: uuid(), schema: 1, reason: 'it was not', ...(replacement ? { replacement } : {}) },
    `/entry-groups/${groupId}/reversal`,
  );

/** A cylinder whose reading of the 20th shows so much less than its book (below zero: more). */
async function withDifference(missingG: number) {
  const ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500');
  const unit = await ledger.unit('1250', '5000');
  const weighing = groupOf('weighing', '2026-01-20T08:00:00Z', {
    readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 9_500 - missingG)],
  });
  await posted(ledger.client, weighing);
  const found = (await checklist(ledger)).items.find(({ kind }) => kind === 'difference');
  /** A charge of the 10th that nobody had sent: it explains so much of what was missing. */
  const lateCharge = (grams: number) =>
    weighIn(
      ledger,
      { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9_500, afterG: 9_500 - grams },
      {},
      '2026-01-10T10:00:00Z',
    );
  return { ledger, cylinder, unit, key: String(found?.key), lateCharge };
}

/** The same figure from all who tell it: books, emissions, and the list that month close goes by. */
async function told(ledger: Ledger) {
  const books = await get(ledger, '/books?from=2026-01&to=2026-01');
  const emissions = (await get(ledger, '/emissions')).items as { massG: number }[];
  const { items, settled } = await checklist(ledger);
  const open = items.flatMap((item) => (item.kind === 'difference' ? [item.difference.standsG] : []));
  const endOf = (list: { kind: string; endG: number }[], kind: string) =>
    list.find((row) => row.kind === kind)?.endG ?? 0;
  return {
    lostG: emissions.reduce((sum, { massG }) => sum + massG, 0),
    missingG: endOf(books.places, 'missing'),
    differenceG: endOf(books.differences, 'cylinderDifference'),
    open,
    settled: settled.map(({ massG }) => massG),
  };
}
const nothing = { lostG: 0, missingG: 0, differenceG: 0, open: [], settled: [] };

describe('A settlement that was taken back', () => {
  it('in part, then reversed, gives back what was left of it: books, emissions and checklist agree', async () => {
    const { ledger, key, lateCharge } = await withDifference(90);
    const settlement = await settle(ledger, key, 'atmosphere');
    await posted(ledger.client, lateCharge(40));
    expect(await told(ledger)).toEqual({ ...nothing, lostG: 50, settled: [50] });
    const { body } = await reverse(ledger, settlement);
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: 50, open: [-50] });
    expect(body.entries).toMatchObject([
      { massG: 90, from: { place: 'atmosphere' }, to: { place: 'cylinderDifference' } },
      { massG: 40, from: { place: 'cylinderDifference' }, to: { place: 'atmosphere' }, addedByServer: true },
    ]);
    await settle(ledger, key, 'missing');
    expect(await told(ledger)).toEqual({ ...nothing, missingG: 50, settled: [50] });
  });

  it('wholly, then reversed, leaves nothing anywhere', async () => {
    const { ledger, key, lateCharge } = await withDifference(90);
    const settlement = await settle(ledger, key, 'atmosphere');
    await posted(ledger.client, lateCharge(90));
    expect(await told(ledger)).toEqual(nothing);
    await reverse(ledger, settlement);
    expect(await told(ledger)).toEqual(nothing);
  });

  it('of a surplus, then reversed, goes the other way', async () => {
    const { ledger, cylinder, unit, key } = await withDifference(-90);
    const recovery = groupOf('recovery', '2026-01-10T10:00:00Z', {
      unitId: unit.id,
      entries: [massOf('40', inUnit(unit.id), inCylinder(cylinder.id))],
      reason: 'no recovery cylinder on the van',
    });
    const settlement = await settle(ledger, key, 'missing');
    expect(await told(ledger)).toEqual({ ...nothing, missingG: -90, settled: [-90] });
    await posted(ledger.client, recovery);
    expect(await told(ledger)).toEqual({ ...nothing, missingG: -50, settled: [-50] });
    await reverse(ledger, settlement);
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: -50, open: [50] });
  });

  it('is one of two of the same difference: reversing each gives back its own rest', async () => {
    const { ledger, key, lateCharge } = await withDifference(90);
    const lost = await settle(ledger, key, 'atmosphere', '60');
    const missing = await settle(ledger, key, 'missing');
    await posted(ledger.client, lateCharge(40));
    expect(await told(ledger)).toEqual({ ...nothing, lostG: 50, settled: [50] });
    await reverse(ledger, missing);
    expect(await told(ledger)).toEqual({ ...nothing, lostG: 50, settled: [50] });
    await reverse(ledger, lost);
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: 50, open: [-50] });
  });

  it('when its late entry was withdrawn before, is reversed for its rest', async () => {
    const { ledger, key, lateCharge } = await withDifference(90);
    const settlement = await settle(ledger, key, 'atmosphere');
    const charge = lateCharge(40);
    await posted(ledger.client, charge);
    await reverse(ledger, charge.groupId);
    expect(await told(ledger)).toEqual({ ...nothing, lostG: 50, differenceG: 40, open: [-40], settled: [50] });
    await reverse(ledger, settlement);
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: 90, open: [-90] });
  });
});

describe('A settlement of a unit that was taken back', () => {
  it('is reversed at the site where the unit stands: nothing is lost there, nor anywhere', async () => {
    const ledger = await startLedger(app);
    const unit = await ledger.unit('1000', '1000');
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    const recovered = (at: string, grams: string, statements: object[]) =>
      posted(
        ledger.client,
        groupOf('recovery', at, {
          unitId: unit.id,
          entries: [massOf(grams, inUnit(unit.id), inCylinder(recovery.id))],
          statements,
        }),
      );
    const bySite = async () => (await get(ledger, '/emissions?by=site')).lines;
    await recovered('2026-01-20T08:00:00Z', '998', [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }]);
    const found = (await checklist(ledger)).items.find(({ kind }) => kind === 'difference');
    const settlement = await settle(ledger, String(found?.key), 'atmosphere');
    expect(await bySite()).toMatchObject([{ totalG: 2, label: ledger.site.name }]);
    await recovered('2026-01-10T08:00:00Z', '2', []);
    expect(await bySite()).toEqual([]);
    await reverse(ledger, settlement);
    expect(await bySite()).toEqual([]);
    expect((await checklist(ledger)).items.filter(({ kind }) => kind === 'difference')).toEqual([]);
    const { differences } = await get(ledger, '/books?from=2026-01&to=2026-01');
    expect(differences.filter(({ endG }: { endG: number }) => endG !== 0)).toEqual([]);
  });
});

describe('A settlement that is replaced by what explains it', () => {
  it('goes back once, not with its reversal and again with the explanation', async () => {
    const { ledger, key, lateCharge } = await withDifference(90);
    const settlement = await settle(ledger, key, 'atmosphere');
    await reverse(ledger, settlement, lateCharge(40));
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: 50, open: [-50] });
  });

  it('in part before: what went back already does not go back again', async () => {
    const { ledger, cylinder, key, lateCharge } = await withDifference(90);
    const settlement = await settle(ledger, key, 'atmosphere');
    await posted(ledger.client, lateCharge(40));
    const other = groupOf('weighing', '2026-01-25T08:00:00Z', {
      readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 9_410)],
    });
    await reverse(ledger, settlement, other);
    expect(await told(ledger)).toEqual({ ...nothing, differenceG: 50, open: [-50] });
  });
});
