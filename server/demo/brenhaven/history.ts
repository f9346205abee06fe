import type { ReferenceData } from '../../../shared/reference/reference-data.ts';
import { laterBy, type Moment, minutesAfter } from '../diary.ts';
import { planInstalls } from '../installs.ts';
import type { DemoHistory } from '../load-demo.ts';
import { ENGLISH_TITLES, ServiceVisits, SPANISH_TITLES } from '../service-visits.ts';
import { enterRegisters, openWorkshop, type Workshop } from '../workshop.ts';
import { BK } from './firm.ts';
import { BRENHAVEN } from './plan.ts';

/** A year and a half of a small firm. */
export function brenhavenHistory(now: Date, reference: ReferenceData): DemoHistory {
  const workshop = openWorkshop(BRENHAVEN, now, reference);
  enterRegisters(workshop);
  planInstalls(workshop);
  planVisits(workshop);
  workshop.agenda.run();
  return { lines: workshop.diary.inOrder(), readers: new Map() };
}

/** Working days ago, unit, who. */
const TOP_UPS: readonly [number, string, string][] = [
  [371, 'ZK-2', BK.inaki.id],
  [318, 'MB-1', BK.sanne.id],
  [262, 'ZK-1', BK.sanne.id],
  [240, 'ZK-2', BK.inaki.id],
  [187, 'MB-2', BK.sanne.id],
  [121, 'ZK-2', BK.inaki.id],
  [96, 'MB-1', BK.sanne.id],
  [37, 'ZK-2', BK.inaki.id],
];

function planVisits({ agenda, draws, register, shop, field, now, days }: Workshop): void {
  const titlesOf = (personId: string) => (personId === BK.inaki.id ? SPANISH_TITLES : ENGLISH_TITLES);
  const service = new ServiceVisits({ draws, shop, field, supervisorOf: () => null, titlesOf });
  for (const [daysAgo, tag, by] of TOP_UPS) {
    agenda.promise(daysAgo, by, 1, (moment) => service.topUp(moment, register.require(tag)));
  }
  agenda.promise(205, BK.sanne.id, 2, (moment) => service.visit(moment, register.require('ZK-1'), 'recharge'));
  agenda.promise(74, BK.sanne.id, 2, (moment) => service.visit(moment, register.require('ZK-1'), 'put back'));
  agenda.at(60, 16.5, BK.marijke.id, (moment) => {
    shop.reclaim(moment, shop.require('T-07'), days.at(41, 10));
  });
  for (const daysAgo of [330, 200, 70, 8]) {
    for (const by of [BK.sanne.id, BK.inaki.id]) {
      agenda.at(daysAgo, 7.2, by, (moment) => {
        const onBus = shop.cylinders.filter(({ heldBy, state }) => heldBy === by && state === 'here');
        if (onBus.length > 0) shop.weigh(moment, onBus);
      });
    }
  }
  agenda.at(0, 0, BK.sanne.id, () => {
    const visited: Moment = { at: minutesAfter(now, -140), by: BK.sanne.id };
    const unit = register.require('MB-2');
    shop.cylinderFor(laterBy(visited, -5), unit.refrigerant, 200);
    service.topUp(visited, unit, 0.11);
  });
}
