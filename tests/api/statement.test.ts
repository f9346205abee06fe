import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CylinderStatement } from '../../shared/statements/cylinder-statement.schema.ts';
import { startTestApp, type TestApp, type TestPerson } from '../support/app.ts';
import {
  groupOf,
  HOSE,
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

const statementOf = async (ledger: Ledger, id: string, from = '2026-03-01', to = '2026-03-31') => {
  const answer = await ledger.client.get(`/cylinders/${id}/statement?from=${from}&to=${to}`);
  expect(answer.status, JSON.stringify(answer.body)).toBe(200);
  return answer.body as CylinderStatement;
};
const weigh = (ledger: Ledger, id: string, netG: number, at: string, toolId = ledger.scale.id) =>
  posted(ledger.client, groupOf('weighing', at, { readings: [readingOf(id, toolId, 'only', netG)] }));
const charge = (ledger: Ledger, cylinderId: string, unitId: string, beforeG: number, afterG: number, at: string) =>
  posted(ledger.client, weighIn(ledger, { cylinderId, unitId, beforeG, afterG }, {}, at));

describe('A statement is refused', () => {
  it('without sign-in, for no cylinder, and for another firm’s', async () => {
    const ledger = await startLedger(app);
    const { id } = await ledger.cylinder();
    expect((await app.visitor().get(`/cylinders/${id}/statement`)).status).toBe(401);
    expect((await ledger.client.get(`/cylinders/${uuid()}/statement`)).status).toBe(404);
    const other = await startLedger(app);
    expect((await other.client.get(`/cylinders/${id}/statement`)).status).toBe(404);
  });

  it('to a reader of some sites, who sees no cylinder', async () => {
    const ledger = await startLedger(app);
    const { id } = await ledger.cylinder();
    const reader = await app.signIn(
      await app.addPerson(['reader'], { firmId: ledger.firm.id, siteIds: [ledger.site.id] }),
    );
    expect((await reader.get(`/cylinders/${id}/statement`)).status).toBe(404);
  });

  it('for a period that ends before it begins, is no period, or is longer than three years', async () => {
    const ledger = await startLedger(app);
    const { id } = await ledger.cylinder();
    const ask = async (query: string) => (await ledger.client.get(`/cylinders/${id}/statement?${query}`)).body;
    expect(await ask('from=2026-03-02&to=2026-03-01')).toMatchObject({ code: 'periodBackwards', status: 422 });
    expect(await ask('from=2026-02-30')).toMatchObject({ code: 'notDay' });
    expect(await ask('from=2020-01-01&to=2026-03-01')).toMatchObject({
      code: 'statementPeriodTooLong',
      errors: [{ allowed: 1100, message: expect.stringContaining('1,100 days') }],
    });
    expect(await ask('month=2026-03')).toMatchObject({ status: 422 });
  });
});

describe('A statement', () => {
  it('is opening, what came in and went out, and closing, each line with the balance after it', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '1400');
    await weigh(ledger, cylinder.id, 9_500, '2026-02-20T08:00:00Z');
    await posted(
      ledger.client,
      weighIn(
        ledger,
        { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9_500, afterG: 9_382 },
        {
          entries: [
            massOf('90', inCylinder(cylinder.id), inUnit(unit.id)),
            massOf('28', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' }),
          ],
        },
        '2026-03-02T10:00:00Z',
      ),
    );
    const statement = await statementOf(ledger, cylinder.id);
    expect(statement).toMatchObject({
      cylinder: { id: cylinder.id, tag: cylinder.tag, tareG: 7_700 },
      openingG: 9_500,
      cameInG: 0,
      wentOutG: 118,
      openedG: 0,
      differencesG: 0,
      closingG: 9_382,
      closingByRefrigerant: [{ refrigerant: 'R-410A', massG: 9_382 }],
      differences: [],
      weighedBefore: '2026-02-20T08:00:00.000Z',
    });
    expect(
      statement.lines.map((line) =>
        line.line === 'entry' ? [line.massG, line.balanceG, line.counter.label] : [line.moment, line.contentG],
      ),
    ).toEqual([
      ['before', 9_500],
      [-90, 9_410, unit.tag],
      [-28, 9_382, 'atmosphere, hose'],
      ['after', 9_382],
    ]);
    // The difference is none; its basis is two readings, the hose is vouched for by no scale.
    expect(statement.difference).toMatchObject({
      differenceG: 0,
      twoUG: 4.082,
      independentReadings: 2,
      notWeighed: 1,
      verdict: 'withinScales',
      restsOnAt: '2026-02-20T08:00:00.000Z',
    });
    expect(statement.lastReading).toMatchObject({ contentG: 9_382, expectedG: 9_382, scale: { resolutionG: 5 } });
  });

  it('of a month in which nothing happened carries the balance over, and says that it was not weighed', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    expect(await statementOf(ledger, cylinder.id, '2026-05-01', '2026-05-31')).toMatchObject({
      openingG: 9_500,
      closingG: 9_500,
      lines: [],
      lastReading: null,
      difference: null,
      weighedBefore: null,
    });
    expect(await statementOf(ledger, cylinder.id, '2025-05-01', '2025-05-31')).toMatchObject({
      openingG: 0,
      closingG: 0,
    });
  });

  it('of one period begins with what the one before ended with, whatever lies on the border of the firm’s day', async () => {
    const ledger = await startLedger(app, { timeZone: 'America/New_York' });
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('500', '5000');
    for (const [index, at] of ['2026-03-31T23:30:00-04:00', '2026-04-01T00:30:00-04:00'].entries()) {
      await charge(ledger, cylinder.id, unit.id, 9_500 - index * 100, 9_400 - index * 100, at);
    }
    const march = await statementOf(ledger, cylinder.id, '2026-03-01', '2026-03-31');
    const april = await statementOf(ledger, cylinder.id, '2026-04-01', '2026-04-30');
    expect([march.closingG, april.openingG, april.closingG]).toEqual([9_400, 9_400, 9_300]);
    expect(march.timeZone).toBe('America/New_York');
  });
});

