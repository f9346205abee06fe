import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { changesAgainst, postedAsAdded } from './added-entry.ts';
import {
  type Balances,
  type BookEntry,
  enteredEntry,
  monthAfter,
  reversalEntry,
  serverEntry,
  withEntries,
} from './book-entry.ts';
import { type CylinderRegister, type CylinderState, emptyCylinderState } from './cylinder-state.ts';
import { finalBalanceRefusals } from './final-balance.ts';
import { flagsAfterStep, type LedgerFlag } from './flag.ts';
import { groupFlags } from './group-flags.ts';
import { cylinderBookBeforeMasses, judgeCylinderStep, replayCylinder } from './judge-cylinder.ts';
import { judgeUnitStep, replayUnit } from './judge-unit.ts';
import {
  compareInTimeline,
  type EnteredGroup,
  type JudgedGroup,
  type JudgedMass,
  type JudgedStatement,
  placesJudged,
  splitMass,
  touchesCylinder,
  touchesUnit,
} from './judged-group.ts';
import { type MassByRefrigerant, massOf, refrigerantsOf } from './mass-by-refrigerant.ts';
import { cylinderPlace, type Place, placeKey, unitPlace } from './place.ts';
import { cylinderFromSnapshot, isInOrder, toSnapshot, unitFromSnapshot } from './snapshot.ts';
import { emptyUnitState, type UnitRegister, type UnitState } from './unit-state.ts';

interface Judged<State> {
  readonly state: State;
  readonly flags: readonly LedgerFlag[];
}

/** What one posting changes. A reversal with its replacement is one posting. */
interface Posting {
  readonly recordId: string;
  readonly added?: readonly EnteredGroup[];
  readonly reverses?: string;
  readonly answered?: JudgedGroup;
  readonly cylinder?: CylinderRegister;
  readonly unit?: UnitRegister;
}

/**
 * The whole log in memory, posted to as the server posts: judged in order on the state as it stands, the whole timeline
 * replayed for what arrives late, is reversed, revised or answered, and the change alone posted. It is what the tests
 * hold the judge against; months are calendar months in UTC.
 */
export class LedgerBook {
  readonly entries: BookEntry[] = [];
  readonly groups = new Map<string, JudgedGroup>();
  private readonly cylinders = new Map<string, CylinderRegister>();
  private readonly units = new Map<string, UnitRegister>();
  private cylinderStates = new Map<string, Judged<CylinderState>>();
  private unitStates = new Map<string, Judged<UnitState>>();
  private balances: Balances = new Map();
  private firstOpenMonth = '0000-00';
  private sequence = 0;

  registerCylinder(register: CylinderRegister): void {
    this.cylinders.set(register.cylinderId, register);
  }
  registerUnit(register: UnitRegister): void {
    this.units.set(register.unitId, register);
  }
  closeMonth(month: string): void {
    this.firstOpenMonth = monthAfter(month);
  }

  post(group: Omit<EnteredGroup, 'sequence'>): Outcome<readonly BookEntry[]> {
    return this.apply({ recordId: group.id, added: [this.numbered(group)] });
  }
  reverse(
    groupId: string,
    recordId: string,
    replacement?: Omit<EnteredGroup, 'sequence'>,
  ): Outcome<readonly BookEntry[]> {
    const added = replacement ? [this.numbered(replacement)] : [];
    return this.apply({ recordId, reverses: groupId, added });
  }
  answer(groupId: string, recordId: string, statement: JudgedStatement): Outcome<readonly BookEntry[]> {
    const group = this.requireGroup(groupId);
    const others = group.statements.filter(({ id }) => id !== statement.id);
    return this.apply({ recordId, answered: { ...group, statements: [...others, statement] } });
  }
  reviseCylinder(register: CylinderRegister, recordId: string): Outcome<readonly BookEntry[]> {
    return this.apply({ recordId, cylinder: register });
  }
  reviseUnit(register: UnitRegister, recordId: string): Outcome<readonly BookEntry[]> {
    return this.apply({ recordId, unit: register });
  }

