import { v7 as uuid } from 'uuid';
import { monthAfter } from '../../shared/ledger/book-entry.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { gramsText } from '../../shared/ledger/grams-text.ts';
import { type PlaceFields, placeKey, toPlace } from '../../shared/ledger/place.ts';
import { placeOf, START_AT } from '../../shared/ledger/scenarios/build.ts';
import type {
  ExpectedBook,
  OpenFlag,
  PostedLine,
  ScenarioAct,
  ScenarioCase,
  SymbolicGroup,
} from '../../shared/ledger/scenarios/scenario.ts';
import { cylinderOpenings, toRequest } from '../../shared/ledger/scenarios/symbols.ts';
import { microgramsOfGrams } from '../../shared/units/mass.ts';
import type { TestApp } from './app.ts';
import { type Ledger, startLedger } from './ledger.ts';
import type { Answered } from './test-client.ts';

const grams = (massG: number): string => gramsText(microgramsOfGrams(massG));

/** One case of the scenarios, played through HTTP in a firm of its own. Results come back in the case's symbols. */
export class ScenarioOverHttp {
  private readonly symbols = new Map<string, string>();
  private readonly made = new Set<string>();
  private readonly sent: { path: string; body: unknown; answered: unknown }[] = [];
  private ledger!: Ledger;
  private readonly scenarioCase: ScenarioCase;

  constructor(scenarioCase: ScenarioCase) {
    this.scenarioCase = scenarioCase;
  }

  async start(app: TestApp): Promise<void> {
    this.ledger = await startLedger(app);
    const { start } = this.scenarioCase;
    this.symbols.set(this.ledger.scale.id, 'scale');
    this.symbols.set(this.ledger.supplier.id, 'supplier');
    this.symbols.set(this.ledger.customer.id, 'customer');
    for (const kind of ['reclaimer', 'otherContractor']) {
      await this.ledger.made('/parties', { id: this.idOf(kind), kind, name: kind });
    }
    for (const [symbol, { refrigerant, tareG, nonRefillable }] of Object.entries(start.cylinders)) {
      await this.ledger.made('/cylinders', {
        id: this.idOf(symbol),
        tag: symbol,
        kind: nonRefillable ? 'nonRefillable' : symbol.startsWith('R') ? 'recovery' : 'refillable',
        refrigerant,
        tare: { id: uuid(), mass: { value: tareG, unit: 'g' }, validFrom: START_AT },
      });
    }
    for (const [symbol, { refrigerant, initial, fullChargeG }] of Object.entries(start.units)) {
      const dated = { method: 'manufacturer', validFrom: START_AT };
      await this.ledger.made('/units', {
        id: this.idOf(symbol),
        siteId: this.ledger.site.id,
        tag: symbol,
        name: symbol,
        applianceKind: 'comfortCooling',
        refrigerant,
        refrigerantFrom: START_AT.slice(0, 10),
        fullCharge: fullChargeG === null ? null : { id: uuid(), mass: { value: fullChargeG, unit: 'g' }, ...dated },
        initialCharge:
          initial.state === 'notKnown'
            ? initial
            : {
                state: initial.state,
                mass: { value: initial.massG, unit: 'g' },
                at: START_AT,
                entryId: uuid(),
                groupId: this.idOf(`opening-${symbol}`),
              },
      });
    }
    for (const group of [...cylinderOpenings(start), ...(start.history ?? [])]) {
      const answer = await this.post(group);
      if (answer.status !== 201) throw new Error(`The start is refused: ${JSON.stringify(answer.body)}`);
    }
  }

