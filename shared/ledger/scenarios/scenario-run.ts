import type { BookEntry } from '../book-entry.ts';
import { countedAdditions, fullChargeRises } from '../counted-additions.ts';
import { BLANK_COLLAR, type CylinderRegister } from '../cylinder-state.ts';
import { emissions } from '../emissions.ts';
import { entryGroupRequest } from '../entry-group.schema.ts';
import { gramsText } from '../grams-text.ts';
import { type EnteredGroup, enteredGroup } from '../judged-group.ts';
import { LedgerBook } from '../ledger-book.ts';
import { type MassByRefrigerant, refrigerantsOf } from '../mass-by-refrigerant.ts';
import { type Place, placeKey, toPlace } from '../place.ts';
import type { Scale } from '../scale.ts';
import type { UnitRegister } from '../unit-state.ts';
import { placeOf, START_AT } from './build.ts';
import type { PostedLine, ScenarioAct, ScenarioCase, SymbolicGroup } from './scenario.ts';
import { cylinderOpenings, type SymbolIds, toRequest, unitOpenings } from './symbols.ts';

/** The scenarios' one scale: d = 5 g. */
const SCALE: Scale = { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 };
const microgramsOf = (gramsDecimal: string): bigint => {
  const [whole = '0', decimals = ''] = gramsDecimal.split('.');
  return BigInt(whole + decimals.padEnd(6, '0'));
};

/** One case, run on the log in memory. Results come back in the case's own symbols and grams. */
export class ScenarioRun {
  readonly ledger = new LedgerBook();
  private readonly symbols = new Map<string, string>();
  private readonly cylinders = new Map<string, CylinderRegister>();
  private lastId = 0;
  private readonly ids: SymbolIds = {
    idOf: (symbol) => [...this.symbols].find(([, known]) => known === symbol)?.[0] ?? this.newId(symbol),
    fresh: () => this.newId(`fresh ${this.lastId}`),
  };

  constructor({ start }: ScenarioCase) {
    const startAt = Date.parse(START_AT);
    for (const [symbol, { refrigerant, tareG, nonRefillable }] of Object.entries(start.cylinders)) {
      const cylinderId = this.ids.idOf(symbol);
      const tares = [{ validFrom: startAt, tareMicrograms: microgramsOf(tareG) }];
      const register = { cylinderId, refrigerant, nonRefillable, collar: BLANK_COLLAR, tares };
      this.cylinders.set(cylinderId, register);
      this.ledger.registerCylinder(register);
    }
    for (const [symbol, { refrigerant, fullChargeG }] of Object.entries(start.units)) {
      const determined = { refrigerant, validFrom: startAt, jobId: null };
      this.ledger.registerUnit({
        unitId: this.ids.idOf(symbol),
        refrigerants: [{ refrigerant, validFrom: startAt }],
        fullCharges: fullChargeG === null ? [] : [{ ...determined, massMicrograms: microgramsOf(fullChargeG) }],
      });
    }
    for (const group of [...cylinderOpenings(start), ...unitOpenings(start), ...(start.history ?? [])]) {
      const outcome = this.ledger.post(this.entered(group));
      if (!outcome.ok) throw new Error(`The start of the case is refused: ${JSON.stringify(outcome.refusals)}`);
    }
  }

  /** The entries that the act posts, or its refusals. */
  perform(act: ScenarioAct) {
    switch (act.act) {
      case 'post':
        return this.ledger.post(this.entered(act.group));
      case 'reverse':
        return this.ledger.reverse(
          this.ids.idOf(act.of),
          this.ids.idOf(act.recordId),
          act.replacement ? this.entered(act.replacement) : undefined,
        );
      case 'answer': {
        const statement = { ...act.statement, id: this.ids.idOf(act.statement.id), by: act.statement.by ?? null };
        return this.ledger.answer(this.ids.idOf(act.of), this.ids.idOf(act.recordId), statement);
      }
      case 'tare':
        return this.reviseTare(act);
      case 'fullCharge':
      case 'refrigerant':
        return this.ledger.reviseUnit(this.revisedUnit(act), this.ids.idOf(act.recordId));
      case 'closeMonth':
        this.ledger.closeMonth(act.month);
        return { ok: true as const, value: [] };
      case 'nothing':
        return { ok: true as const, value: [] };
    }
  }

