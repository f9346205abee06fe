import { isDeepStrictEqual } from 'node:util';
import { v7 as uuid } from 'uuid';
import type { Checklist } from '../../shared/periods/periods.schema.ts';
import type { TestApp } from './app.ts';
import { groupOf, inCylinder, inUnit, type Ledger, massOf, posted, readingOf, startLedger } from './ledger.ts';
import { NaiveBooks } from './naive-books.ts';
import type { Deed, Refused } from './random-postings.ts';
import type { Answered } from './test-client.ts';

const HELD_G = 5_000;
const LIMIT_G = 9_000;
const LAST_DAY = 300;
const FIRST_DAY = Date.parse('2026-01-06T08:00:00Z');

interface Sent {
  path: string;
  body: { groupId: string; reason?: string };
  answer: Answered;
}

/** A firm in which deeds are done one after the other; what was accepted is written into naive books. */
export class Performance {
  readonly books = new NaiveBooks();
  readonly sent: Sent[] = [];
  readonly settlements: string[] = [];
  /** How often which deed was answered how: `reverse 201`. */
  readonly answered = new Map<string, number>();
  readonly ledger: Ledger;
  private cylinderIds: string[] = [];
  private recoveryId = '';
  private unitId = '';
  private doing: Deed['does'] | 'start' = 'start';

  private constructor(ledger: Ledger) {
    this.ledger = ledger;
  }

  static async start(app: TestApp): Promise<Performance> {
    const it = new Performance(await startLedger(app));
    const { ledger } = it;
    const limit = { stampedLimit: { value: String(LIMIT_G), unit: 'g' } };
    for (let n = 0; n < 2; n++) {
      const { id } = await ledger.cylinder(null, limit);
      it.cylinderIds.push(id);
      const entries = [massOf(String(HELD_G), { place: 'opening' }, inCylinder(id), { howKnown: 'estimated' })];
      await it.post('/entry-groups', groupOf('opening', new Date(FIRST_DAY).toISOString(), { entries }), [201]);
    }
    it.recoveryId = (await ledger.cylinder(null, { kind: 'recovery' })).id;
    const unit = await ledger.unit('1000', '6000');
    it.unitId = unit.id;
    await it.writeDown((unit.initialCharge as { groupId: string }).groupId);
    return it;
  }

  async perform(deed: Deed): Promise<void> {
    this.doing = deed.does;
    switch (deed.does) {
      case 'charge': {
        const before = deed.readG === null ? null : deed.massG + deed.readG;
        await this.post('/entry-groups', this.charge(deed.cylinder, deed.massG, deed.day, before), [201, 422]);
        return;
      }
      case 'weigh': {
        const readings = [readingOf(this.cylinder(deed.cylinder), this.ledger.scale.id, 'only', HELD_G - deed.lessG)];
        await this.post('/entry-groups', groupOf('weighing', this.at(deed.day, 6), { readings, reason: 'any' }), [201]);
        return;
      }
      case 'recover': {
        const statements = deed.empties ? [{ about: 'unit', id: this.unitId, is: 'empty', by: 'recovery' }] : [];
        const entries = [massOf(String(deed.massG), inUnit(this.unitId), inCylinder(this.recoveryId))];
        const parts = { unitId: this.unitId, entries, statements, reason: 'any' };
        await this.post('/entry-groups', groupOf('recovery', this.at(deed.day, 3), parts), [201, 422]);
        return;
      }
      case 'buy': {
        const body = this.purchase(deed.cylinder, String(deed.massG), deed.day, { reason: 'any' });
        await this.post('/entry-groups', body, [201]);
        return;
      }
      case 'refused':
        return this.refuse(deed.how, deed.cylinder, deed.day);
      case 'sendAgain': {
        const { path, body, answer } = this.pick(this.sent, deed.which);
        const again = await this.post(path, body, [200]);
        // Flags and balances are as they stand now; what was posted is what was posted.
        if (!isDeepStrictEqual(again.body.entries, answer.body.entries)) throw new Error('a resend answers otherwise');
        return;
      }
      case 'sendChanged': {
        const { path, body } = this.pick(this.sent, deed.which);
        const changed = { ...body, reason: `${body.reason ?? ''} and more` };
        await this.post(path, changed, [409], 'idReused');
        return;
      }
      case 'atOnce':
        return this.atOnce(deed.masses.map((massG) => this.charge(deed.cylinder, massG, deed.day, null)));
      case 'reverse': {
        const replacement =
          deed.replaceG === null ? {} : { replacement: this.charge(0, deed.replaceG, deed.day, null) };
        const { groupId } = this.pick(this.sent, deed.which).body;
        const body = { groupId: uuid(), schema: 1, reason: 'any', ...replacement };
        await this.post(`/entry-groups/${groupId}/reversal`, body, [201, 422]);
        return;
      }
      case 'settle':
        return this.settle(deed);
      case 'reverseSettlement': {
        if (this.settlements.length === 0) return;
        const body = { groupId: uuid(), schema: 1, reason: 'any' };
        const path = `/entry-groups/${this.pick(this.settlements, deed.which)}/reversal`;
        await this.post(path, body, [201, 422], 'alreadyReversed');
        return;
      }
      case 'close':
        return this.close();
    }
  }

