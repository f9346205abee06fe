import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { inFirm } from '../../server/database/firm-scope.ts';
import { lockHead } from '../../server/journal/post-records.ts';
import type { EntryPreviewResponse } from '../../shared/entry-previews/entry-preview.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { SCENARIOS } from '../../shared/ledger/scenarios/all-scenarios.ts';
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
import { ScenarioOverHttp } from '../support/scenario-over-http.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const inWords = (value: unknown): string => JSON.stringify(value);
const sorted = (list: readonly object[]): string[] => list.map(inWords).sort();
/** An entry as both answers tell it, without its id: what the server adds or splits gets a new one each time. */
const told = (entries: readonly (EntryPreviewResponse['entries'][number] | EntryGroupResponse['entries'][number])[]) =>
  sorted(
    entries.map(({ from, to, addedByServer, ...entry }) => ({
      refrigerant: entry.refrigerant,
      massG: entry.massG,
      from: [from.place, from.id ?? null, from.as ?? null],
      to: [to.place, to.id ?? null, to.as ?? null],
      howKnown: entry.howKnown,
      occurredAt: entry.occurredAt,
      month: entry.bookingMonth,
      late: entry.late,
      atLeast: entry.atLeast,
      corrects: entry.correctsGroupId,
      addedByServer,
    })),
  );

/** Source: the 66 cases of the log, worked by hand. */
describe.each(SCENARIOS)('Before each step of $id ($title)', ({ cases }) => {
  it.each(cases)('the preview says what $id then posts, and keeps nothing', async (scenarioCase) => {
    const played = new ScenarioOverHttp(scenarioCase);
    await played.start(app);
    const ledger: Ledger = played['ledger' as never];
    const post = ledger.client.post;
    ledger.client.post = (async (path: string, body: object) => {
      if (!/^\/entry-groups(\/[^/]+\/reversal)?$/.test(path)) return post(path, body);
      const sequence = await ledger.sequence();
      const preview = await post(`${path}/preview`, body);
      expect(await ledger.sequence()).toBe(sequence);
      const answer = await post(path, body);
      if (answer.status !== 201) {
        expect([preview.status, preview.body.code]).toEqual([answer.status, answer.body.code]);
        return answer;
      }
      expect(preview.status, inWords(preview.body)).toBe(200);
      expect(told(preview.body.entries)).toEqual(told(answer.body.entries));
      const after = ({
        place,
        refrigerant,
        massG,
        afterG,
        known,
      }: Record<string, unknown> & { place: { id: string } }) => ({
        id: place.id,
        refrigerant,
        massG: massG ?? afterG,
        known,
      });
      expect(sorted(preview.body.balances.map(after))).toEqual(sorted(answer.body.balances.map(after)));
      return answer;
    }) as typeof post;
    for (const { does } of scenarioCase.steps) await played.perform(does);
  });
});