  lineOf(entry: BookEntry): PostedLine {
    return {
      from: this.symbolOf(entry.from),
      to: this.symbolOf(entry.to),
      refrigerant: entry.refrigerant,
      massG: gramsText(entry.massMicrograms),
      addedByServer: entry.addedByServer,
      corrects: entry.correctsGroupId === null ? null : (this.symbols.get(entry.correctsGroupId) ?? '?'),
      atLeast: entry.atLeast,
      takenBack: entry.takenBack,
      ...(entry.late ? { bookedLateIn: entry.bookingMonth } : {}),
    };
  }
  bookOf(symbol: string) {
    const fields = placeOf(symbol);
    const place = toPlace(fields.id ? { ...fields, id: this.ids.idOf(fields.id) } : fields);
    const known = place.place !== 'unit' || this.ledger.unitState(place.id).known;
    return { known, byRefrigerant: inGrams(this.ledger.balanceOf(place)) };
  }
  openFlags() {
    return this.ledger.openFlags().map(({ code, place, massMicrograms }) => ({
      code,
      about: this.symbolOf(place),
      massG: massMicrograms === null ? null : gramsText(massMicrograms),
    }));
  }
  emissions() {
    const byKind = emissions(this.ledger.entries.map((entry) => ({ ...entry, bookingMonth: 'all' })));
    return byKind.map(({ as, refrigerant, massMicrograms, atLeastMicrograms }) => ({
      as,
      refrigerant,
      massG: gramsText(massMicrograms),
      atLeastG: gramsText(atLeastMicrograms),
    }));
  }
  /** Counted additions above zero, summed by job, in the order of their units and times. */
  counted(unit: string) {
    const unitId = this.ids.idOf(unit);
    const groups = [...this.ledger.groups.values()];
    const rises = fullChargeRises(this.ledger.unitRegister(unitId), groups);
    const byJob = new Map<string, { massMicrograms: bigint; on: string }>();
    for (const addition of countedAdditions(unitId, groups, rises)) {
      const job = addition.jobId ?? addition.groupId;
      const on = new Date(addition.occurredAt).toISOString().slice(0, 10);
      const earlier = byJob.get(job);
      const massMicrograms = (earlier?.massMicrograms ?? 0n) + addition.countedMicrograms;
      byJob.set(job, { massMicrograms, on: earlier?.on ?? on });
    }
    return [...byJob.values()]
      .filter(({ massMicrograms }) => massMicrograms > 0n)
      .map(({ massMicrograms, on }) => ({ unit, massG: gramsText(massMicrograms), on }));
  }
  /** Difference and party places that are not zero. */
  endPlaces() {
    const shown = this.ledger
      .allBalances()
      .filter(({ place }) => !NOT_SHOWN.has(place.place))
      .map(({ place, book }) => [this.symbolOf(place), inGrams(book)] as const)
      .filter(([, byRefrigerant]) => Object.keys(byRefrigerant).length > 0)
      .map(([symbol, byRefrigerant]) => [symbol, { known: true, byRefrigerant }] as const);
    return Object.fromEntries(shown);
  }

  private entered(symbolic: SymbolicGroup): EnteredGroup {
    const request = entryGroupRequest.parse(toRequest(symbolic, this.ids));
    return enteredGroup(request, { sequence: 0, scaleOf: () => SCALE });
  }
  private reviseTare(act: Extract<ScenarioAct, { act: 'tare' }>) {
    const cylinderId = this.ids.idOf(act.cylinder);
    const register = this.cylinders.get(cylinderId);
    if (!register) throw new RangeError(`No cylinder ${act.cylinder}`);
    const tare = { validFrom: Date.parse(act.validFrom), tareMicrograms: microgramsOf(act.tareG) };
    const revised = { ...register, tares: [...register.tares, tare] };
    this.cylinders.set(cylinderId, revised);
    return this.ledger.reviseCylinder(revised, this.ids.idOf(act.recordId));
  }
  private revisedUnit(act: Extract<ScenarioAct, { act: 'fullCharge' | 'refrigerant' }>): UnitRegister {
    const register = this.ledger.unitRegister(this.ids.idOf(act.unit));
    const dated = { refrigerant: act.refrigerant, validFrom: Date.parse(act.validFrom) };
    if (act.act === 'refrigerant') return { ...register, refrigerants: [...register.refrigerants, dated] };
    const jobId = act.jobId === null ? null : this.ids.idOf(act.jobId);
    const fullCharge = { ...dated, massMicrograms: microgramsOf(act.massG), jobId };
    return { ...register, fullCharges: [...register.fullCharges, fullCharge] };
  }
  private newId(symbol: string): string {
    this.lastId += 1;
    const id = `0198a0d0-0000-7000-8000-${this.lastId.toString(16).padStart(12, '0')}`;
    this.symbols.set(id, symbol);
    return id;
  }
  private symbolOf(place: Place): string {
    return 'id' in place ? (this.symbols.get(place.id) ?? place.id) : placeKey(place);
  }
}

const NOT_SHOWN: ReadonlySet<string> = new Set(['cylinder', 'unit', 'supplier', 'factory', 'opening', 'atmosphere']);

const inGrams = (book: MassByRefrigerant): Record<string, string> =>
  Object.fromEntries(refrigerantsOf(book).map((refrigerant) => [refrigerant, gramsText(book[refrigerant] ?? 0n)]));