  /** Sends, holds the answer against what is allowed, and sees that a refusal leaves no record. */
  private async post(path: string, body: Sent['body'], allowed: number[], code?: string): Promise<Answered> {
    const before = await this.ledger.sequence();
    const answer = await this.ledger.client.post(path, body);
    const said = `${path} ${answer.status} ${JSON.stringify(answer.body)} to ${JSON.stringify(body)}`;
    if (!allowed.includes(answer.status)) throw new Error(said);
    if (answer.status >= 400 && code && !says(answer, code)) throw new Error(said);
    this.count(answer.status);
    const after = await this.ledger.sequence();
    if (answer.status === 201 ? after <= before : after !== before) throw new Error(`${before} to ${after}: ${said}`);
    if (answer.status === 201 && answer.body.entries) this.keep(path, body, answer);
    return answer;
  }

  private count(status: number): void {
    const key = `${this.doing} ${status}`;
    this.answered.set(key, (this.answered.get(key) ?? 0) + 1);
  }

  private keep(path: string, body: Sent['body'], answer: Answered): void {
    this.books.write(answer.body.entries);
    this.sent.push({ path, body, answer });
  }

  private async writeDown(groupId: string): Promise<void> {
    const { status, body } = await this.ledger.client.get(`/entry-groups/${groupId}`);
    if (status !== 200) throw new Error(`${groupId} answered ${status}`);
    this.books.write(body.entries);
  }

  private async refuse(how: Refused, n: number, day: number): Promise<void> {
    const id = this.cylinder(n);
    const charge = (entry: object, on = day) =>
      groupOf('extraCharge', this.at(on), { unitId: this.unitId, entries: [entry], reason: 'any' });
    const bodies: Record<Refused, () => [Sent['body'], string]> = {
      // Three after everything else: what comes before a weighing is judged by what that found in the cylinder.
      moreThanItHolds: () => [charge(massOf('1000000', inCylinder(id), inUnit(this.unitId)), LAST_DAY), 'exceedsBook'],
      secondRefrigerant: () => [this.purchase(n, '10', LAST_DAY, {}, 'R-32'), 'reasonRequired'],
      pastLimit: () => [this.purchase(n, '20000', LAST_DAY, {}), 'reasonRequired'],
      unknownCylinder: () => [charge(massOf('10', inCylinder(uuid()), inUnit(this.unitId))), 'notKnownHere'],
      unknownUnit: () => [
        groupOf('extraCharge', this.at(day), { entries: [massOf('10', inCylinder(id), inUnit(uuid()))] }),
        'notKnownHere',
      ],
      zeroMass: () => [charge(massOf('0', inCylinder(id), inUnit(this.unitId))), 'massNotPositive'],
      wrongUnit: () => {
        const entry = { ...massOf('10', inCylinder(id), inUnit(this.unitId)), mass: { value: '10', unit: 'stone' } };
        return [charge(entry), 'notAllowedValue'];
      },
      toItself: () => [charge(massOf('10', inCylinder(id), inCylinder(id))), 'entryToItself'],
    };
    const [body, code] = bodies[how]();
    await this.post('/entry-groups', body, [400, 422], code);
  }

