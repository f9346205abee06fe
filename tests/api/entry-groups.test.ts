import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, TEST_START, type TestApp } from '../support/app.ts';
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
  TARE_G,
  weighIn,
} from '../support/ledger.ts';

let app: TestApp;
let ledger: Ledger;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
});
afterAll(() => app.close());

const DAY = '2026-03-02T10:00:00Z';
const bought = (cylinderId: string, massG: string, fields: Record<string, unknown> = {}) =>
  groupOf('purchase', DAY, {
    entries: [
      massOf(massG, { place: 'supplier', id: ledger.supplier.id }, inCylinder(cylinderId), {
        howKnown: 'invoice',
        ...fields,
      }),
    ],
  });

describe('Posting a group', () => {
  it('answers with its entries in the chain, the books after it, and what now stands before the manager', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1340', {}, 'factory');
    const before = await ledger.sequence();

    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9472, afterG: 9382 });
    body.readings = [
      readingOf(cylinder.id, ledger.scale.id, 'before', 9472, { hoseFull: true, hose: { value: '28', unit: 'g' } }),
      readingOf(cylinder.id, ledger.scale.id, 'after', 9382),
    ];
    const hose = massOf('28', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' });
    const answer = await posted(ledger.client, { ...body, entries: [...body.entries, hose] });

    expect(answer.body.entries).toEqual([
      expect.objectContaining({ id: body.entries[0]?.id, massG: 90, sequence: before + 2, bookingMonth: '2026-03' }),
      expect.objectContaining({ id: hose.id, massG: 28, to: HOSE, sequence: before + 3, late: false }),
    ]);
    expect(answer.body.balances).toEqual(
      expect.arrayContaining([
        { place: inCylinder(cylinder.id), refrigerant: 'R-410A', massG: 9382, known: true },
        { place: inUnit(unit.id), refrigerant: 'R-410A', massG: 1340, known: true },
      ]),
    );
    expect(answer.body.flags).toEqual([]);
    expect(answer.body.warnings).toEqual([]);
    expect(await ledger.sequence()).toBe(before + 3);
  });

  it('posts a resend once and answers it as before, whenever the device says it sends', async () => {
    const cylinder = await ledger.cylinder('9500');
    const body = { ...bought(cylinder.id, '100'), deviceSentAt: '2026-11-30T14:59:58Z' };
    const first = await posted(ledger.client, body);
    await posted(ledger.client, bought(cylinder.id, '1000'));
    const sequence = await ledger.sequence();

    const again = await ledger.post({ ...body, deviceSentAt: '2026-11-30T15:20:00Z' });

    expect({ status: again.status, body: again.body }).toEqual({ status: 200, body: first.body });
    expect(await ledger.sequence()).toBe(sequence);
  });

  it('takes an id in capitals for the same id, in the body and in the address (RFC 9562, section 4)', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1340', {}, 'factory');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9410 });
    const inCapitals = JSON.parse(
      JSON.stringify(body).replace(/[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}/g, (id) => id.toUpperCase()),
    );

    const answer = await posted(ledger.client, inCapitals);
    expect(answer.body.entries.map(({ id }: { id: string }) => id)).toEqual(body.entries.map(({ id }) => id));
    expect(await ledger.contentG(cylinder.id)).toBe(9410);
    expect(await ledger.bookG(unit.id)).toBe(1340);
    const again = await ledger.post(body);
    expect({ status: again.status, body: again.body }).toEqual({ status: 200, body: answer.body });

    const reversal = { groupId: uuid(), schema: 1, reason: 'wrong unit' };
    const path = `/entry-groups/${body.groupId.toUpperCase()}/reversal`;
    expect((await ledger.client.post(path, reversal)).status).toBe(201);
    expect((await ledger.client.post(path.toLowerCase(), reversal)).status).toBe(200);
  });

  it('refuses other content under an id that was used, and posts nothing of it', async () => {
    const cylinder = await ledger.cylinder('9500');
    const body = bought(cylinder.id, '100');
    await posted(ledger.client, body);
    const sequence = await ledger.sequence();

    const sameGroup = await ledger.post({ ...bought(cylinder.id, '101'), groupId: body.groupId });
    const sameEntry = await ledger.post({ ...body, groupId: uuid() });

    expect([sameGroup.status, sameGroup.body.code]).toEqual([409, 'idReused']);
    expect([sameEntry.status, sameEntry.body.code]).toEqual([409, 'idReused']);
    expect(await ledger.sequence()).toBe(sequence);
  });

  it('refuses a mass without readings that exceeds the book, says what it holds and the way out, and posts nothing', async () => {
    const cylinder = await ledger.cylinder('60');
    const unit = await ledger.unit('1290', '1400');
    const sequence = await ledger.sequence();

    const answer = await ledger.post(
      groupOf('extraCharge', DAY, {
        unitId: unit.id,
        entries: [
          massOf('10', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' }),
          massOf('62', inCylinder(cylinder.id), inUnit(unit.id)),
        ],
      }),
    );

    expect(answer.status).toBe(422);
    expect(answer.body).toMatchObject({
      code: 'exceedsBook',
      errors: [{ path: '/entries/1/mass', given: '72', allowed: '60' }],
    });
    expect(answer.body.errors[0].message).toContain('Weigh the cylinder, then post.');
    expect(answer.body.errors[0].message).toContain(cylinder.tag);
    expect(await ledger.contentG(cylinder.id)).toBe(60);
    expect(await ledger.sequence()).toBe(sequence);
  });

  it('names every reference that leads nowhere, in one answer', async () => {
    const cylinder = await ledger.cylinder(null);
    const [nowhere, supplier] = [uuid(), uuid()];
    const answer = await ledger.post(
      groupOf('purchase', DAY, {
        unitId: nowhere,
        readings: [readingOf(nowhere, nowhere, 'only', 9000)],
        entries: [
          massOf('100', { place: 'supplier', id: supplier }, inCylinder(cylinder.id), { refrigerant: 'R-999' }),
        ],
        statements: [{ about: 'unit', id: nowhere, is: 'full' }],
      }),
    );

    expect(answer.status).toBe(422);
    expect(answer.body.errors.map(({ path, code }: { path: string; code: string }) => [path, code])).toEqual([
      ['/unitId', 'notKnownHere'],
      ['/readings/0/cylinderId', 'notKnownHere'],
      ['/readings/0/toolId', 'notKnownHere'],
      ['/statements/0/id', 'notKnownHere'],
      ['/entries/0/from/id', 'notKnownHere'],
      ['/entries/0/refrigerant', 'unknownRefrigerant'],
    ]);
  });

  it('knows nothing of another firm’s cylinder', async () => {
    const other = await startLedger(app);
    const theirs = await other.cylinder('9500');
    const answer = await ledger.post(bought(theirs.id, '100'));

    expect(answer.body).toMatchObject({ status: 422, errors: [{ path: '/entries/0/to/id', code: 'notKnownHere' }] });
    expect(await other.contentG(theirs.id)).toBe(9500);
  });

  it('takes no time in the future but what a clock may be off, and none before 1970', async () => {
    const cylinder = await ledger.cylinder(null);
    const at = (occurredAt: string, fields: Record<string, unknown> = {}) =>
      ledger.post({ ...bought(cylinder.id, '10'), occurredAt, ...fields });

    expect((await at('2026-11-30T15:02:00Z')).status).toBe(201);
    expect((await at('2026-11-30T15:02:01Z')).body).toMatchObject({
      status: 422,
      code: 'inFuture',
      errors: [{ path: '/occurredAt', given: '2026-11-30T15:02:01Z', allowed: TEST_START }],
    });
    expect((await at('1969-12-31T23:59:59Z')).body).toMatchObject({ status: 422, code: 'beforeRecords' });
  });

  it('marks a device whose clock is off by more than two minutes, and posts all the same', async () => {
    const cylinder = await ledger.cylinder(null);
    const ahead = {
      ...bought(cylinder.id, '10'),
      occurredAt: '2026-11-30T15:30:00Z',
      deviceSentAt: '2026-11-30T15:31:00Z',
    };
    const answer = await posted(ledger.client, ahead);

    expect(answer.body.warnings).toEqual([
      { code: 'deviceClockOff', message: 'The clock of the device is off by 31 minutes.' },
    ]);
    expect(answer.body.entries[0].occurredAt).toBe('2026-11-30T15:30:00.000Z');
  });

  it('books an entry of a closed month in the first open one, keeps its time and says that it is late', async () => {
    const own = await startLedger(app, { timeZone: 'America/New_York' });
    const cylinder = await own.cylinder('9500');
    await own.closeMonthsBefore('2026-11');
    // 30 September, 22:30 in New York, is 1 October in UTC: the firm's zone counts.
    const body = groupOf('loss', '2026-10-01T02:30:00Z', {
      entries: [massOf('10', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' })],
    });
    const open = groupOf('loss', '2026-11-01T03:30:00Z', {
      entries: [massOf('10', inCylinder(cylinder.id), HOSE, { howKnown: 'estimated' })],
    });

    expect((await posted(own.client, body)).body).toMatchObject({
      entries: [{ bookingMonth: '2026-11', late: true, occurredAt: '2026-10-01T02:30:00.000Z' }],
      warnings: [{ code: 'bookedLate' }],
    });
    // Still 31 October there.
    expect((await posted(own.client, open)).body.entries[0]).toMatchObject({ bookingMonth: '2026-11', late: true });
  });

  it('keeps masses to the microgram and refuses units and sizes that the log does not hold', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1400', {}, 'factory');
    const of = (value: string, unitOfMass: string) =>
      ledger.post(
        groupOf('extraCharge', DAY, {
          unitId: unit.id,
          entries: [massOf('0', inCylinder(cylinder.id), inUnit(unit.id), { mass: { value, unit: unitOfMass } })],
        }),
      );

    expect((await of('3.2', 'oz')).body.entries[0].massG).toBe(90.718474);
    expect((await of('0.0000001', 'g')).body).toMatchObject({ status: 422, code: 'massNotPositive' });
    expect((await of('0.001', 't')).body).toMatchObject({ errors: [{ path: '/entries/0/mass/value', given: 't' }] });
    expect((await of('4000001', 'kg')).body.status).toBe(422);
  });

  it('leaves differences and inferred losses to the judge, and openings to openings', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1400');
    const difference = massOf('10', inCylinder(cylinder.id), { place: 'cylinderDifference' });
    const loss = massOf('10', inUnit(unit.id), { place: 'atmosphere', as: 'inferred' });
    const opening = massOf('10', { place: 'opening' }, inCylinder(cylinder.id));

    for (const entry of [difference, loss]) {
      const answer = await ledger.post(groupOf('transfer', DAY, { entries: [entry] }));
      expect(answer.body).toMatchObject({ status: 422, code: 'placeOnlyByServer' });
    }
    expect((await ledger.post(groupOf('transfer', DAY, { entries: [opening] }))).body).toMatchObject({
      code: 'placeNotOfThisKind',
      errors: [{ path: '/entries/0/from', given: 'opening', allowed: ['opening'] }],
    });
  });

  it('refuses what has no form: unknown keys, an empty group, a repeated id, text that cannot be kept', async () => {
    const cylinder = await ledger.cylinder('9500');
    const body = bought(cylinder.id, '10');
    const codesOf = async (change: Record<string, unknown>) =>
      (await ledger.post({ ...body, ...change })).body.errors.map(({ code }: { code: string }) => code);

    expect(await codesOf({ colour: 'red' })).toEqual(['unknownKey']);
    expect(await codesOf({ entries: [] })).toEqual(['groupEmpty']);
    expect(await codesOf({ entries: [body.entries[0], body.entries[0]] })).toEqual(['repeated']);
    expect(await codesOf({ note: 'a \u0000 b' })).toContain('textNotStorable');
    expect(await codesOf({ schema: 2 })).toEqual(['notAllowedValue']);
  });

  it('takes a document alone: an invoice that equals what was posted adds its papers and moves nothing', async () => {
    const cylinder = await ledger.cylinder('9500');
    const answer = await posted(
      ledger.client,
      groupOf('purchase', DAY, {
        documents: [
          {
            kind: 'invoice',
            number: '20871',
            date: '2026-03-01',
            refrigerant: 'R-32',
            mass: { value: '25', unit: 'lb' },
          },
        ],
        note: 'from the counter',
      }),
    );
    expect(answer.body.entries).toEqual([]);
    expect(await ledger.contentG(cylinder.id)).toBe(9500);
  });

  it('posts everything that comes at once in one chain, and takes no cylinder below nothing', async () => {
    const cylinder = await ledger.cylinder('1000');
    const unit = await ledger.unit('0', null, {}, 'notKnown');
    const before = await ledger.sequence();

    const answers = await Promise.all(
      Array.from({ length: 16 }, (_, index) =>
        ledger.post(
          groupOf('extraCharge', `2026-03-02T10:${String(index).padStart(2, '0')}:00Z`, {
            unitId: unit.id,
            entries: [massOf('90', inCylinder(cylinder.id), inUnit(unit.id))],
          }),
        ),
      ),
    );

    expect(answers.filter(({ status }) => status === 201)).toHaveLength(11);
    expect(answers.filter(({ body }) => body.code === 'exceedsBook')).toHaveLength(5);
    expect(await ledger.contentG(cylinder.id)).toBe(10);
    expect(await ledger.sequence()).toBe(before + 22);
  });
});