/** Source: GUM (JCGM 100) Type B worked by hand: eight issues, d = 5 g, u = sqrt(18) x 1.4434 g = 6.124 g, 2 u = 12.25 g. */
describe('The difference of a period', () => {
  const eightIssues = async (missingG: number) => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('500', '5000');
    await weigh(ledger, cylinder.id, 9_500, '2026-02-28T08:00:00Z');
    for (let issue = 0; issue < 8; issue++) {
      const beforeG = 9_500 - issue * 100;
      const at = `2026-03-${String(issue + 2).padStart(2, '0')}T10:00:00Z`;
      await charge(ledger, cylinder.id, unit.id, beforeG, beforeG - 100, at);
    }
    await weigh(ledger, cylinder.id, 8_700 - missingG, '2026-03-20T08:00:00Z');
    return statementOf(ledger, cylinder.id);
  };

  it('of 12 g after eight issues with their own readings is within the scales, and the book keeps its own', async () => {
    // The judge holds one reading against the book (2 u of two readings, 4.08 g), so that 12 g move the book.
    const statement = await eightIssues(12);
    expect(statement.difference).toMatchObject({
      differenceG: -12,
      standardUncertaintyG: 6.124,
      twoUG: 12.247,
      independentReadings: 18,
      sharedReadings: 0,
      verdict: 'withinScales',
    });
    expect(statement.lastReading).toMatchObject({ contentG: 8_688, expectedG: 8_700 });
    expect(statement).toMatchObject({ openingG: 9_500, wentOutG: 800, differencesG: -12, closingG: 8_688 });
  });

  it.each([
    [15, 'lookAgain'],
    [20, 'notExplained'],
  ])('of %i g is beyond: %s', async (missingG, verdict) => {
    expect((await eightIssues(missingG)).difference).toMatchObject({ differenceG: -missingG, verdict });
  });

  it('of a month never contradicts the line of its reading, however many weighings its opening rests on', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    const unit = await ledger.unit('500', '9000');
    await weigh(ledger, cylinder.id, 9_500, '2026-03-01T08:00:00Z');
    for (let issue = 0; issue < 60; issue++) {
      const at = new Date(Date.UTC(2026, 2, 2 + Math.floor(issue / 3), 9 + 2 * (issue % 3))).toISOString();
      await charge(ledger, cylinder.id, unit.id, 9_500 - issue * 100, 9_400 - issue * 100, at);
    }
    await weigh(ledger, cylinder.id, 3_472, '2026-05-04T08:00:00Z');
    // 2 sqrt(122) x 1.4434 g: 60 issues, each with its own pair of readings, between two more.
    const figures = { differenceG: -28, twoUG: 31.885, verdict: 'withinScales' };
    const may = await statementOf(ledger, cylinder.id, '2026-05-01', '2026-05-31');
    expect(may.difference).toMatchObject({ ...figures, independentReadings: 122 });
    expect(may.lines).toMatchObject([figures, {}]);
    const all = await statementOf(ledger, cylinder.id, '2026-03-01', '2026-05-31');
    expect(all.difference).toMatchObject(figures);
    const books = await ledger.client.get('/books/differences?from=2026-05&to=2026-05');
    expect(books.body.items).toMatchObject([figures]);
  });

  it('leaves a reading out that ends one weighing and starts the next', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('500', '5000');
    await weigh(ledger, cylinder.id, 9_500, '2026-02-28T08:00:00Z');
    const shared = (moment: 'before' | 'after', netG: number, at: string) =>
      readingOf(cylinder.id, ledger.scale.id, moment, netG, { at });
    const steps = ['2026-03-02T10:00:00Z', '2026-03-02T10:10:00Z', '2026-03-02T10:20:00Z'];
    for (const [index, at] of steps.slice(0, 2).entries()) {
      const beforeG = 9_500 - index * 100;
      await posted(
        ledger.client,
        groupOf('extraCharge', at, {
          unitId: unit.id,
          readings: [shared('before', beforeG, at), shared('after', beforeG - 100, steps[index + 1] as string)],
          entries: [massOf('100', inCylinder(cylinder.id), inUnit(unit.id))],
        }),
      );
    }
    await weigh(ledger, cylinder.id, 9_295, '2026-03-20T08:00:00Z');
    // Start, first before, last after, end: four readings. The one at 10:10 is one and the same for both weighings.
    expect((await statementOf(ledger, cylinder.id)).difference).toMatchObject({
      independentReadings: 4,
      sharedReadings: 1,
      standardUncertaintyG: 2.887,
      differenceG: -5,
    });
  });

  it('knows that two scales do not cancel each other: span and zero of the very scales', async () => {
    const ledger = await startLedger(app);
    const accuracy = { resolutionG: 5, repeatabilityG: 2, spanErrorRelative: 0.001, offsetG: 10 };
    const [one, two] = await Promise.all(
      ['Scale A', 'Scale B'].map((name) => ledger.made('/tools', { id: uuid(), kind: 'scale', name, scale: accuracy })),
    );
    const cylinder = await ledger.cylinder('9500');
    await weigh(ledger, cylinder.id, 9_500, '2026-02-28T08:00:00Z', one?.id);
    await weigh(ledger, cylinder.id, 9_470, '2026-03-20T08:00:00Z', two?.id);
    const { difference, lastReading } = await statementOf(ledger, cylinder.id);
    // 2 (25/12 + 4) + (17.2^2 + 17.17^2 + 10^2 + 10^2)/3 = 275.7
    expect(difference?.standardUncertaintyG).toBeCloseTo(16.605, 2);
    expect(difference).toMatchObject({ differenceG: -30, verdict: 'withinScales' });
    expect(lastReading?.scale).toEqual({ ...accuracy, assumed: false });
  });

  it('says that nobody named the scale where nobody did', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const reading = readingOf(cylinder.id, '', 'only', 9_500, { toolId: null });
    await posted(ledger.client, groupOf('weighing', '2026-03-04T08:00:00Z', { readings: [reading] }));
    expect((await statementOf(ledger, cylinder.id)).lastReading?.scale).toMatchObject({
      resolutionG: 5,
      assumed: true,
    });
  });

  it('is none where the first reading opens a book that nothing explained', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder(null);
    await weigh(ledger, cylinder.id, 6_000, '2026-03-04T08:00:00Z');
    expect(await statementOf(ledger, cylinder.id)).toMatchObject({
      openingG: 0,
      openedG: 6_000,
      closingG: 6_000,
      difference: null,
      differences: [],
    });
  });
});

