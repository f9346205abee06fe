import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
import { type Ledger, posted, startLedger, weighIn } from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

describe('Today', () => {
  it('shows a technician the cylinders on the van, and nothing of the office', async () => {
    ledger = await startLedger(app);
    const technician = await app.addPerson(['technician'], { firmId: ledger.firm.id });
    const mine = await ledger.cylinder('9500', { heldBy: technician.id });
    await ledger.cylinder('500');
    const { body } = await (await app.signIn(technician)).get('/today');

    expect(body.onTheVan).toMatchObject([{ id: mine.id, contentG: 9500, heldBy: technician.id }]);
    expect(body).toMatchObject({ cameIn: [], contradicts: [], due: [], toWeighBack: [] });
  });

  it('shows the office what came in since yesterday, what contradicts, dangers first, and what is due', async () => {
    ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500', { retestDue: '2026-12-20' });
    await ledger.cylinder(null, { retestDue: '2026-11-01', tag: 'overdue' });
    await ledger.cylinder(null, { retestDue: '2027-06-01' });
    const unit = await ledger.unit('1290', '1400');
    app.clock.advance(2 * 24 * 3600 * 1000);
    const off = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9440, afterG: 9350 });
    await posted(ledger.client, off);
    await posted(ledger.client, {
      groupId: uuid(),
      schema: 1,
      kind: 'purchase',
      occurredAt: '2026-03-03T10:00:00Z',
      reason: 'wrong cylinder',
      entries: [
        {
          id: uuid(),
          refrigerant: 'R-22',
          mass: { value: '10', unit: 'g' },
          from: { place: 'supplier', id: ledger.supplier.id },
          to: { place: 'cylinder', id: cylinder.id },
          howKnown: 'invoice',
        },
      ],
    });
    const { body } = await ledger.client.get('/today');
    app.clock.set(TEST_START);

    expect(body.cameIn.map(({ massG }: { massG: number }) => massG)).toEqual([10, 60, 90]);
    expect(body.contradicts.map(({ code }: { code: string }) => code)).toEqual([
      'cylinderMixed',
      'cylinderNotExplained',
    ]);
    expect(body.due).toEqual([
      expect.objectContaining({ kind: 'retest', label: 'overdue', on: '2026-11-01', overdue: true }),
      expect.objectContaining({ kind: 'retest', on: '2026-12-20', overdue: false }),
    ]);
  });

  it('counts what is on hand in cylinders, by refrigerant', async () => {
    ledger = await startLedger(app);
    await ledger.cylinder('9500');
    await ledger.cylinder('500.5');
    await ledger.cylinder('1000', { refrigerant: 'R-32' });
    await ledger.cylinder(null);
    const onHand = {
      cylinderCount: 3,
      massG: 11000.5,
      byRefrigerant: [
        { refrigerant: 'R-32', massG: 1000 },
        { refrigerant: 'R-410A', massG: 10000.5 },
      ],
    };
    expect((await ledger.client.get('/today')).body.onHand).toEqual(onHand);
    expect((await ledger.client.get('/on-hand')).body).toEqual(onHand);
  });
});
