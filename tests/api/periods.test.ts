import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Checklist, OpenItem } from '../../shared/periods/periods.schema.ts';
import { connect, refusalOf } from '../database/test-firm.ts';
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
import type { TestClient } from '../support/test-client.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const get = async (client: TestClient, path: string) => {
  const answer = await client.get(path);
  expect(answer.status, `${path}: ${JSON.stringify(answer.body)}`).toBe(200);
  return answer.body;
};
const checklistOf = (ledger: Ledger, month: string): Promise<Checklist> =>
  get(ledger.client, `/periods/checklist?month=${month}`);
const weigh = (ledger: Ledger, id: string, netG: number, at: string) =>
  posted(ledger.client, groupOf('weighing', at, { readings: [readingOf(id, ledger.scale.id, 'only', netG)] }));
const carryAll = async (ledger: Ledger, month: string, by = ledger.owner.id) => {
  const { items } = await checklistOf(ledger, month);
  const open = items.filter(({ needsDecision, carried }) => needsDecision && !carried);
  if (open.length === 0) return;
  const body = {
    month,
    carriedBy: by,
    reason: 'looked at, nothing found',
    items: open.map(({ key }) => ({ id: uuid(), key })),
  };
  await posted(ledger.client, body, '/periods/carried');
};
const closeOf = async (ledger: Ledger, month: string) => {
  const { sumsHash } = await checklistOf(ledger, month);
  return { id: uuid(), month, sumsHash };
};
/** Carries what is open and closes. */
const close = async (ledger: Ledger, month: string) => {
  await carryAll(ledger, month);
  return posted(ledger.client, await closeOf(ledger, month), '/periods');
};
/** Months of the builders' openings, which lie in January 2026, up to the one given. */
const closeThrough = async (ledger: Ledger, last: number) => {
  for (let month = 1; month <= last; month++) await close(ledger, `2026-${String(month).padStart(2, '0')}`);
};
const settle = (key: string, to: object, fields: object = {}) => ({
  id: uuid(),
  month: '2026-01',
  key,
  to,
  reason: 'found out',
  ...fields,
});
const differenceIn = (items: readonly OpenItem[]) => {
  const found = items.find(({ kind }) => kind === 'difference');
  if (found?.kind !== 'difference') throw new Error('there is a difference');
  return found;
};
/** A ledger whose one cylinder was weighed 90 g short in January. */
const shortInJanuary = async (missingG = 90) => {
  const ledger = await startLedger(app);
  const cylinder = await ledger.cylinder('9500');
  await weigh(ledger, cylinder.id, 9_500 - missingG, '2026-01-20T08:00:00Z');
  const { key } = differenceIn((await checklistOf(ledger, '2026-01')).items);
  return { ledger, cylinder, key };
};