describe('A zeroed scale', () => {
  it('weighs a mass and states nothing of the cylinder', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1250', '1340', {}, 'factory');
    const zeroed = (moment: string, value: string) => ({
      id: uuid(),
      cylinderId: cylinder.id,
      toolId: ledger.scale.id,
      moment,
      mode: 'zeroed',
      value,
      unit: 'oz',
    });
    const answer = await posted(
      ledger.client,
      groupOf('extraCharge', DAY, {
        unitId: unit.id,
        readings: [zeroed('before', '0'), zeroed('after', '-3.2')],
        entries: [massOf('0', inCylinder(cylinder.id), inUnit(unit.id), { mass: { value: '3.2', unit: 'oz' } })],
      }),
    );
    expect(answer.body.entries).toHaveLength(1);
    expect(await ledger.contentG(cylinder.id)).toBe(9409.281526);
    const readings = await ledger.client.get(`/readings?cylinderId=${cylinder.id}`);
    expect(readings.body.items.map(({ mode, massG }: { mode: string; massG: number }) => [mode, massG])).toEqual(
      expect.arrayContaining([
        ['zeroed', 0],
        ['zeroed', -90.718474],
      ]),
    );
    expect((await ledger.client.get(`/cylinders/${cylinder.id}`)).body.lastReadingGrossG).toBeNull();
  });
});

describe('A gross reading', () => {
  it('is taken with the tare of its day, and the gap is posted first in the same group', async () => {
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1290', '1400');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9440, afterG: 9350 });
    const answer = await posted(ledger.client, body);

    expect(answer.body.entries).toMatchObject([
      { massG: 90, addedByServer: false, howKnown: 'weighed' },
      { massG: 60, addedByServer: true, to: { place: 'cylinderDifference' }, correctsGroupId: null },
    ]);
    expect(answer.body.flags).toMatchObject([{ code: 'cylinderNotExplained', massG: -60 }]);
    expect(answer.body.flags[0].message).toBe(
      `Cylinder ${cylinder.tag}: the reading and the book differ by 60\u00a0g; the scales do not explain it.`,
    );
    const { body: view } = await ledger.client.get(`/cylinders/${cylinder.id}`);
    expect(view).toMatchObject({ contentG: 9350, lastReadingGrossG: 9350 + TARE_G });
  });
});
