import { verdictOf } from '../scale/reconcile.ts';
import { type AddedEntry, netted } from './added-entry.ts';
import { type BookBasis, basisOn, type ScaleReading, setsBook, uncertaintyOf, withIssues } from './book-basis.ts';
import { issuesOf, scaleReading } from './cylinder-issues.ts';
import { cylinderStandingFlags } from './cylinder-standing.ts';
import { type CylinderRegister, type CylinderState, emptyCylinderState, tareAt } from './cylinder-state.ts';
import type { FlagCode, LedgerFlag } from './flag.ts';
import {
  type EnteredGroup,
  type JudgedGroup,
  type JudgedReading,
  timelineOf,
  touchesCylinder,
} from './judged-group.ts';
import { openStartsAfter, stepReadingOf, weighedGroupOf } from './judged-weighing.ts';
import {
  type MassByRefrigerant,
  massOf,
  plus,
  plusAll,
  refrigerantsOf,
  splitByBook,
  totalOf,
} from './mass-by-refrigerant.ts';
import { cylinderPlace, type PlaceKind, type SinglePlaceKind, samePlace, singlePlace } from './place.ts';
import { grossVarianceG2, isBeyond } from './scale.ts';

export interface CylinderStep {
  readonly state: CylinderState;
  readonly added: readonly AddedEntry[];
  /** Judgements of this group; what merely stands is in `state.standing`. */
  readonly flags: readonly LedgerFlag[];
}

/** What a group brings into the cylinder and takes out of it, by its entered masses. */
interface Flow {
  /** By refrigerant, without what leaves its refrigerant open. */
  readonly net: MassByRefrigerant;
  readonly broughtMicrograms: bigint;
  readonly takenMicrograms: bigint;
  readonly moved: string | null;
}

function flowOf(group: EnteredGroup, cylinderId: string): Flow {
  let net: MassByRefrigerant = {};
  let broughtMicrograms = 0n;
  let takenMicrograms = 0n;
  let moved: string | null = null;
  for (const { from, to, refrigerant, massMicrograms } of group.masses) {
    const goesIn = to.place === 'cylinder' && to.id === cylinderId;
    const goesOut = from.place === 'cylinder' && from.id === cylinderId;
    if (goesIn) broughtMicrograms += massMicrograms;
    if (goesOut) takenMicrograms += massMicrograms;
    if (refrigerant === null || goesIn === goesOut) continue;
    net = plus(net, refrigerant, goesIn ? massMicrograms : -massMicrograms);
    moved ??= refrigerant;
  }
  return { net, broughtMicrograms, takenMicrograms, moved };
}

/**
 * One group in order. Gross readings are statements of what the cylinder holds. Within a group a `before` reading is
 * judged first, then the masses, then `after`; an `only` reading stands before the masses if the group takes something
 * out and brings nothing in, else after them. A zeroed reading states nothing.
 */
export function judgeCylinderStep(register: CylinderRegister, state: CylinderState, group: JudgedGroup): CylinderStep {
  const { cylinderId } = register;
  const judging = new CylinderJudging(register, state, group);
  const flow = flowOf(group, cylinderId);
  const [earlier, later] = readingsInOrder(group, cylinderId, flow);
  for (const reading of earlier) judging.judgeReading(reading, flow);
  judging.applyMasses(flow);
  for (const reading of later) judging.judgeReading(reading, { ...flow, net: {} });
  return judging.finish();
}

function readingsInOrder(group: EnteredGroup, cylinderId: string, flow: Flow): [JudgedReading[], JudgedReading[]] {
  const gross = group.readings.filter((reading) => reading.cylinderId === cylinderId && reading.mode === 'gross');
  const onlyTakes = flow.takenMicrograms > 0n && flow.broughtMicrograms === 0n;
  const isEarlier = (reading: JudgedReading) => reading.moment === 'before' || (reading.moment === 'only' && onlyTakes);
  const order = ['before', 'only', 'after'];
  const inOrder = gross.toSorted((a, b) => order.indexOf(a.moment) - order.indexOf(b.moment));
  return [inOrder.filter(isEarlier), inOrder.filter((reading) => !isEarlier(reading))];
}

class CylinderJudging {
  private book: MassByRefrigerant;
  private opened: boolean;
  private boughtUnweighed: boolean;
  private missing: bigint;
  private basis: BookBasis;
  private readonly added: AddedEntry[] = [];
  private readonly found = new Map<FlagCode, bigint>();
  private readonly register: CylinderRegister;
  private readonly before: CylinderState;
  private readonly group: EnteredGroup;