describe('Month close is refused', () => {
  it('without sign-in, to technicians and readers; to a compliance manager the signature alone', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    expect((await app.visitor().get('/periods')).status).toBe(401);
    const as = async (role: 'technician' | 'complianceManager' | 'reader') =>
      app.signIn(await app.addPerson([role], { firmId: ledger.firm.id }));
    for (const role of ['technician', 'reader'] as const) {
      const client = await as(role);
      expect((await client.get('/periods')).status).toBe(403);
      expect((await client.get('/periods/checklist?month=2026-01')).status).toBe(403);
    }
    const manager = await as('complianceManager');
    expect((await manager.get('/periods')).status).toBe(200);
    const { status, body } = await manager.post('/periods', await closeOf(ledger, '2026-01'));
    expect([status, body.code]).toEqual([403, 'notPermitted']);
  });

  it('out of order, while the month runs, twice, and where there is nothing to close', async () => {
    const ledger = await startLedger(app);
    const refusal = async (month: string) => {
      const { body } = await ledger.client.post('/periods', await closeOf(ledger, month));
      return [body.code, body.errors[0]?.allowed];
    };
    expect(await refusal('2026-01')).toEqual(['nothingToClose', undefined]);
    await ledger.cylinder('9500');
    await carryAll(ledger, '2026-02');
    expect(await refusal('2026-02')).toEqual(['monthsInOrder', '2026-01']);
    expect(await refusal('2026-11')).toEqual(['monthNotOver', '2026-10']);
    expect(await refusal('2027-01')).toEqual(['monthNotOver', '2026-10']);
    await close(ledger, '2026-01');
    expect(await refusal('2026-01')).toEqual(['monthClosed', '2026-02']);
  });

  it('while something is neither settled nor carried, and names each', async () => {
    const { ledger, cylinder } = await shortInJanuary();
    const { status, body } = await ledger.client.post('/periods', await closeOf(ledger, '2026-01'));
    expect([status, body.code]).toEqual([422, 'monthNotSettled']);
    expect(body.errors).toMatchObject([{ code: 'itemOpen', given: cylinder.tag }]);
    expect((await get(ledger.client, '/periods')).next).toBe('2026-01');
  });

  it('where the sums are no longer those that were seen', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    await carryAll(ledger, '2026-01');
    const seen = await closeOf(ledger, '2026-01');
    await ledger.cylinder('100');
    await carryAll(ledger, '2026-01');
    expect((await ledger.client.post('/periods', seen)).body).toMatchObject({ status: 412, code: 'seenChanged' });
    await posted(ledger.client, await closeOf(ledger, '2026-01'), '/periods');
  });

  it('of another firm: its items cannot be settled or carried, and its months stay', async () => {
    const { ledger, key } = await shortInJanuary();
    const other = await startLedger(app);
    const refusal = async (path: string, body: object) => (await other.client.post(path, body)).body.code;
    expect(await refusal('/periods/settlements', settle(key, { place: 'missing' }))).toBe('notOpenItem');
    const carry = { month: '2026-01', carriedBy: other.owner.id, reason: 'x', items: [{ id: uuid(), key }] };
    expect(await refusal('/periods/carried', carry)).toBe('notOpenItem');
    expect(await refusal('/periods/carried', { ...carry, carriedBy: ledger.owner.id })).toBe('notKnownHere');
    expect((await get(ledger.client, '/periods')).firstOpenMonth).toBeNull();
  });
});

describe('The database closes a month by itself only', () => {
  it('as the owner’s own record says, in order, once it is over; and nobody writes the head', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    const connection = connect(app.database);
    const scope = { firmId: ledger.firm.id, personId: ledger.owner.id };
    try {
      const attempt = (sql: string, values: unknown[] = [], as: object = scope) =>
        refusalOf(connection.as(as, (query) => query(sql, values)));
      expect(await attempt(`update firm_head set first_open_month = '2027-01'`)).toMatchObject({ code: '42501' });
      expect(
        await attempt(
          `insert into period (firm_id, id, month, closed_at, closed_by, record_sequence) values ($1, $2, '2026-01', now(), $3, 1)`,
          [ledger.firm.id, uuid(), ledger.owner.id],
        ),
      ).toMatchObject({ code: '42501' });
      expect(await attempt('select close_month($1)', [uuid()])).toMatchObject({
        code: 'TW018',
        rule: 'period_recorded',
      });

      await carryAll(ledger, '2026-01');
      await posted(ledger.client, await closeOf(ledger, '2026-01'), '/periods');
      const [{ recordId } = { recordId: '' }] = await app.database.query<{ recordId: string }>(
        'superuser',
        `select record_id as "recordId" from journal_record where firm_id = $1 and noun = 'period'`,
        [ledger.firm.id],
      );
      // The same record again would reopen nothing: January is not the next month any more.
      expect(await attempt('select close_month($1)', [recordId])).toMatchObject({
        code: 'TW020',
        detail: { month: '2026-01', expected: '2026-02' },
      });
      const manager = await app.addPerson(['complianceManager'], { firmId: ledger.firm.id });
      expect(await attempt('select close_month($1)', [recordId], { ...scope, personId: manager.id })).toMatchObject({
        code: 'TW018',
      });
      expect(await attempt('delete from period')).toMatchObject({ code: '42501' });
    } finally {
      await connection.close();
    }
  });

  it('takes no settlement that is not the entry it names', async () => {
    const { ledger, cylinder } = await shortInJanuary();
    const connection = connect(app.database);
    try {
      const [entry] = await app.database.query<{ id: string; groupId: string }>(
        'superuser',
        `select id, group_id as "groupId" from entry where firm_id = $1 and kind = 'weighing' limit 1`,
        [ledger.firm.id],
      );
      const refused = await refusalOf(
        connection.as({ firmId: ledger.firm.id, personId: ledger.owner.id }, (query) =>
          query(
            `insert into settlement (firm_id, id, entry_id, month, judged_group_id, judged_place, judged_place_id,
                difference, settled_to, refrigerant, mass_micrograms)
              values ($1, $2, $3, '2026-01', $4, 'cylinder', $5, 'cylinderDifference', 'missing', 'R-410A', 90000000)`,
            [ledger.firm.id, uuid(), entry?.id, entry?.groupId, cylinder.id],
          ),
        ),
      );
      expect(['TW015', 'TW022']).toContain(refused.code);
    } finally {
      await connection.close();
    }
  });
});

