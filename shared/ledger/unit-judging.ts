import { type AddedEntry, netted } from './added-entry.ts';
import type { FlagCode, LedgerFlag } from './flag.ts';
import type { JudgedGroup } from './judged-group.ts';
import { type MassByRefrigerant, massOf, plus, plusAll, refrigerantsOf, smaller } from './mass-by-refrigerant.ts';
import { atmosphere, type Place, singlePlace, unitPlace } from './place.ts';
import { isBeyond } from './scale.ts';
import type { InferredLoss, UnitState } from './unit-state.ts';

/** The books of one unit while one group is judged: what is posted moves the book at once. */
export class UnitJudging {
  known: boolean;
  book: MassByRefrigerant;
  varianceG2: number;
  losses: InferredLoss[];
  readonly flags: LedgerFlag[] = [];
  private readonly added: AddedEntry[] = [];
  private readonly unitId: string;
  private readonly group: JudgedGroup;

  constructor(unitId: string, state: UnitState, group: JudgedGroup) {
    this.unitId = unitId;
    this.group = group;
    this.known = state.known;
    this.book = state.book;
    this.varianceG2 = state.varianceG2;
    this.losses = [...state.losses];
  }

  addedEntries(): AddedEntry[] {
    return netted(this.added);
  }

  /** The masses that were entered: they are in the log already. */
  move(masses: MassByRefrigerant): void {
    this.book = plusAll(this.book, masses);
  }

  isBeyond(massMicrograms: bigint): boolean {
    return isBeyond(massMicrograms, this.varianceG2);
  }

  flag(
    code: FlagCode,
    refrigerant: string | null,
    massMicrograms: bigint | null,
    figures: Record<string, bigint> = {},
  ): void {
    const place = unitPlace(this.unitId);
    this.flags.push({
      code,
      place,
      groupId: this.group.id,
      refrigerant,
      massMicrograms,
      standing: false,
      figures,
    });
  }

  /** A mass above zero goes from `counterPlace` into the unit, below zero out of it. */
  post(
    refrigerant: string,
    massMicrograms: bigint,
    counterPlace: Place,
    marks: { atLeast?: boolean; takenBack?: boolean } = {},
  ): void {
    if (massMicrograms === 0n) return;
    this.book = plus(this.book, refrigerant, massMicrograms);
    this.push(unitPlace(this.unitId), counterPlace, refrigerant, massMicrograms, marks);
  }

  /** What the unit had lost before it came into our books: it never was in its book. */
  postLossBeforeOurCare(refrigerant: string, massMicrograms: bigint): void {
    this.push(singlePlace('opening'), atmosphere('beforeOurCare'), refrigerant, -massMicrograms, {});
    this.remember(refrigerant, massMicrograms, 'beforeOurCare', false);
  }

  postInferredLoss(refrigerant: string, massMicrograms: bigint, atLeast: boolean): void {
    this.post(refrigerant, -massMicrograms, atmosphere('inferred'), { atLeast });
    this.remember(refrigerant, massMicrograms, 'inferred', atLeast);
  }

  /**
   * Losses inferred for this refrigerant since the unit was last empty come back into the book, newest first.
   *
   * @returns what they did not cover.
   */
  takeBack(refrigerant: string, massMicrograms: bigint): bigint {
    let left = massMicrograms;
    const figures = { inferredMicrograms: 0n, beforeOurCareMicrograms: 0n };
    for (const loss of this.losses.toReversed()) {
      if (loss.refrigerant !== refrigerant || left === 0n) continue;
      const back = smaller(loss.remainingMicrograms, left);
      left -= back;
      this.post(refrigerant, back, atmosphere(loss.as), { atLeast: loss.atLeast, takenBack: true });
      figures[`${loss.as}Micrograms`] += back;
      this.losses = this.losses
        .map((one) => (one === loss ? { ...loss, remainingMicrograms: loss.remainingMicrograms - back } : one))
        .filter(({ remainingMicrograms }) => remainingMicrograms > 0n);
    }
    if (left < massMicrograms) this.flag('lossTakenBack', refrigerant, massMicrograms - left, figures);
    return left;
  }

  /** More came out of a known book than it held: that is settled to zero. */
  settleSurplus(): void {
    let settled = false;
    for (const refrigerant of refrigerantsOf(this.book)) {
      const surplus = -massOf(this.book, refrigerant);
      if (surplus <= 0n) continue;
      const left = this.isBeyond(surplus) ? this.takeBack(refrigerant, surplus) : surplus;
      this.post(refrigerant, left, singlePlace('unitDifference'));
      if (this.isBeyond(left)) this.flag('moreCameOutThanWentIn', refrigerant, left);
      settled = true;
    }
    if (settled) this.varianceG2 = 0;
  }

  private remember(refrigerant: string, mass: bigint, as: InferredLoss['as'], atLeast: boolean): void {
    this.losses.push({ groupId: this.group.id, refrigerant, as, remainingMicrograms: mass, atLeast });
  }

  private push(
    place: Place,
    counterPlace: Place,
    refrigerant: string,
    massMicrograms: bigint,
    marks: { atLeast?: boolean; takenBack?: boolean },
  ): void {
    this.added.push({
      groupId: this.group.id,
      judgedPlace: unitPlace(this.unitId),
      place,
      counterPlace,
      refrigerant,
      massMicrograms,
      atLeast: marks.atLeast ?? false,
      takenBack: marks.takenBack ?? false,
    });
  }
}
