import { cylinderLimit } from '../../shared/cylinder-fill/cylinder-limits.ts';
import { isRetestOverdue } from '../../shared/cylinders/retest.ts';
import { gramsOfMicrograms, microgramsOfTyped } from '../../shared/units/mass.ts';
import {
  type PurchaseOptions,
  postGivenUp,
  postPurchase,
  postReclaim,
  registerCylinder,
  type ShopFacts,
} from './cylinder-moves.ts';
import type { CylinderPlan, StockCylinder } from './cylinder-plan.ts';
import { gramsOf } from './demo-scale.ts';
import { laterBy, type Moment, minutesAfter } from './diary.ts';
import { grossReading } from './group-parts.ts';

/** What is kept in a cylinder when somebody looks for one that holds enough. */
const SPARE_G = 150;
/** Recovery goes into another cylinder before this much of the limit is reached. */
export const CAREFUL_SHARE = 0.9;
const BUSY_MS = 9 * 3600_000;

export interface Supply {
  cylinder: StockCylinder;
  massG: number;
}

/** The cylinders of a firm: bought, handed out, weighed, filled from units, sent off. Keeps what is really in them. */
export class Shop {
  readonly cylinders: StockCylinder[];
  readonly facts: ShopFacts;
  private invoices = 20_411;

  constructor(facts: ShopFacts, plans: readonly CylinderPlan[], idsFrom: Date) {
    this.facts = facts;
    this.cylinders = plans.map((plan) => ({
      ...plan,
      id: facts.diary.id(idsFrom),
      tareG: gramsOf(plan.tare),
      contentG: 0,
      limitG: limitOf(plan),
      heldBy: null,
      state: 'planned',
      busyUntil: 0,
      isSetAside: false,
    }));
  }

  require(tag: string): StockCylinder {
    const found = this.cylinders.find((cylinder) => cylinder.tag === tag);
    if (!found) throw new Error(`no cylinder ${tag}`);
    return found;
  }

  /** What is in house on the first day; the first weighing opens the book of each cylinder. */
  open(moment: Moment): void {
    let minutes = 0;
    for (const cylinder of this.cylinders) {
      if (!cylinder.atStart) continue;
      const { heldBy, content } = cylinder.atStart;
      this.bringIn(laterBy(moment, minutes), cylinder, heldBy);
      cylinder.contentG = gramsOf(content);
      this.weigh(laterBy(moment, minutes + 1), [cylinder], this.facts.shopScale, 'opening');
      minutes += 2;
    }
  }

  /**
   * Where so much comes from: the smallest cylinder on the person's van that holds enough; else what is left in one that
   * nearly does, and then a fuller one from the shop, a colleague or the supplier's counter.
   */
  supplyFor(moment: Moment, refrigerant: string, needG: number): Supply[] {
    const onVan = this.onVanOf(moment, refrigerant);
    const enough = onVan.find(({ contentG }) => contentG >= needG + SPARE_G);
    if (enough) return [{ cylinder: taken(enough, moment), massG: needG }];
    const rest = onVan.findLast(({ contentG }) => contentG >= Math.max(SPARE_G * 4, 0.35 * needG));
    const fromRest = rest ? rest.contentG - SPARE_G / 2 : 0;
    const next = { cylinder: this.fetch(moment, refrigerant, needG - fromRest), massG: needG - fromRest };
    return rest ? [{ cylinder: taken(rest, moment), massG: fromRest }, next] : [next];
  }

  /** As `supplyFor`, from one cylinder alone. */
  cylinderFor(moment: Moment, refrigerant: string, needG: number): StockCylinder {
    const enough = this.onVanOf(moment, refrigerant).find(({ contentG }) => contentG >= needG + SPARE_G);
    return enough ? taken(enough, moment) : this.fetch(moment, refrigerant, needG);
  }

  private onVanOf({ by }: Moment, refrigerant: string): StockCylinder[] {
    const holder = this.facts.holderOf(by);
    return this.holding(refrigerant, 'supply')
      .filter(({ heldBy }) => heldBy === holder)
      .toSorted((a, b) => a.contentG - b.contentG);
  }

  private fetch(moment: Moment, refrigerant: string, needG: number): StockCylinder {
    const holder = this.facts.holderOf(moment.by);
    const enough = this.holding(refrigerant, 'supply')
      .filter(({ heldBy, contentG }) => heldBy !== holder && contentG >= needG + SPARE_G)
      .toSorted((a, b) => a.contentG - b.contentG);
    const found =
      enough.find(({ heldBy }) => heldBy === null) ??
      enough.find(({ busyUntil }) => busyUntil <= moment.at.getTime() && refrigerant !== this.facts.onEveryVan);
    if (!found) return taken(this.buy(laterBy(moment, -40), refrigerant, holder), moment);
    this.handTo(laterBy(moment, -25), found, holder);
    return taken(found, moment);
  }

  /** A recovery cylinder with room, or null: then the work has to wait. It is taken along until the end of the day. */
  recoveryCylinderFor(moment: Moment, refrigerant: string, needG: number): StockCylinder | null {
    const holder = this.facts.holderOf(moment.by);
    const fit = this.withRoom(moment, refrigerant, needG);
    const found = fit.find(({ heldBy }) => heldBy === holder) ?? fit.find(({ heldBy }) => heldBy === null) ?? fit[0];
    if (!found) return null;
    if (found.heldBy !== holder) this.handTo(laterBy(moment, -25), found, holder);
    return taken(found, moment);
  }