  constructor(register: CylinderRegister, state: CylinderState, group: EnteredGroup) {
    this.register = register;
    this.before = state;
    this.group = group;
    this.book = state.book;
    this.opened = state.opened;
    this.basis = state.basis;
    this.boughtUnweighed = state.boughtUnweighed;
    this.missing = state.missingMicrograms;
  }

  /**
   * The whole gap is posted if it is beyond the scales for one reading against the book, or if the group would take the
   * book below zero: a rule of two readings, so that the book follows the scale closely. What is then said of it is
   * another question: by everything that the book rests on, as in a statement and the books.
   */
  judgeReading(reading: JudgedReading, flow: Flow): void {
    const stated = this.contentStated(reading);
    const gap = stated - totalOf(this.book);
    const variance = grossVarianceG2(reading.scale, stated);
    const end = scaleReading(stepReadingOf(this.group, reading));
    let posted = 0n;
    const wouldFall = Object.values(plusAll(this.book, flow.net)).some((mass) => mass < 0n);
    if (isBeyond(gap, variance) || wouldFall) {
      posted = gap;
      this.postGap(stated, flow);
      if (this.opened && isBeyond(gap, variance)) this.flagGap(gap, end, stated);
    }
    if (setsBook(posted, gap, this.basis.start === null)) this.basis = basisOn(end);
    this.opened = true;
    this.boughtUnweighed = false;
  }

  private flagGap(gap: bigint, end: ScaleReading, stated: bigint): void {
    const { standardG } = uncertaintyOf(this.basis, end, Number(stated) / 1e6);
    const verdict = verdictOf(Math.abs(Number(gap)) / 1e6, standardG);
    if (verdict === 'withinScales') return;
    const difference = verdict === 'notExplained' ? 'cylinderNotExplained' : 'cylinderLookAgain';
    this.flag(this.boughtUnweighed ? 'supplierShortFill' : difference, gap);
  }

  /**
   * The hose counts where it was full when the scale was read before the masses: at the end the group's own entries say
   * what became of it. A cylinder cannot hold less than nothing: a gross reading below the tare states zero.
   */
  private contentStated(reading: JudgedReading): bigint {
    const hose = reading.moment === 'after' ? 0n : reading.hoseFullMicrograms;
    const content = reading.grossMicrograms - tareAt(this.register, this.group.occurredAt) + hose;
    if (content >= 0n) return content;
    if (isBeyond(content, grossVarianceG2(reading.scale, 0n))) this.flag('readingBelowTare', content);
    return 0n;
  }

  private postGap(stated: bigint, flow: Flow): void {
    const counter: SinglePlaceKind = !this.opened
      ? 'opening'
      : this.boughtUnweighed
        ? 'supplierShortFill'
        : 'cylinderDifference';
    const held = refrigerantsOf(this.book);
    const fallback = (held.length === 1 ? held[0] : null) ?? flow.moved ?? this.register.refrigerant;
    const target = contentByRefrigerant(this.book, stated, flow.net, fallback);
    for (const refrigerant of new Set([...refrigerantsOf(target), ...held])) {
      const mass = massOf(target, refrigerant) - massOf(this.book, refrigerant);
      if (mass === 0n) continue;
      this.added.push({
        groupId: this.group.id,
        judgedPlace: cylinderPlace(this.register.cylinderId),
        place: cylinderPlace(this.register.cylinderId),
        counterPlace: singlePlace(counter),
        refrigerant,
        massMicrograms: mass,
        atLeast: false,
        takenBack: false,
      });
    }
    this.book = target;
  }

  applyMasses(flow: Flow): void {
    const { cylinderId } = this.register;
    if (flow.takenMicrograms > 0n && !this.opened) this.flag('lateBeforeOpening', flow.takenMicrograms);
    this.book = plusAll(this.book, flow.net);
    const starts = new Map(Object.entries(this.before.openStarts));
    this.basis = withIssues(this.basis, issuesOf(weighedGroupOf(this.group, cylinderId), starts));
    for (const { from, to, massMicrograms } of this.group.masses) {
      const goesIn = to.place === 'cylinder' && to.id === cylinderId;
      const goesOut = from.place === 'cylinder' && from.id === cylinderId;
      if (goesIn && from.place === 'supplier') this.boughtUnweighed = true;
      if (goesIn && from.place === 'missing') this.missing -= massMicrograms;
      if (goesOut && to.place === 'missing') this.missing += massMicrograms;
      if (goesIn && this.register.nonRefillable && isFill(from.place)) {
        this.flag('nonRefillableRefilled', massMicrograms);
      }
    }
    if (flow.broughtMicrograms > 0n) this.opened = true;
  }

