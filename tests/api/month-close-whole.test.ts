import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Checklist } from '../../shared/periods/periods.schema.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import { groupOf, type Ledger, posted, readingOf, startLedger } from '../support/ledger.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

const checklist = async (ledger: Ledger): Promise<Checklist> =>
  (await ledger.client.get('/periods/checklist?month=2026-01')).body;
const close = (ledger: Ledger, sumsHash: string) =>
  ledger.client.post('/periods', { id: uuid(), month: '2026-01', sumsHash });
const carry = (ledger: Ledger, keys: readonly string[], carriedBy = ledger.owner.id, reason = 'looked at') =>
  posted(
    ledger.client,
    { month: '2026-01', carriedBy, reason, items: keys.map((key) => ({ id: uuid(), key })) },
    '/periods/carried',
  );

describe('A month', () => {
  it('is closed over no item that nobody decided, however many there are', async () => {
    const ledger = await startLedger(app);
    const cylinder = await ledger.cylinder('9500');
    const unit = await ledger.unit('1000', '5000');
    const started = Date.parse('2026-01-10T08:00:00Z');
    for (let start = 0; start < 505; start++) {
      const open = groupOf('extraCharge', new Date(started + start * 60_000).toISOString(), {
        unitId: unit.id,
        openWeighIn: true,
        readings: [readingOf(cylinder.id, ledger.scale.id, 'before', 9_500)],
      });
      await posted(ledger.client, open);
    }
    const seen = await checklist(ledger);
    expect([seen.items.length, seen.notListed, seen.undecided, seen.carried]).toEqual([505, 0, 505, 0]);

    await carry(
      ledger,
      seen.items.slice(0, 500).map(({ key }) => key),
    );
    const left = await checklist(ledger);
    expect([left.undecided, left.carried]).toEqual([5, 500]);
    const refused = await close(ledger, left.sumsHash);
    expect([refused.status, refused.body.code, refused.body.errors.length]).toEqual([422, 'monthNotSettled', 5]);

    await carry(
      ledger,
      seen.items.slice(500).map(({ key }) => key),
    );
    expect((await close(ledger, (await checklist(ledger)).sumsHash)).status).toBe(201);
    expect((await checklist(ledger)).signedOff?.carried).toHaveLength(505);
  }, 240_000);

  it('is signed with the names that were seen: who carries what, and why, is part of what the hash is of', async () => {
    const ledger = await startLedger(app);
    await ledger.cylinder('9500');
    const brandt = await app.addPerson(['technician'], { firmId: ledger.firm.id });
    const [key = ''] = (await checklist(ledger)).items.map((item) => item.key);
    await carry(ledger, [key]);
    const seen = (await checklist(ledger)).sumsHash;
    await carry(ledger, [key], brandt.id);
    const { status, body } = await close(ledger, seen);
    expect([status, body.code]).toEqual([412, 'seenChanged']);
    const again = (await checklist(ledger)).sumsHash;
    await carry(ledger, [key], brandt.id, 'another reason');
    expect((await close(ledger, again)).status).toBe(412);

    const { sumsHash } = await checklist(ledger);
    expect((await close(ledger, sumsHash)).status).toBe(201);
    const closed = await checklist(ledger);
    expect([closed.state, closed.sumsHash]).toEqual(['closed', sumsHash]);
  });
});