describe('What is open at the end of a month', () => {
  it('is each weigh-in without an end, unweighed cylinder, job without posting and difference beyond the scales', async () => {
    const ledger = await startLedger(app);
    const [weighed, unweighed] = [await ledger.cylinder('9500'), await ledger.cylinder('4000')];
    const unit = await ledger.unit('1000', '2000');
    const job = (openedAt: string) =>
      ledger.made('/jobs', { id: uuid(), unitId: unit.id, kind: 'serviceWithLeak', openedAt });
    const idle = await job('2026-02-10T08:00:00Z');
    const ended = await job('2026-01-10T08:00:00Z');
    const closing = { closedAt: '2026-01-11T08:00:00Z' };
    expect((await ledger.client.patch(`/jobs/${ended.id}`, 1, closing)).status).toBe(200);
    await job('2026-03-10T08:00:00Z');
    const busy = await job('2026-02-11T08:00:00Z');
    await posted(
      ledger.client,
      weighIn(
        ledger,
        { cylinderId: weighed.id, unitId: unit.id, beforeG: 9_400, afterG: 9_310 },
        { jobId: busy.id },
        '2026-02-12T10:00:00Z',
      ),
    );
    const open = groupOf('extraCharge', '2026-02-20T10:00:00Z', {
      unitId: unit.id,
      openWeighIn: true,
      readings: [readingOf(weighed.id, ledger.scale.id, 'before', 9_310)],
    });
    await posted(ledger.client, open);
    const { items, undecided, state } = await checklistOf(ledger, '2026-02');
    expect([state, undecided]).toEqual(['over', 4]);
    expect(items).toMatchObject([
      {
        kind: 'difference',
        needsDecision: true,
        carried: null,
        difference: { subject: { id: weighed.id }, standsG: -100, verdict: 'notExplained' },
      },
      { kind: 'weighIn', groupId: open.groupId, cylinderTag: weighed.tag, unitLabel: unit.tag },
      { kind: 'cylinder', cylinderId: unweighed.id, contentG: 4_000, lastWeighedAt: null },
      { kind: 'job', jobId: idle.id, unitLabel: unit.tag, customerName: 'Wexcombe Mill' },
    ]);
    // In January nobody had weighed either of them, and the job of January moved nothing.
    expect((await checklistOf(ledger, '2026-01')).items.map(({ kind }) => kind)).toEqual(['cylinder', 'job']);
  });

  it('does not ask for what the scales explain, nor for what a certificate names', async () => {
    const ledger = await startLedger(app);
    const unit = await ledger.unit('1000', '1000');
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    const reclaimer = await ledger.made('/parties', { id: uuid(), kind: 'reclaimer', name: 'Fallow Reclaim' });
    await posted(
      ledger.client,
      groupOf('recovery', '2026-02-03T10:00:00Z', {
        unitId: unit.id,
        readings: [readingOf(recovery.id, ledger.scale.id, 'after', 998)],
        entries: [massOf('998', inUnit(unit.id), inCylinder(recovery.id))],
        statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      }),
    );
    const at = { place: 'reclaimer', id: reclaimer.id };
    await posted(
      ledger.client,
      groupOf('reclaim', '2026-02-04T10:00:00Z', { entries: [massOf('998', inCylinder(recovery.id), at)] }),
    );
    await posted(
      ledger.client,
      groupOf('certificate', '2026-02-05T10:00:00Z', {
        entries: [massOf('55', at, { place: 'reclaimerDifference' }, { howKnown: 'certificate' })],
      }),
    );
    const { items, undecided } = await checklistOf(ledger, '2026-02');
    expect(items.map(({ kind, needsDecision }) => [kind, needsDecision])).toEqual([
      ['difference', false],
      ['difference', false],
    ]);
    expect(undecided).toBe(0);
  });

  it('is carried by name, for a reason, once however often it is sent; it comes back next month', async () => {
    const { ledger, key } = await shortInJanuary();
    const technician = await app.addPerson(['technician'], { firmId: ledger.firm.id, name: 'S. Brandt' });
    const carry = {
      month: '2026-01',
      carriedBy: technician.id,
      reason: 'valve looked at, weighed again next week',
      items: [{ id: uuid(), key }],
    };
    await posted(ledger.client, carry, '/periods/carried');
    expect((await ledger.client.post('/periods/carried', carry)).status).toBe(200);
    expect((await ledger.client.post('/periods/carried', { ...carry, reason: 'other' })).status).toBe(409);
    const decision = { name: 'S. Brandt', reason: carry.reason, month: '2026-01' };
    expect(differenceIn((await checklistOf(ledger, '2026-01')).items)).toMatchObject({ carried: decision });
    await close(ledger, '2026-01');
    expect(differenceIn((await checklistOf(ledger, '2026-02')).items)).toMatchObject({
      carried: null,
      carriedBefore: decision,
    });
    expect((await checklistOf(ledger, '2026-01')).signedOff).toMatchObject({
      byName: ledger.owner.name,
      carried: [{ key, name: 'S. Brandt', reason: carry.reason }],
    });
  });
});