  balanceOf(place: Place): MassByRefrigerant {
    return this.balances.get(placeKey(place))?.book ?? {};
  }
  allBalances(): { place: Place; book: MassByRefrigerant }[] {
    return [...this.balances.values()];
  }
  cylinderState(cylinderId: string): CylinderState {
    return this.cylinderStates.get(cylinderId)?.state ?? emptyCylinderState;
  }
  unitState(unitId: string): UnitState {
    return this.unitStates.get(unitId)?.state ?? emptyUnitState;
  }
  unitRegister(unitId: string): UnitRegister {
    const register = this.units.get(unitId);
    if (!register) throw new RangeError(`Unit ${unitId} is not registered`);
    return register;
  }
  openFlags(): LedgerFlag[] {
    const ofGroups = [...this.groups.values()].filter((group) => !group.reversed).flatMap(groupFlags);
    const ofPlaces = [...this.cylinderStates.values(), ...this.unitStates.values()].flatMap(({ flags }) => flags);
    return [...ofPlaces, ...ofGroups];
  }

  private numbered(group: Omit<EnteredGroup, 'sequence'>): EnteredGroup {
    this.sequence += 1;
    return { ...group, sequence: this.sequence };
  }
  private requireGroup(groupId: string): JudgedGroup {
    const group = this.groups.get(groupId);
    if (!group) throw new RangeError(`Group ${groupId} was not posted`);
    return group;
  }

  private apply(posting: Posting): Outcome<readonly BookEntry[]> {
    const groups = new Map(this.groups);
    const reversed = posting.reverses === undefined ? null : this.requireGroup(posting.reverses);
    if (reversed) groups.set(reversed.id, { ...reversed, reversed: true });
    if (posting.answered) groups.set(posting.answered.id, posting.answered);
    const added: JudgedGroup[] = [];
    for (const entered of posting.added ?? []) {
      const split = this.withRefrigerants(entered, groups);
      if (!split.ok) return split;
      groups.set(split.value.id, split.value);
      added.push(split.value);
    }
    const touched = touchedPlaces(posting, [...added, ...(reversed ? [reversed] : [])]);
    const entered = [
      ...added.flatMap((group) => group.masses.map((mass) => enteredEntry(group, mass, this.firstOpenMonth))),
      ...(reversed
        ? reversed.masses.map((mass) => reversalEntry(posting.recordId, reversed, mass, this.firstOpenMonth))
        : []),
    ];
    const cylinders = touched.cylinderIds.map((id) => [id, this.judgeCylinder(id, posting, added, groups)] as const);
    const units = touched.unitIds.map((id) => [id, this.judgeUnit(id, posting, added, groups)] as const);
    const changes = [...cylinders, ...units].flatMap(([, judged]) => judged.changes);
    const entries = [
      ...entered,
      ...changes.map((change) => serverEntry(posting.recordId, change, groups, this.firstOpenMonth)),
    ];
    const balances = withEntries(this.balances, entries);
    const knownUnits = new Map(units.map(([id, { state }]) => [id, state.known]));
    const refusals = this.floorRefusals(touched, balances, knownUnits, posting.added?.[0]?.masses ?? []);
    if (refusals.length > 0) return refused(...refusals);

    this.groups.clear();
    for (const [id, group] of groups) this.groups.set(id, group);
    if (posting.cylinder) this.registerCylinder(posting.cylinder);
    if (posting.unit) this.registerUnit(posting.unit);
    for (const [id, judged] of cylinders) this.cylinderStates.set(id, judged);
    for (const [id, judged] of units) this.unitStates.set(id, judged);
    this.balances = balances;
    this.entries.push(...entries);
    return done(entries);
  }

  /** Masses out of a mixed cylinder, divided by its book of that moment. */
  private withRefrigerants(entered: EnteredGroup, groups: Map<string, JudgedGroup>): Outcome<JudgedGroup> {
    const masses: JudgedMass[] = [];
    for (const [index, mass] of entered.masses.entries()) {
      const parts = splitMass(mass, mass.from.place === 'cylinder' ? this.bookAt(mass.from.id, entered, groups) : {});
      if (!parts) return refused({ code: 'refrigerantRequired', path: `/entries/${index}/refrigerant` });
      masses.push(...parts);
    }
    return done({ ...entered, masses });
  }
  private bookAt(cylinderId: string, entered: EnteredGroup, groups: Map<string, JudgedGroup>): MassByRefrigerant {
    const register = this.requireCylinder(cylinderId);
    const earlier = [...groups.values()].filter((group) => compareInTimeline(group, entered) < 0);
    return cylinderBookBeforeMasses(register, replayCylinder(register, earlier).state, entered);
  }
  private requireCylinder(cylinderId: string): CylinderRegister {
    const register = this.cylinders.get(cylinderId);
    if (!register) throw new RangeError(`Cylinder ${cylinderId} is not registered`);
    return register;
  }

