import { transfer } from '../cylinder-moves.ts';
import type { StockCylinder } from '../cylinder-plan.ts';
import { gramsOf } from '../demo-scale.ts';
import { laterBy, type Moment } from '../diary.ts';
import { ENGLISH_TITLES, ServiceVisits, SPANISH_TITLES, type VisitKind } from '../service-visits.ts';
import { CAREFUL_SHARE } from '../shop.ts';
import type { FieldUnit } from '../unit-plan.ts';
import type { Workshop } from '../workshop.ts';
import { HT } from './firm.ts';
import { FIRST_DAY } from './plan.ts';

const MONTH = 21;
/** After this much of its limit a recovery cylinder is sent off at the end of the month. */
const FULL_SHARE = 0.55;
/** From here on two are worth bringing together. */
const SOME_SHARE = 0.15;
/** Less than this is not worth carrying. */
const HEEL_G = 320;
/** A rented cylinder goes back for another before it is quite empty. */
const RENTED_HEEL_SHARE = 0.08;
/** The last ordinary visit; what came in since is told by `stories.ts`. */
const LAST_VISIT = 2;
const CALLS_A_DAY = 0.48;
const REST_BETWEEN_VISITS = 23;

/** Racks leak as racks do: the first one above the law's threshold, and every few weeks. */
const RACKS = [
  {
    tag: 'RK-A',
    by: HT.bram.id,
    days: [742, 655, 590, 521, 448, 377, 301, 246, 214, 183, 149, 118, 89, 58, 31, 12],
    lb: [9, 16],
  },
  { tag: 'RK-B', by: HT.junia.id, days: [700, 561, 433, 318, 197, 76], lb: [4, 8] },
  { tag: 'RK-C', by: HT.bram.id, days: [718, 574, 402, 269, 128, 49], lb: [3, 6] },
] as const;

export function planRacks({ agenda, register, field, shop, draws }: Workshop): void {
  for (const { tag, by, days, lb } of RACKS) {
    const unit = register.require(tag);
    for (const daysAgo of days) {
      agenda.promise(daysAgo, by, 2, (moment) => {
        const jobId = field.job(moment, { unit, kind: 'serviceWithLeak', title: 'Rack low on level', hours: 4 });
        const massG = gramsOf({ value: String(draws.whole(lb[0] * 10, lb[1] * 10) / 10), unit: 'lb' });
        unit.contentG = unit.fullG - massG;
        const on = laterBy(moment, 75);
        const from = shop.supplyFor(on, unit.refrigerant, massG);
        field.weighIn(on, { unit, jobId, kind: 'refill', from, answer: 'full' });
      });
    }
  }
}

/** What comes up from day to day: about one call in two working days. */
export function planService({ agenda, draws, register, shop, field }: Workshop): void {
  const supervisorOf = (personId: string) => (personId === HT.teo.id ? HT.dov.id : null);
  const titlesOf = (personId: string) => (personId === HT.pia.id ? SPANISH_TITLES : ENGLISH_TITLES);
  const service = new ServiceVisits({ draws, shop, field, supervisorOf, titlesOf });
  const crew = [HT.dov.id, HT.pia.id, HT.bram.id, HT.junia.id, HT.pia.id, HT.bram.id, HT.teo.id];
  const kinds: readonly [VisitKind, number][] = [
    ['top up', 12],
    ['recharge', 6],
    ['put back', 3],
    ['flat', 2],
  ];
  for (let daysAgo = FIRST_DAY - 8; daysAgo >= LAST_VISIT; daysAgo -= 1) {
    if (!draws.happens(CALLS_A_DAY)) continue;
    const [kind] = draws.pickWeighted(kinds, ([, weight]) => weight);
    agenda.visit(daysAgo, draws.pick(crew), kind === 'top up' ? 1 : 2, (moment) => {
      const rested = register.units.filter(
        ({ isThere, trouble, visits }) =>
          isThere && trouble > 0 && visits.every((other) => Math.abs(other - daysAgo) >= REST_BETWEEN_VISITS),
      );
      const unit: FieldUnit = draws.pickWeighted(rested, ({ trouble }) => trouble);
      unit.visits.push(daysAgo);
      service.visit(moment, unit, kind);
    });
  }
}

/** At the end of each month the shop clears up; every other month each van is weighed. */
export function planMonthEnds(workshop: Workshop): void {
  const { agenda } = workshop;
  for (let daysAgo = FIRST_DAY - MONTH; daysAgo > 10; daysAgo -= MONTH) {
    agenda.at(daysAgo, 18.6, HT.calder.id, (moment) => clearUp(workshop, moment, daysAgo));
    if ((daysAgo / MONTH) % 2 >= 1) continue;
    for (const { id } of [HT.dov, HT.pia, HT.bram, HT.junia]) {
      agenda.at(daysAgo, 7, id, (moment) => weighVan(workshop, moment));
    }
  }
}

function weighVan({ shop }: Workshop, moment: Moment): void {
  const onVan = shop.cylinders.filter(
    ({ heldBy, state, isSetAside }) => heldBy === moment.by && state === 'here' && !isSetAside,
  );
  if (onVan.length > 0) shop.weigh(moment, onVan);
}

function clearUp({ shop, days }: Workshop, moment: Moment, daysAgo: number): void {
  const inUse = shop.cylinders.filter(({ state, isSetAside }) => state === 'here' && !isSetAside);
  let minutes = 0;
  const next = () => {
    minutes += 24;
    return laterBy(moment, minutes);
  };
  for (const cylinder of inUse.filter(({ kind }) => kind !== 'recovery')) {
    const { kind, filled } = cylinder;
    const leastG = kind === 'refillable' && filled ? RENTED_HEEL_SHARE * gramsOf(filled) : HEEL_G;
    if (cylinder.contentG < leastG) shop.giveUp(next(), cylinder);
  }
  consolidate(
    inUse.filter(({ kind }) => kind === 'recovery'),
    shop,
    next,
  );
  for (const cylinder of inUse.filter(({ kind }) => kind === 'recovery')) {
    if (cylinder.contentG < FULL_SHARE * (cylinder.limitG ?? Number.POSITIVE_INFINITY)) continue;
    const certified = daysAgo > 18 ? days.at(daysAgo - 17, 11) : null;
    shop.reclaim(next(), cylinder, certified);
  }
}

/** Two cylinders half full of the same make one for the reclaimer. */
function consolidate(cylinders: readonly StockCylinder[], shop: Workshop['shop'], next: () => Moment): void {
  const some = cylinders.filter(({ contentG, limitG }) => limitG !== null && contentG > SOME_SHARE * limitG);
  for (const from of some) {
    const to = some.find(
      (other) =>
        other !== from &&
        other.refrigerant === from.refrigerant &&
        other.contentG >= from.contentG &&
        from.contentG + other.contentG < CAREFUL_SHARE * (other.limitG ?? 0),
    );
    if (!to) continue;
    transfer(shop.facts, next(), { from, to, massG: from.contentG - 100 });
    return;
  }
}