describe('A difference', () => {
  it('is charged to whoever held the cylinder between the two readings, not to the one who found it', async () => {
    const ledger = await startLedger(app);
    const [brandt, oduya] = await Promise.all(
      ['S. Brandt', 'M. Oduya'].map((name) => app.addPerson(['technician'], { firmId: ledger.firm.id, name })),
    );
    const hold = async (id: string, personId: string | null) => {
      const { body } = await ledger.client.get(`/cylinders/${id}`);
      expect((await ledger.client.patch(`/cylinders/${id}`, body.version, { heldBy: personId })).status).toBe(200);
    };
    const finder = await app.signIn(oduya as TestPerson);
    const day = (number: number) => `2026-03-${String(number).padStart(2, '0')}T08:00:00.000Z`;
    app.clock.set(day(1));
    const cylinder = await ledger.cylinder('9500', { heldBy: brandt?.id });
    app.clock.set(day(3));
    await weigh(ledger, cylinder.id, 9_500, day(2));
    app.clock.set(day(10));
    await hold(cylinder.id, null);
    app.clock.set(day(12));
    await hold(cylinder.id, oduya?.id ?? '');
    app.clock.set(day(14));
    await posted(
      finder,
      groupOf('weighing', day(13), { readings: [readingOf(cylinder.id, ledger.scale.id, 'only', 9_370)] }),
    );
    app.clock.set('2026-11-30T15:00:00.000Z');
    const { differences } = await statementOf(ledger, cylinder.id);
    expect(differences).toMatchObject([
      { bookG: 9_500, scaleG: 9_370, differenceG: -130, twoUG: 4.082, verdict: 'notExplained', posted: true },
    ]);
    expect(differences[0]?.heldBetween).toEqual([
      { personId: brandt?.id, name: 'S. Brandt', van: null, from: day(2), to: day(10) },
      { personId: null, name: null, van: null, from: day(10), to: day(12) },
      { personId: oduya?.id, name: 'M. Oduya', van: null, from: day(12), to: day(13) },
    ]);
  });

  it('that a late entry explains stands in the statement with its correction, both at the time of the reading', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const [unit, other] = [await ledger.unit('1250', '1340'), await ledger.unit('1800', '1900')];
    // Scenario S21 case 1: B at 12:00 syncs first and shows 90 missing, A of 10:00 syncs second.
    await charge(ledger, cylinder.id, other.id, 9_410, 9_310, '2026-03-02T12:00:00Z');
    expect((await statementOf(ledger, cylinder.id)).differences).toMatchObject([{ differenceG: -90 }]);
    await charge(ledger, cylinder.id, unit.id, 9_500, 9_410, '2026-03-02T10:00:00Z');
    const statement = await statementOf(ledger, cylinder.id);
    expect(statement).toMatchObject({ differencesG: 0, wentOutG: 190, closingG: 9_310, differences: [] });
    const entries = statement.lines.flatMap((line) => (line.line === 'entry' ? [line] : []));
    expect(entries.map(({ massG, counter }) => [massG, counter.label])).toEqual([
      [-90, unit.tag],
      [-90, 'cylinder difference'],
      [-100, other.tag],
      [90, 'cylinder difference'],
    ]);
    expect(statement.difference).toMatchObject({ differenceG: 0, verdict: 'withinScales' });
  });

  it('goes with its group when that is reversed: both lines are marked, and count for nothing', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1340');
    const group = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 7_400, afterG: 7_310 });
    await posted(ledger.client, group);
    await posted(
      ledger.client,
      { groupId: uuid(), schema: 1, reason: 'wrong cylinder' },
      `/entry-groups/${group.groupId}/reversal`,
    );
    const statement = await statementOf(ledger, cylinder.id);
    expect(statement).toMatchObject({ wentOutG: 0, cameInG: 0, differencesG: 0, closingG: 9_500, differences: [] });
    const entered = statement.lines.filter((line) => line.line === 'entry' && !line.addedByServer);
    expect(entered.map(({ cancelled }) => cancelled)).toEqual([true, true]);
    const readings = statement.lines.filter(({ line }) => line === 'reading');
    expect(readings).toMatchObject([
      { cancelled: true, contentG: null, verdict: null },
      { cancelled: true, contentG: null, verdict: null },
    ]);
  });
});

describe('A statement as CSV', () => {
  it('has a line for each entry and reading, and runs nothing in a spreadsheet', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const evil = await ledger.made('/parties', { id: uuid(), kind: 'supplier', name: '=HYPERLINK("x")' });
    await posted(
      ledger.client,
      groupOf('purchase', '2026-03-05T08:00:00Z', {
        entries: [
          massOf('500.5', { place: 'supplier', id: evil.id }, inCylinder(cylinder.id), { howKnown: 'invoice' }),
        ],
      }),
    );
    await weigh(ledger, cylinder.id, 10_000, '2026-03-06T08:00:00Z');
    const { headers, body } = await ledger.client.get(
      `/cylinders/${cylinder.id}/statement.csv?from=2026-03-01&to=2026-03-31`,
    );
    expect(headers.get('content-type')).toContain('text/csv');
    const lines = String(body).trim().split('\r\n');
    expect(lines).toHaveLength(3);
    expect(lines[0]).toContain('mass (g),balance (g),other place: kind,other place');
    expect(lines[1]).toContain(`,500.5,10000.5,supplier,"'=HYPERLINK(""x"")",invoice,`);
    expect(lines[2]).toContain(',17700,10000,-0.5,4.082,withinScales,');
  });
});