  /** All of them and the first once more, at the same time: one of the two is new. */
  private async atOnce(bodies: Sent['body'][]): Promise<void> {
    const [first] = bodies;
    if (!first) return;
    const answers = await Promise.all([...bodies, first].map((body) => this.decided(body)));
    const twice = [answers[0]?.status, answers.at(-1)?.status].sort().join();
    if (twice !== '200,201' && twice !== '422,422') throw new Error(`sent twice at once: ${twice}`);
    for (const [index, answer] of answers.entries()) {
      if (![200, 201, 422].includes(answer.status)) throw new Error(JSON.stringify(answer.body));
      this.count(answer.status);
      if (answer.status === 201) this.keep('/entry-groups', bodies[index] ?? first, answer);
    }
  }

  /** Too busy is no answer: a device sends again. */
  private async decided(body: object): Promise<Answered> {
    for (let attempt = 0; attempt < 20; attempt++) {
      const answer = await this.ledger.client.post('/entry-groups', body);
      if (answer.status !== 503) return answer;
    }
    throw new Error('was never decided');
  }

  private async settle({ which, month, isLost, half }: Extract<Deed, { does: 'settle' }>): Promise<void> {
    const name = `2026-0${month}`;
    const { items, state } = await this.checklist(name);
    const open = items.flatMap((item) => (item.kind === 'difference' ? [item.difference] : []));
    if (open.length === 0 || state === 'closed') return;
    const { key, standsG } = this.pick(open, which);
    const place = isLost && standsG < 0 ? 'atmosphere' : 'missing';
    const mass = half ? { mass: { value: (Math.abs(standsG) / 2).toFixed(6), unit: 'g' } } : {};
    const id = uuid();
    const body = { id, month: name, key, to: { place }, reason: 'any', ...mass };
    const answer = await this.ledger.client.post('/periods/settlements', body);
    if (answer.status !== 201) throw new Error(JSON.stringify(answer.body));
    await this.writeDown(id);
    this.settlements.push(id);
    this.count(201);
  }

  private async close(): Promise<void> {
    const { next } = (await this.ledger.client.get('/periods')).body;
    if (!next || next > '2026-03') return;
    const items = (await this.checklist(next)).items.filter(({ needsDecision, carried }) => needsDecision && !carried);
    const keys = items.map(({ key }) => ({ id: uuid(), key }));
    const carry = { month: next, carriedBy: this.ledger.owner.id, reason: 'any', items: keys };
    if (keys.length > 0) await posted(this.ledger.client, carry, '/periods/carried');
    const { sumsHash } = await this.checklist(next);
    await this.ledger.made('/periods', { id: uuid(), month: next, sumsHash });
    this.count(201);
  }

  async checklist(month: string): Promise<Checklist> {
    return (await this.ledger.client.get(`/periods/checklist?month=${month}`)).body;
  }

  private charge(n: number, massG: number, day: number, beforeG: number | null) {
    const id = this.cylinder(n);
    return groupOf('extraCharge', this.at(day), {
      unitId: this.unitId,
      readings: beforeG === null ? [] : [readingOf(id, this.ledger.scale.id, 'before', beforeG)],
      entries: [massOf(String(massG), inCylinder(id), inUnit(this.unitId))],
      reason: 'any',
    });
  }

  private purchase(n: number, grams: string, day: number, fields: object, refrigerant = 'R-410A') {
    const from = { place: 'supplier', id: this.ledger.supplier.id };
    const entry = massOf(grams, from, inCylinder(this.cylinder(n)), { howKnown: 'invoice', refrigerant });
    return groupOf('purchase', this.at(day, 1), { entries: [entry], ...fields });
  }

  private at(day: number, hours = 0): string {
    return new Date(FIRST_DAY + day * 86_400_000 + hours * 3_600_000).toISOString();
  }

  private cylinder(n: number): string {
    return this.cylinderIds[n] ?? '';
  }

  private pick<T>(from: readonly T[], which: number): T {
    return from[which % from.length] as T;
  }
}

const says = ({ body }: Answered, code: string): boolean =>
  body.code === code || body.errors?.some((error: { code: string }) => error.code === code);