describe('A difference', () => {
  it('is settled as lost: the books show it as lost, and no longer as a difference', async () => {
    const { ledger, key } = await shortInJanuary();
    const answer = await posted(ledger.client, settle(key, { place: 'atmosphere' }), '/periods/settlements');
    expect(answer.body).toMatchObject({ key, massG: 90 });
    const january = await get(ledger.client, '/books?from=2026-01&to=2026-01');
    expect(january.differences).toEqual([{ kind: 'cylinderDifference', startG: 0, shownG: 90, settledG: 90, endG: 0 }]);
    const { items, settled } = await checklistOf(ledger, '2026-01');
    expect(items).toEqual([]);
    expect(settled).toMatchObject([
      { massG: 90, to: { place: 'atmosphere', as: 'measured' }, byName: ledger.owner.name, reason: 'found out' },
    ]);
    const group = await get(ledger.client, `/entry-groups/${answer.body.groupId}`);
    expect(group).toMatchObject({
      kind: 'monthClose',
      occurredAt: '2026-01-31T23:59:59.999Z',
      entries: [{ massG: 90, from: { place: 'cylinderDifference' }, to: { place: 'atmosphere', as: 'measured' } }],
    });
  });

  it('is settled in parts: with the supplier, as missing; and never for more than stands', async () => {
    const { ledger, key } = await shortInJanuary();
    const part = (value: string, to: object) => settle(key, to, { mass: { value, unit: 'g' } });
    const bySupplier = part('60', { place: 'supplier', id: ledger.supplier.id });
    await posted(ledger.client, bySupplier, '/periods/settlements');
    expect((await ledger.client.post('/periods/settlements', bySupplier)).status).toBe(200);
    const code = async (body: object) => (await ledger.client.post('/periods/settlements', body)).body.code;
    expect(await code({ ...bySupplier, mass: { value: '50', unit: 'g' } })).toBe('idReused');
    expect(
      (await ledger.client.post('/periods/settlements', part('30.000001', { place: 'missing' }))).body,
    ).toMatchObject({
      code: 'settlesMore',
      errors: [{ given: '30.000001', allowed: '30' }],
    });
    expect(await code(settle(key, { place: 'supplier' }))).toBe('supplierRequired');
    expect(await code(settle(key, { place: 'supplier', id: ledger.customer.id }))).toBe('notKnownHere');
    expect(await code(settle(key, { place: 'missing', id: ledger.supplier.id }))).toBe('supplierNotAllowed');
    expect(await code(settle(key, { place: 'reclaimer' }))).toBe('notAllowedValue');
    await posted(ledger.client, part('30', { place: 'missing' }), '/periods/settlements');
    expect(await code(settle(key, { place: 'missing' }))).toBe('notOpenItem');
  });

  it('that is a surplus did not come out of the atmosphere, but may be the supplier’s', async () => {
    const { ledger, key } = await shortInJanuary(-90);
    const { body } = await ledger.client.post('/periods/settlements', settle(key, { place: 'atmosphere' }));
    expect(body.code).toBe('surplusNotFromAtmosphere');
    const bySupplier = settle(key, { place: 'supplier', id: ledger.supplier.id });
    const answer = await posted(ledger.client, bySupplier, '/periods/settlements');
    expect(answer.body.massG).toBe(-90);
    const january = await get(ledger.client, '/books?from=2026-01&to=2026-01');
    expect(january.differences).toMatchObject([{ shownG: -90, settledG: -90, endG: 0 }]);
  });

  it('with a wrong tare is explained by revising it, and nothing is left to settle', async () => {
    const { ledger, cylinder } = await shortInJanuary();
    await posted(
      ledger.client,
      { id: uuid(), tare: { value: '7610', unit: 'g' }, validFrom: '2026-01-05T08:00:00Z', reason: 'wrong stamp' },
      `/cylinders/${cylinder.id}/tares`,
    );
    expect((await checklistOf(ledger, '2026-01')).items).toEqual([]);
  });

  it('comes back when its settlement is reversed', async () => {
    const { ledger, key } = await shortInJanuary();
    const settled = await posted(ledger.client, settle(key, { place: 'missing' }), '/periods/settlements');
    await posted(
      ledger.client,
      { groupId: uuid(), schema: 1, reason: 'it was not' },
      `/entry-groups/${settled.body.groupId}/reversal`,
    );
    const { items, settled: rows } = await checklistOf(ledger, '2026-01');
    expect(differenceIn(items)).toMatchObject({ key, difference: { standsG: -90, settledG: 0 } });
    expect(rows).toEqual([]);
  });
});

