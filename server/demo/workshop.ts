import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import { Agenda } from './agenda.ts';
import type { DemoScale } from './demo-scale.ts';
import { Diary, laterBy, type Moment } from './diary.ts';
import { Draws } from './draws.ts';
import { FieldWork } from './field-work.ts';
import type { FirmPlan } from './firm-plan.ts';
import { Shop } from './shop.ts';
import { UnitRegister } from './unit-register.ts';
import { WorkingDays } from './working-days.ts';

/** Everything that the stories of a firm are told with. */
export function openWorkshop(plan: FirmPlan, now: Date, reference: ReferenceData) {
  const { firm } = plan.demo;
  const diary = new Diary(firm.name);
  const draws = new Draws(firm.name);
  const days = new WorkingDays(now, firm.timeZone, plan.firstDay);
  const first = days.at(plan.firstDay, 7);
  const idsOf = (list: readonly { key: string }[]): ((key: string) => string) => {
    const ids = new Map(list.map(({ key }) => [key, diary.id(first)]));
    return (key) => ids.get(key) ?? missing(key);
  };
  const ids = { customer: idsOf(plan.customers), site: idsOf(plan.sites), party: idsOf(plan.parties) };
  const partyIds = (wanted: string) =>
    plan.parties.filter(({ kind }) => kind === wanted).map(({ key }) => ids.party(key));
  const scales = plan.scales.map((scale) => ({ ...scale, id: diary.id(first) }));
  const shopScale: DemoScale = scales.find(({ heldBy }) => heldBy === null) ?? missing('a scale in the shop');
  const scaleOf = (personId: string): DemoScale =>
    scales.find(({ heldBy }) => heldBy === plan.holderOf(personId)) ?? shopScale;
  const shop = new Shop(
    {
      diary,
      draws,
      reference,
      now,
      timeZone: firm.timeZone,
      office: plan.office,
      supplierIds: partyIds('supplier'),
      reclaimerId: partyIds('reclaimer')[0] ?? missing('a reclaimer'),
      holderOf: plan.holderOf,
      scaleOf,
      shopScale,
      onEveryVan: plan.onEveryVan,
      dayIn: (calendarDays) => days.calendarDay(-calendarDays),
    },
    plan.cylinders,
    first,
  );
  const siteIdOf = (key: string): string => ids.site(key);
  const register = new UnitRegister({ diary, draws, reference, gwpSet: firm.gwpSet, siteIdOf }, plan.units, first);
  const field = new FieldWork(diary, scaleOf);
  const agenda = new Agenda(days, draws, plan.holderOf);
  return { plan, now, diary, draws, days, ids, scales, shop, register, field, agenda };
}
export type Workshop = ReturnType<typeof openWorkshop>;

function missing(what: string): never {
  throw new Error(`the demo lacks ${what}`);
}

/** The first day: registers, the cylinders in house, the machines that were there before. */
export function enterRegisters(workshop: Workshop): void {
  const { plan, diary, days, ids, shop, register } = workshop;
  const { firm } = plan.demo;
  const office: Moment = { at: days.at(plan.firstDay, 7.25), by: plan.office };
  for (const { key, name, email, phone } of plan.customers) {
    diary.write(office, { call: 'createCustomer', request: { id: ids.customer(key), name, email, phone } });
  }
  for (const { key, customer, name, street, altitudeM } of plan.sites) {
    const request = {
      id: ids.site(key),
      customerId: ids.customer(customer),
      name,
      addressLines: [street, plan.town],
      timeZone: firm.timeZone,
      altitudeM,
      jurisdiction: firm.jurisdiction,
    };
    diary.write(laterBy(office, 3), { call: 'createSite', request });
  }
  for (const { key, ...party } of plan.parties) {
    diary.write(laterBy(office, 5), { call: 'createParty', request: { id: ids.party(key), ...party } });
  }
  enterTools(workshop, laterBy(office, 8));
  shop.open({ at: days.at(plan.firstDay, 8), by: plan.storekeeper });
  const takenOver = register.units.filter(
    ({ beginning }) => beginning.kind === 'taken over' || (beginning.kind === 'not known' && !beginning.daysAgo),
  );
  takenOver.forEach((unit, index) => {
    const moment = { at: days.at(plan.firstDay, 10 + index / 12), by: plan.storekeeper };
    register.takeOver(moment, unit, days.day(plan.firstDay));
  });
}

function enterTools({ plan, diary, days, scales }: Workshop, moment: Moment): void {
  for (const { id, name, serial, accuracy, heldBy, checkedDaysAgo } of scales) {
    const lastCheckedOn = days.calendarDay(checkedDaysAgo);
    const request = { id, kind: 'scale' as const, name, serial, scale: accuracy, lastCheckedOn, heldBy };
    diary.write(moment, { call: 'createTool', request });
  }
  for (const { checkedDaysAgo, ...tool } of plan.tools) {
    const lastCheckedOn = days.calendarDay(checkedDaysAgo);
    diary.write(moment, { call: 'createTool', request: { ...tool, id: diary.id(moment.at), lastCheckedOn } });
  }
}
