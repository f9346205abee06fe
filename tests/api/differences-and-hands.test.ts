import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readDifferences } from '../../server/books/books.service.ts';
import { inFirm } from '../../server/database/firm-scope.ts';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, readingOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const weigh = (ledger: Ledger, cylinderId: string, netG: number, at: string, toolId = ledger.scale.id) =>
  posted(ledger.client, groupOf('weighing', at, { readings: [readingOf(cylinderId, toolId, 'only', netG)] }));

describe('A list of differences that is cut', () => {
  it('keeps a small one that the scales do not explain before a larger one that they do; the sums are of both', async () => {
    const ledger = await startLedger(app);
    const scale = { resolutionG: 0.1, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 };
    const fine = await ledger.made('/tools', { id: uuid(), kind: 'scale', name: 'Scale 2', scale });
    const cylinder = await ledger.cylinder('9500');
    await weigh(ledger, cylinder.id, 9_500, '2026-03-02T08:00:00Z', fine.id);
    await weigh(ledger, cylinder.id, 9_498.5, '2026-03-03T08:00:00Z', fine.id);
    const unit = await ledger.unit('1000', '1000');
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    await posted(
      ledger.client,
      groupOf('recovery', '2026-03-03T10:00:00Z', {
        unitId: unit.id,
        readings: [readingOf(recovery.id, ledger.scale.id, 'after', 998)],
        entries: [massOf('998', inUnit(unit.id), inCylinder(recovery.id))],
        statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      }),
    );
    const search = { from: null, to: '2026-03', standingOnly: true };
    const found = await inFirm(
      app.parts.dataSource,
      { firmId: ledger.firm.id, personId: ledger.owner.id, siteIds: null },
      (manager) => readDifferences(manager, search, 1),
    );
    expect(found).toMatchObject({
      items: [{ subject: { id: cylinder.id }, standsG: -1.5, verdict: 'notExplained' }],
      notListed: { count: 1, massG: 2 },
      totals: { notExplainedG: 1.5, withinScalesG: 2 },
    });
  });
});

describe('A difference of a cylinder', () => {
  it('that two people held is charged to neither and shown of both, whole; of one alone, to that one', async () => {
    const ledger = await startLedger(app);
    const technician = (name: string) => app.addPerson(['technician'], { firmId: ledger.firm.id, name });
    const [brandt, oakes] = [await technician('S. Brandt'), await technician('R. Oakes')];
    app.clock.set('2026-03-01T08:00:00.000Z');
    const cylinder = await ledger.cylinder('9500', { heldBy: brandt.id });
    await weigh(ledger, cylinder.id, 9_500, '2026-03-01T08:00:00Z');
    app.clock.set('2026-03-05T08:00:00.000Z');
    expect((await ledger.client.patch(`/cylinders/${cylinder.id}`, 1, { heldBy: oakes.id })).status).toBe(200);
    app.clock.set(TEST_START);
    await weigh(ledger, cylinder.id, 9_370, '2026-03-09T08:00:00Z');
    const people = async () => {
      const { items } = (await ledger.client.get('/books/people?from=2026-03&to=2026-03')).body;
      return items.map(({ name, chargedG, chargedBeyondCount, sharedG }: Record<string, unknown>) =>
        [name, chargedG, chargedBeyondCount, sharedG].join(' '),
      );
    };
    // The owner alone recorded; one of the two holds nothing any more, and is named all the same.
    expect(await people()).toEqual(expect.arrayContaining(['S. Brandt 0 0 -130', 'R. Oakes 0 0 -130']));
    await weigh(ledger, cylinder.id, 9_300, '2026-03-20T08:00:00Z');
    expect(await people()).toEqual(expect.arrayContaining(['S. Brandt 0 0 -130', 'R. Oakes -70 1 -130']));
  });
});