describe('A closed month', () => {
  it('takes nothing more: what comes late is booked in the first open one, with what it explains', async () => {
    // Scenario S21 case 3, closed for good: October 90 not explained, carried; November 90 explained.
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const [unit, other] = [await ledger.unit('1250', '1340'), await ledger.unit('1800', '1900')];
    const charge = (unitId: string, beforeG: number, afterG: number, at: string) =>
      posted(ledger.client, weighIn(ledger, { cylinderId: cylinder.id, unitId, beforeG, afterG }, {}, at));
    await closeThrough(ledger, 9);
    await charge(other.id, 9_410, 9_310, '2026-10-29T12:00:00Z');
    await close(ledger, '2026-10');
    const late = await charge(unit.id, 9_500, 9_410, '2026-10-28T10:00:00Z');
    expect(late.body.entries).toMatchObject([
      { massG: 90, bookingMonth: '2026-11', late: true },
      { massG: 90, bookingMonth: '2026-11', late: true, addedByServer: true, occurredAt: '2026-10-29T12:00:00.000Z' },
    ]);
    const out = async (month: string) => {
      const { equation } = await get(ledger.client, `/books?from=${month}&to=${month}`);
      return Object.fromEntries(
        equation.wentOut.map(({ part, massG }: { part: string; massG: number }) => [part, massG]),
      );
    };
    expect(await out('2026-10')).toMatchObject({ intoUnits: 100, cylinderDifference: 90 });
    expect(await out('2026-11')).toMatchObject({ intoUnits: 90, cylinderDifference: -90 });
    expect(await get(ledger.client, '/emissions')).toMatchObject({ items: [] });
  });

  it('had its difference settled as lost: that loss is reversed with it, in the month of the explanation', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const [unit, other] = [await ledger.unit('1250', '1340'), await ledger.unit('1800', '1900')];
    const charge = (unitId: string, beforeG: number, afterG: number, at: string) =>
      posted(ledger.client, weighIn(ledger, { cylinderId: cylinder.id, unitId, beforeG, afterG }, {}, at));
    await closeThrough(ledger, 9);
    await charge(other.id, 9_410, 9_310, '2026-10-29T12:00:00Z');
    const { key } = differenceIn((await checklistOf(ledger, '2026-10')).items);
    const lost = settle(key, { place: 'atmosphere' }, { month: '2026-10' });
    await posted(ledger.client, lost, '/periods/settlements');
    await close(ledger, '2026-10');

    const late = await charge(unit.id, 9_500, 9_410, '2026-10-28T10:00:00Z');
    const posting = late.body.entries.map(
      ({
        from,
        to,
        massG,
        bookingMonth,
      }: {
        from: { place: string };
        to: { place: string };
        massG: number;
        bookingMonth: string;
      }) => [from.place, to.place, massG, bookingMonth].join(' '),
    );
    expect(posting.sort()).toEqual([
      'atmosphere cylinderDifference 90 2026-11',
      'cylinder unit 90 2026-11',
      'cylinderDifference cylinder 90 2026-11',
    ]);
    const { items } = await get(ledger.client, '/emissions');
    expect(items).toMatchObject([
      { bookingMonth: '2026-10', as: 'measured', massG: 90 },
      { bookingMonth: '2026-11', as: 'measured', massG: -90 },
    ]);
    expect((await get(ledger.client, '/books?from=2026-11&to=2026-11')).differences).toEqual([
      { kind: 'cylinderDifference', startG: 0, shownG: -90, settledG: -90, endG: 0 },
    ]);
    expect((await checklistOf(ledger, '2026-11')).items.filter(({ kind }) => kind === 'difference')).toEqual([]);
    // Another late entry judges the cylinder again: nothing is undone twice, nor posted in a unit's name.
    const roomy = await ledger.unit('500', '5000');
    const after = await charge(roomy.id, 9_310, 9_300, '2026-10-29T18:00:00Z');
    expect(after.body.entries).toHaveLength(1);
  });

  it('is explained in part: only so much of the settlement goes back', async () => {
    const { ledger, cylinder, key } = await shortInJanuary();
    const unit = await ledger.unit('1250', '1340');
    await posted(ledger.client, settle(key, { place: 'missing' }), '/periods/settlements');
    await close(ledger, '2026-01');
    const late = weighIn(
      ledger,
      { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9_500, afterG: 9_460 },
      {},
      '2026-01-10T10:00:00Z',
    );
    const { body } = await posted(ledger.client, late);
    expect(body.entries).toMatchObject([
      { massG: 40, from: { place: 'cylinder' }, to: { place: 'unit' } },
      { massG: 40, from: { place: 'cylinderDifference' }, to: { place: 'cylinder' } },
      { massG: 40, from: { place: 'missing' }, to: { place: 'cylinderDifference' } },
    ]);
    expect((await checklistOf(ledger, '2026-01')).settled).toMatchObject([{ massG: 50 }]);
    // The correction is reversed with its group: the difference is back, and has to be settled anew.
    await posted(
      ledger.client,
      { groupId: uuid(), schema: 1, reason: 'wrong' },
      `/entry-groups/${late.groupId}/reversal`,
    );
    expect(differenceIn((await checklistOf(ledger, '2026-02')).items)).toMatchObject({
      difference: { differenceG: -90, settledG: -50, standsG: -40 },
    });
  });

  it('answers a repeated signature as the first time, and keeps what was signed: sums, names, seal', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    await carryAll(ledger, '2026-01');
    const body = { ...(await closeOf(ledger, '2026-01')), note: 'looked at with the accountant' };
    const { body: closed } = await posted(ledger.client, body, '/periods');
    expect(closed).toMatchObject({ month: '2026-01', firstOpenMonth: '2026-02', closedByName: ledger.owner.name });
    expect(closed.seal.hash).toMatch(/^[0-9a-f]{64}$/);
    const again = await ledger.client.post('/periods', body);
    expect([again.status, again.body]).toEqual([200, closed]);
    expect((await ledger.client.post('/periods', { ...body, note: 'other' })).status).toBe(409);
    const [record] = await app.database.query<{ content: string }>(
      'superuser',
      `select content from journal_record where firm_id = $1 and noun = 'period'`,
      [ledger.firm.id],
    );
    const { after } = JSON.parse(record?.content ?? '{}');
    expect(after).toMatchObject({
      month: '2026-01',
      sums: [{ refrigerant: 'R-410A', from: 'opening', to: 'cylinder', massMicrograms: '9500000000' }],
      carried: [{ carriedBy: ledger.owner.id }],
    });
    expect(record?.content).not.toContain('accountant');
    expect((await checklistOf(ledger, '2026-01')).signedOff).toMatchObject({ note: 'looked at with the accountant' });
    expect((await get(ledger.client, '/periods')).items.slice(-2)).toMatchObject([
      { month: '2026-02', state: 'next', closedAt: null },
      { month: '2026-01', state: 'closed', closedByName: ledger.owner.name, entryCount: 1 },
    ]);
  });

  it('ends on the firm’s clock: an entry of its last evening is in it', async () => {
    const ledger = await startLedger(app, { timeZone: 'America/New_York' });
    const cylinder = await ledger.cylinder('9500');
    await weigh(ledger, cylinder.id, 9_400, '2026-01-31T23:30:00-05:00');
    const { key } = differenceIn((await checklistOf(ledger, '2026-01')).items);
    const { body } = await posted(ledger.client, settle(key, { place: 'missing' }), '/periods/settlements');
    const group = await get(ledger.client, `/entry-groups/${body.groupId}`);
    expect(group.occurredAt).toBe('2026-02-01T04:59:59.999Z');
    expect(group.entries[0].bookingMonth).toBe('2026-01');
  });
});