  finish(): CylinderStep {
    const place = cylinderPlace(this.register.cylinderId);
    const flags = [...this.found]
      .filter(([, massMicrograms]) => massMicrograms !== 0n)
      .map(([code, massMicrograms]): LedgerFlag => {
        return { code, place, groupId: this.group.id, refrigerant: null, massMicrograms, standing: false, figures: {} };
      });
    const stands = { book: this.book, missingMicrograms: this.missing, filledAt: this.filledAtNow() };
    const state: CylinderState = {
      lastPosition: { occurredAt: this.group.occurredAt, sequence: this.group.sequence },
      opened: this.opened,
      basis: this.basis,
      openStarts: openStartsAfter(this.before.openStarts, this.group, this.register.cylinderId),
      boughtUnweighed: this.boughtUnweighed,
      ...stands,
      standing: cylinderStandingFlags(this.register, this.before, stands, this.group.id),
    };
    return { state, added: netted(this.added), flags };
  }

  /** When something was last put in, by this group or before it, as long as anything is left of it. */
  private filledAtNow(): number | null {
    if (totalOf(this.book) <= 0n) return null;
    const place = cylinderPlace(this.register.cylinderId);
    const fills = this.group.masses.some(
      ({ from, to }) => samePlace(to, place) && fillsAgain(from.place, this.before.opened),
    );
    return fills ? this.group.occurredAt : this.before.filledAt;
  }

  bookNow(): MassByRefrigerant {
    return this.book;
  }

  /** One flag of a kind for a group: two readings that cancel leave none. */
  private flag(code: FlagCode, massMicrograms: bigint): void {
    this.found.set(code, (this.found.get(code) ?? 0n) + massMicrograms);
  }
}

/** What a cylinder comes with, or is found again with. Anything else is put into it here: into a non-refillable one, a refill. */
const COMES_WITH: ReadonlySet<string> = new Set(['supplier', 'opening', 'missing']);
export const isFill = (from: PlaceKind): boolean => !COMES_WITH.has(from);
/** Filled on a day that is known: a supplier's first filling may be older than its pick-up, a refill of a known cylinder is not. */
export const fillsAgain = (from: PlaceKind, opened: boolean): boolean =>
  isFill(from) || (from === 'supplier' && opened);

/**
 * What a reading of the whole says of each refrigerant: split by the book. Where the group takes out more of one that
 * the book holds than its share, the reading is trusted with it as far as it reaches: what has left was in the cylinder.
 */
export function contentByRefrigerant(
  book: MassByRefrigerant,
  stated: bigint,
  net: MassByRefrigerant,
  fallbackRefrigerant: string,
): MassByRefrigerant {
  const shares = splitByBook(book, stated) ?? (stated === 0n ? {} : { [fallbackRefrigerant]: stated });
  const leaves: MassByRefrigerant = Object.fromEntries(
    Object.entries(net)
      .filter(([refrigerant, mass]) => mass < 0n && massOf(book, refrigerant) > 0n)
      .map(([refrigerant, mass]) => [refrigerant, -mass]),
  );
  const short = refrigerantsOf(leaves).some((refrigerant) => massOf(shares, refrigerant) < massOf(leaves, refrigerant));
  const rest = stated - totalOf(leaves);
  if (!short || rest < 0n) return shares;
  const beyond: MassByRefrigerant = Object.fromEntries(
    refrigerantsOf(shares)
      .map((refrigerant) => [refrigerant, massOf(shares, refrigerant) - massOf(leaves, refrigerant)] as const)
      .filter(([, mass]) => mass > 0n),
  );
  return plusAll(leaves, splitByBook(beyond, rest) ?? {});
}

/** The book from which an open refrigerant of a mixed cylinder is split: after the readings that stand before the masses. */
export function cylinderBookBeforeMasses(
  register: CylinderRegister,
  state: CylinderState,
  group: EnteredGroup,
): MassByRefrigerant {
  const judging = new CylinderJudging(register, state, group);
  const flow = flowOf(group, register.cylinderId);
  const [earlier] = readingsInOrder(group, register.cylinderId, flow);
  for (const reading of earlier) judging.judgeReading(reading, flow);
  return judging.bookNow();
}

/** The whole timeline from nothing: what its server-made entries and open flags have to be. */
export function replayCylinder(register: CylinderRegister, groups: readonly JudgedGroup[]): CylinderStep {
  let state = emptyCylinderState;
  const added: AddedEntry[] = [];
  const flags: LedgerFlag[] = [];
  for (const group of timelineOf(groups)) {
    if (!touchesCylinder(group, register.cylinderId)) continue;
    const step = judgeCylinderStep(register, state, group);
    state = step.state;
    added.push(...step.added);
    flags.push(...step.flags);
  }
  return { state, added, flags };
}