  /** Does the step; null where nothing is sent. */
  async perform(act: ScenarioAct): Promise<Answered | null> {
    switch (act.act) {
      case 'post':
        return this.post(act.group);
      case 'reverse': {
        const replacement = act.replacement && (await this.request(act.replacement));
        const body = { groupId: this.idOf(act.recordId), schema: 1, reason: 'wrong entry', replacement };
        return this.send(`/entry-groups/${this.idOf(act.of)}/reversal`, body);
      }
      case 'answer': {
        const statement = { ...act.statement, id: this.idOf(act.statement.id) };
        const body = { groupId: this.idOf(act.recordId), schema: 1, statement };
        return this.send(`/entry-groups/${this.idOf(act.of)}/answer`, body);
      }
      case 'tare':
        return this.send(`/cylinders/${this.idOf(act.cylinder)}/tares`, {
          id: this.idOf(act.recordId),
          tare: { value: act.tareG, unit: 'g' },
          validFrom: act.validFrom,
          reason: 'wrong stamp',
        });
      case 'fullCharge':
        return this.send(`/units/${this.idOf(act.unit)}/full-charges`, {
          id: this.idOf(act.recordId),
          mass: { value: act.massG, unit: 'g' },
          method: 'calculation',
          validFrom: act.validFrom,
          jobId: act.jobId === null ? null : await this.job(act.jobId, act.unit),
          reason: 'new line set',
        });
      case 'refrigerant':
        return this.send(`/units/${this.idOf(act.unit)}/refrigerants`, {
          id: this.idOf(act.recordId),
          refrigerant: act.refrigerant,
          validFrom: act.validFrom,
        });
      case 'closeMonth':
        await this.ledger.closeMonthsBefore(monthAfter(act.month));
        return null;
      case 'nothing':
        return null;
    }
  }

  /** Everything that was posted, sent once more: each with what it answers now and what it answered then. */
  async resendAll() {
    const resent: { status: number; now: unknown; before: unknown }[] = [];
    for (const { path, body, answered } of this.sent) {
      const again = await this.ledger.client.post(path, body);
      resent.push({ status: again.status, now: again.body, before: answered });
    }
    return resent;
  }

  lines(body: EntryGroupResponse): PostedLine[] {
    return body.entries.map((entry) => ({
      from: this.symbolOf(entry.from),
      to: this.symbolOf(entry.to),
      refrigerant: entry.refrigerant,
      massG: grams(entry.massG),
      addedByServer: entry.addedByServer,
      corrects: entry.correctsGroupId === null ? null : (this.symbols.get(entry.correctsGroupId) ?? '?'),
      atLeast: entry.atLeast,
      ...(entry.late ? { bookedLateIn: entry.bookingMonth } : {}),
    })) as PostedLine[];
  }

  async bookOf(symbol: string): Promise<ExpectedBook> {
    const id = this.idOf(symbol);
    if (placeOf(symbol).place === 'unit') {
      const { book } = (await this.ledger.client.get(`/units/${id}`)).body;
      return { known: book.known, byRefrigerant: byRefrigerant(book.byRefrigerant) };
    }
    const cylinder = (await this.ledger.client.get(`/cylinders/${id}`)).body;
    return { known: true, byRefrigerant: byRefrigerant(cylinder.byRefrigerant) };
  }

  async openFlags(): Promise<OpenFlag[]> {
    const { body } = await this.ledger.client.get('/flags?open=true&limit=200');
    return body.items.map((flag: { code: OpenFlag['code']; subject: { id: string }; massG: number | null }) => ({
      code: flag.code,
      about: this.symbols.get(flag.subject.id) ?? '?',
      massG: flag.massG === null ? null : grams(flag.massG),
    }));
  }

  async emissions() {
    const { body } = await this.ledger.client.get('/emissions');
    const sums = new Map<string, { as: string; refrigerant: string; massG: number; atLeastG: number }>();
    for (const { as, refrigerant, massG, atLeastG } of body.items) {
      const sum = sums.get(`${refrigerant} ${as}`) ?? { as, refrigerant, massG: 0, atLeastG: 0 };
      sums.set(`${refrigerant} ${as}`, { ...sum, massG: sum.massG + massG, atLeastG: sum.atLeastG + atLeastG });
    }
    return [...sums.values()]
      .filter(({ massG, atLeastG }) => massG !== 0 || atLeastG !== 0)
      .map(({ massG, atLeastG, ...of }) => ({ ...of, massG: grams(massG), atLeastG: grams(atLeastG) }));
  }