  private withRoom({ at }: Moment, refrigerant: string, needG: number): StockCylinder[] {
    return this.holding(refrigerant, 'recovery')
      .filter(({ busyUntil }) => busyUntil <= at.getTime())
      .filter(
        ({ retestInDays }) =>
          retestInDays === undefined || !isRetestOverdue(this.facts.dayIn(retestInDays), at.toISOString().slice(0, 10)),
      )
      .filter(({ limitG, contentG }) => limitG === null || contentG + needG <= CAREFUL_SHARE * limitG);
  }

  handTo(moment: Moment, cylinder: StockCylinder, heldBy: string | null): void {
    cylinder.heldBy = heldBy;
    this.facts.diary.write(moment, { call: 'updateCylinder', id: cylinder.id, request: { heldBy } });
  }

  /** Readings alone: they move nothing unless they contradict the book. */
  weigh(
    moment: Moment,
    cylinders: readonly StockCylinder[],
    scale = this.facts.scaleOf(moment.by),
    kind: 'weighing' | 'opening' = 'weighing',
  ): string {
    const readings = cylinders.map((cylinder, index) =>
      grossReading(this.facts.diary, minutesAfter(moment.at, index), { cylinder, scale, moment: 'only' }),
    );
    return this.facts.diary.post(moment, { kind, readings }, cylinders.length + 1);
  }

  /** A new cylinder, or one of the rented ones filled again, if need be in exchange for the emptiest. */
  buy(moment: Moment, refrigerant: string, heldBy: string | null, options: PurchaseOptions = {}): StockCylinder {
    const sold = this.cylinders.filter(
      (one) => one.filled !== null && one.refrigerant === refrigerant && !one.isSetAside,
    );
    const cylinder =
      options.cylinder ??
      sold.find(({ state }) => state === 'planned') ??
      sold.find(({ state }) => state === 'away') ??
      this.swapped(laterBy(moment, -20), sold);
    if (!cylinder?.filled) throw new Error(`no cylinder of ${refrigerant} is left to buy`);
    if (cylinder.state === 'planned') this.bringIn(moment, cylinder, heldBy);
    else this.handTo(moment, cylinder, heldBy);
    cylinder.state = 'here';
    cylinder.contentG += gramsOf(cylinder.filled) - (options.shortG ?? 0);
    cylinder.tareG += gramsOf({ value: String(options.tareErrorLb ?? 0), unit: 'lb' });
    this.invoices += this.facts.draws.whole(3, 90);
    const isWeighed = options.weighed ?? false;
    const purchase = { cylinder, mass: cylinder.filled, invoice: this.invoices, isWeighed };
    postPurchase(this.facts, laterBy(moment, 3), purchase);
    return cylinder;
  }

  /** A rented cylinder with little in it goes back over the counter at once. */
  private swapped(moment: Moment, sold: readonly StockCylinder[]): StockCylinder | undefined {
    const [emptiest] = sold
      .filter(({ kind, state }) => kind === 'refillable' && state === 'here')
      .filter(({ busyUntil }) => busyUntil <= moment.at.getTime())
      .toSorted((a, b) => a.contentG - b.contentG);
    if (emptiest) this.giveUp(moment, emptiest);
    return emptiest;
  }

  /** An empty one-way cylinder leaves its rest in one for recovery (if one is at hand); a rented one goes back. */
  giveUp(moment: Moment, cylinder: StockCylinder): void {
    const isReturned = cylinder.kind === 'refillable';
    const into = isReturned ? null : (this.withRoom(moment, cylinder.refrigerant, cylinder.contentG)[0] ?? null);
    if (!isReturned && !into) return;
    postGivenUp(this.facts, moment, cylinder, into);
    this.handTo(laterBy(moment, 13), cylinder, null);
    cylinder.state = isReturned ? 'away' : 'spent';
  }

  /** Off to the reclaimer, and back in the shop empty. `certifiedAt` null: the certificate has not come yet. */
  reclaim(moment: Moment, cylinder: StockCylinder, certifiedAt: Date | null): void {
    postReclaim(this.facts, moment, cylinder, certifiedAt);
    this.handTo(laterBy(moment, 6), cylinder, null);
  }

  /** Cylinders in use that hold this refrigerant. */
  holding(refrigerant: string, which: 'supply' | 'recovery'): StockCylinder[] {
    return this.cylinders.filter(
      (cylinder) =>
        cylinder.refrigerant === refrigerant &&
        (cylinder.kind === 'recovery') === (which === 'recovery') &&
        cylinder.state === 'here' &&
        !cylinder.isSetAside,
    );
  }

  private bringIn(moment: Moment, cylinder: StockCylinder, heldBy: string | null): void {
    cylinder.heldBy = heldBy;
    cylinder.state = 'here';
    registerCylinder(this.facts, moment, cylinder);
  }
}

/** Nobody else reaches for it that day. */
function taken(cylinder: StockCylinder, { at }: Moment): StockCylinder {
  cylinder.busyUntil = at.getTime() + BUSY_MS;
  return cylinder;
}

function limitOf(plan: CylinderPlan): number | null {
  const waterCapacityMicrograms = plan.waterCapacity ? microgramsOfTyped(plan.waterCapacity) : null;
  const limit = cylinderLimit({ ...plan, stampedLimitMicrograms: null, waterCapacityMicrograms });
  return limit === null ? null : gramsOfMicrograms(limit);
}