describe('A preview', () => {
  it('asks how full the unit is where the book would pass full charge, and nothing where it would not', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1290', '1290');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9200 });
    const asked = await ledger.client.post('/entry-groups/preview', { ...body, kind: 'refill' });
    expect(asked.body.questions).toEqual([{ asks: 'howFull', unitId: unit.id, bookG: 1290, fullChargeG: 1290 }]);
    const room = await ledger.unit('1000', '1290');
    const small = weighIn(ledger, { cylinderId: cylinder.id, unitId: room.id, beforeG: 9500, afterG: 9300 });
    expect((await ledger.client.post('/entry-groups/preview', small)).body.questions).toEqual([]);
  });

  it('asks a late group as the unit stood at its own time', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const recovery = await ledger.cylinder(null, { kind: 'recovery' });
    const unit = await ledger.unit('1290', '1290');
    await posted(
      ledger.client,
      groupOf('recovery', '2026-03-05T10:00:00Z', {
        unitId: unit.id,
        readings: [
          readingOf(recovery.id, ledger.scale.id, 'before', 0),
          readingOf(recovery.id, ledger.scale.id, 'after', 1290),
        ],
        entries: [massOf('1290', inUnit(unit.id), inCylinder(recovery.id))],
        statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
      }),
    );
    const refill = (at: string) =>
      weighIn(
        ledger,
        { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9300 },
        { kind: 'refill' },
        at,
      );
    const now = await ledger.client.post('/entry-groups/preview', refill('2026-03-06T10:00:00Z'));
    const earlier = await ledger.client.post('/entry-groups/preview', refill('2026-03-02T10:00:00Z'));
    expect(now.body.questions).toEqual([]);
    expect(earlier.body.questions).toMatchObject([{ unitId: unit.id, bookG: 1290 }]);
  });

  it('lists the reason that a posting would refuse to do without, at its field, and shows what would be posted', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const empty = await ledger.cylinder(null, { kind: 'nonRefillable' });
    const body = groupOf('transfer', '2026-03-02T10:00:00Z', {
      entries: [massOf('400', inCylinder(cylinder.id), inCylinder(empty.id))],
    });
    const preview = await ledger.client.post('/entry-groups/preview', body);
    expect(preview.status).toBe(200);
    expect(preview.body.reasons).toMatchObject([{ code: 'reasonForRefill', path: '/reason' }]);
    expect(preview.body.reasons[0].message).toContain(empty.tag);
    expect(preview.body.entries).toHaveLength(1);
    expect(preview.body.flags).toMatchObject([{ code: 'nonRefillableRefilled' }]);
    expect(preview.body.balances).toContainEqual(
      expect.objectContaining({ refrigerant: 'R-410A', beforeG: 9500, afterG: 9100 }),
    );
    expect((await ledger.post(body)).body.code).toBe('reasonRequired');
  });

  it('names the places as people call them', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '1290');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9400 });
    const { entries } = (await ledger.client.post('/entry-groups/preview', body)).body;
    expect(entries).toMatchObject([{ from: { label: cylinder.tag }, to: { label: unit.tag } }]);
  });

  it('of a group that is posted already says so', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '1290');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9400 });
    await posted(ledger.client, body);
    expect(await ledger.client.post('/entry-groups/preview', body)).toMatchObject({
      status: 409,
      body: { code: 'idReused' },
    });
  });

  it('does not wait for somebody who posts: the head is not locked', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '1290');
    const body = weighIn(ledger, { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9400 });
    let done = (): void => {};
    let hasLocked = (): void => {};
    const looked = new Promise<void>((resolve) => {
      done = resolve;
    });
    const locked = new Promise<void>((resolve) => {
      hasLocked = resolve;
    });
    const actor = { firmId: ledger.firm.id, personId: ledger.owner.id, siteIds: null };
    const holding = inFirm(app.parts.dataSource, actor, async (manager) => {
      await lockHead(manager);
      hasLocked();
      await looked;
    });
    await locked;
    const preview = await ledger.client.post('/entry-groups/preview', body);
    done();
    await holding;
    expect(preview.status).toBe(200);
  });

  it('is for those who may post', async () => {
    const reader = await app.signIn('reader');
    const body = groupOf('weighing', '2026-03-02T10:00:00Z', {
      documents: [{ kind: 'other', number: '1', date: '2026-03-02' }],
    });
    expect((await reader.post('/entry-groups/preview', body)).status).toBe(403);
    expect((await app.visitor().post('/entry-groups/preview', body)).status).toBe(401);
  });

  it("shows nothing of another firm's: its unit is not known here", async () => {
    const [one, other] = [await startLedger(app), await startLedger(app)];
    const unit = await one.unit('1000', '1290');
    const body = {
      ...groupOf('loss', '2026-03-02T10:00:00Z', {}),
      groupId: uuid(),
      unitId: unit.id,
      statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'foundFlat' }],
    };
    expect(await other.client.post('/entry-groups/preview', body)).toMatchObject({ status: 422 });
  });
});