  private judgeCylinder(id: string, posting: Posting, added: JudgedGroup[], groups: Map<string, JudgedGroup>) {
    const register = posting.cylinder?.cylinderId === id ? posting.cylinder : this.requireCylinder(id);
    const mine = added.filter((group) => touchesCylinder(group, id));
    const before = this.cylinderStates.get(id) ?? { state: emptyCylinderState, flags: [] };
    const state = cylinderFromSnapshot(toSnapshot(before.state));
    const [only, ...others] = mine;
    if (isPlain(posting) && state && only && others.length === 0 && isInOrder(state, only)) {
      const step = judgeCylinderStep(register, state, only);
      const changes = changesAgainst([], step.added, new Set([only.id]));
      return { state: step.state, flags: flagsAfterStep(before.flags, step), changes };
    }
    const replay = replayCylinder(register, [...groups.values()]);
    const changes = changesAgainst(this.postedFor(cylinderPlace(id)), replay.added, postingIds(added));
    return { state: replay.state, flags: flagsAfterStep([], replay), changes };
  }
  private judgeUnit(id: string, posting: Posting, added: JudgedGroup[], groups: Map<string, JudgedGroup>) {
    const register = posting.unit?.unitId === id ? posting.unit : this.unitRegister(id);
    const mine = added.filter((group) => touchesUnit(group, id));
    const before = this.unitStates.get(id) ?? { state: emptyUnitState, flags: [] };
    const state = unitFromSnapshot(toSnapshot(before.state));
    const [only, ...others] = mine;
    if (isPlain(posting) && state && only && others.length === 0 && isInOrder(state, only)) {
      const step = judgeUnitStep(register, state, only);
      const changes = changesAgainst([], step.added, new Set([only.id]));
      return { state: step.state, flags: flagsAfterStep(before.flags, step), changes };
    }
    const replay = replayUnit(register, [...groups.values()]);
    const changes = changesAgainst(this.postedFor(unitPlace(id)), replay.added, postingIds(added));
    return { state: replay.state, flags: flagsAfterStep([], replay), changes };
  }

  private postedFor(place: Place) {
    const key = placeKey(place);
    return this.entries.flatMap((entry) =>
      entry.judgedPlace && placeKey(entry.judgedPlace) === key
        ? [postedAsAdded({ ...entry, judgedPlace: entry.judgedPlace })]
        : [],
    );
  }

  private floorRefusals(
    touched: { cylinderIds: readonly string[]; unitIds: readonly string[] },
    balances: Balances,
    knownUnits: Map<string, boolean>,
    masses: EnteredGroup['masses'],
  ): Refusal[] {
    const places = [...touched.cylinderIds.map(cylinderPlace), ...touched.unitIds.map(unitPlace)];
    return finalBalanceRefusals(
      places.flatMap((place) => {
        const book = balances.get(placeKey(place))?.book ?? {};
        const known = place.place !== 'unit' || knownUnits.get(place.id) === true;
        return refrigerantsOf(book).map((refrigerant) => {
          return { place, refrigerant, massMicrograms: massOf(book, refrigerant), known };
        });
      }),
      masses,
    );
  }
}

/** Nothing but new groups: the states as they stand can be stepped on. */
const isPlain = (posting: Posting): boolean =>
  posting.reverses === undefined && !posting.answered && !posting.cylinder && !posting.unit;

const postingIds = (added: readonly JudgedGroup[]): Set<string> => new Set(added.map(({ id }) => id));

function touchedPlaces(posting: Posting, groups: readonly JudgedGroup[]) {
  const judged = [...groups, ...(posting.answered ? [posting.answered] : [])].map(placesJudged);
  const cylinderIds = new Set(judged.flatMap((places) => places.cylinderIds));
  const unitIds = new Set(judged.flatMap((places) => places.unitIds));
  if (posting.cylinder) cylinderIds.add(posting.cylinder.cylinderId);
  if (posting.unit) unitIds.add(posting.unit.unitId);
  return { cylinderIds: [...cylinderIds], unitIds: [...unitIds] };
}