  /** Counted additions above zero, summed by job. */
  async counted(unit: string) {
    const { body } = await this.ledger.client.get(`/units/${this.idOf(unit)}/counted-additions`);
    const byJob = new Map<string, { massG: number; on: string }>();
    for (const addition of body.items) {
      const job = addition.jobId ?? addition.groupId;
      const earlier = byJob.get(job);
      byJob.set(job, {
        massG: (earlier?.massG ?? 0) + addition.countedG,
        on: earlier?.on ?? addition.regulatoryDay,
      });
    }
    return [...byJob.values()]
      .filter(({ massG }) => massG > 0)
      .map(({ massG, on }) => ({ unit, massG: grams(massG), on }));
  }

  /** Difference and party places that are not zero: no screen shows them yet, so they are read from the books. */
  async endPlaces(): Promise<Record<string, ExpectedBook>> {
    const rows = await this.ledger.app.database.query<{
      key: string;
      id: string | null;
      refrigerant: string;
      mass: string;
    }>(
      'superuser',
      `SELECT place_key AS key, place_id AS id, refrigerant, mass_micrograms AS mass FROM balance
        WHERE firm_id = $1 AND mass_micrograms <> 0
          AND place NOT IN ('cylinder', 'unit', 'supplier', 'factory', 'opening', 'atmosphere')`,
      [this.ledger.firm.id],
    );
    const books: Record<string, { known: true; byRefrigerant: Record<string, string> }> = {};
    for (const { key, id, refrigerant, mass } of rows) {
      const symbol = id === null ? key : (this.symbols.get(id) ?? key);
      books[symbol] ??= { known: true, byRefrigerant: {} };
      (books[symbol] as { byRefrigerant: Record<string, string> }).byRefrigerant[refrigerant] = gramsText(BigInt(mass));
    }
    return books;
  }

  private async post(group: SymbolicGroup): Promise<Answered> {
    return this.send('/entry-groups', await this.request(group));
  }

  private async send(path: string, body: unknown): Promise<Answered> {
    const answer = await this.ledger.client.post(path, body);
    if (answer.status === 201) this.sent.push({ path, body, answered: answer.body });
    return answer;
  }

  private async request(group: SymbolicGroup) {
    if (group.jobId && group.unitId) await this.job(group.jobId, group.unitId);
    if (group.chargeSheetId && group.unitId) await this.chargeSheet(group.chargeSheetId, group.unitId);
    return toRequest(group, { idOf: (symbol) => this.idOf(symbol), fresh: () => uuid() });
  }

  private async job(symbol: string, unit: string): Promise<string> {
    const id = this.idOf(symbol);
    if (!this.made.has(id)) {
      await this.ledger.made('/jobs', { id, unitId: this.idOf(unit), kind: 'serviceWithLeak', openedAt: START_AT });
      this.made.add(id);
    }
    return id;
  }

  private async chargeSheet(symbol: string, unit: string): Promise<void> {
    const id = this.idOf(symbol);
    if (this.made.has(id)) return;
    const path = `/units/${this.idOf(unit)}`;
    const { refrigerant } = (await this.ledger.client.get(path)).body;
    const request = { ...CHARGE_REQUEST, basis: { ...CHARGE_REQUEST.basis, refrigerant } };
    await this.ledger.made(`${path}/charge-sheets`, { id, request });
    this.made.add(id);
  }

  private idOf(symbol: string): string {
    const known = [...this.symbols].find(([, other]) => other === symbol)?.[0];
    if (known) return known;
    const id = uuid();
    this.symbols.set(id, symbol);
    return id;
  }

  private symbolOf(fields: PlaceFields): string {
    return fields.id ? (this.symbols.get(fields.id) ?? fields.id) : placeKey(toPlace(fields));
  }
}

const byRefrigerant = (rows: { refrigerant: string; massG: number }[]): Record<string, string> =>
  Object.fromEntries(rows.map(({ refrigerant, massG }) => [refrigerant, grams(massG)]));

/** What the sheet says matters to no case: that there is one does. */
export const CHARGE_REQUEST = {
  job: 'newInstall',
  basis: {
    refrigerant: 'R-410A',
    factoryChargeG: 1250,
    precharge: { scope: 'system', lengthM: 7.5 },
    rate: { kind: 'flat', gPerM: 20 },
  },
  lineSet: { branches: [{ name: 'A', liquidOdMm: 6.35, lengthM: 12 }] },
  gwpSet: 'US-AIM',
};
