import { gramsOf, type Typed } from '../demo-scale.ts';
import { laterBy, type Moment, minutesAfter } from '../diary.ts';
import type { Workshop } from '../workshop.ts';
import { HT } from './firm.ts';

const lb = (value: string): Typed => ({ value, unit: 'lb' });
const ounces = (value: number): number => gramsOf({ value: String(value), unit: 'oz' });
/** What a careful hand leaves below the limit. */
const NEAR_LIMIT_SHARE = 0.965;

/** What stands before the office now: nobody has put these right yet. */
export function planLately(workshop: Workshop): void {
  neverWeighedBack(workshop);
  doesNotBalance(workshop);
  nearItsLimit(workshop);
  stockForWinter(workshop);
  today(workshop);
}

/** A start five weeks ago without an end; the cylinder stands in the shop since. */
function neverWeighedBack({ agenda, register, shop, field }: Workshop): void {
  const unit = register.expect('B201', 36);
  agenda.promise(36, HT.bram.id, 1, (moment) => {
    const cylinder = shop.cylinderFor(moment, unit.refrigerant, 400);
    field.openWeighIn(moment, { unit, kind: 'adjust', cylinder });
    shop.handTo(laterBy(moment, 8 * 60), cylinder, null);
    cylinder.isSetAside = true;
  });
}

/** Four pounds are gone from a cylinder on van 3, and no entry says where to. */
function doesNotBalance({ agenda, shop }: Workshop): void {
  agenda.at(8, 7.2, HT.bram.id, (moment) => {
    const cylinder = shop.cylinderFor(moment, 'R-410A', 5_200);
    shop.weigh(moment, [cylinder]);
    cylinder.isSetAside = true;
  });
  agenda.at(4, 17.5, HT.calder.id, (moment) => {
    const cylinder = shop.cylinders.find(
      ({ heldBy, refrigerant, isSetAside, kind }) =>
        heldBy === HT.bram.id && refrigerant === 'R-410A' && isSetAside && kind !== 'recovery',
    );
    if (!cylinder) throw new Error('van 3 holds no R-410A');
    cylinder.contentG -= gramsOf(lb('4.13'));
    shop.weigh(moment, [cylinder]);
  });
}

/** The variable flow system of the town hall waits for its compressor, and its charge in two cylinders. */
function nearItsLimit({ agenda, register, shop, field }: Workshop): void {
  const unit = register.expect('TH-VRF', 6);
  const [first, second] = [shop.require('RC-05'), shop.require('RC-06')];
  for (const cylinder of [first, second]) cylinder.isSetAside = true;
  agenda.promise(6, HT.dov.id, 3, (moment) => {
    const jobId = field.job(moment, { unit, kind: 'serviceWithLeak', title: 'Compressor 2, windings', hours: null });
    for (const cylinder of [first, second]) shop.handTo(laterBy(moment, -20), cylinder, moment.by);
    const room = NEAR_LIMIT_SHARE * (first.limitG ?? 0) - first.contentG;
    const rest = unit.contentG * 0.985 - room;
    const into = [
      { cylinder: first, massG: room },
      { cylinder: second, massG: rest },
    ];
    field.recover(laterBy(moment, 10), { unit, jobId, into, isCompleted: true });
  });
}

/** What the catalogue of cylinders still has goes into the shop. */
function stockForWinter({ agenda, shop }: Workshop): void {
  agenda.at(1, 16.9, HT.calder.id, (moment) => {
    const bought = shop.cylinders.filter(({ state, isSetAside }) => state === 'planned' && !isSetAside);
    bought.forEach((cylinder, index) => {
      shop.buy(laterBy(moment, 9 * index), cylinder.refrigerant, null, { cylinder, weighed: true });
    });
  });
}

/** The last hours before now, whatever day it is. */
function today({ agenda, now, register, shop, field }: Workshop): void {
  const ago = (minutes: number, by: string): Moment => ({ at: minutesAfter(now, -minutes), by });
  const [unit, cooler, open] = [register.expect('TH-2', 0), register.expect('BK-1', 0), register.expect('B202', 0)];
  const pickedUp = shop.require('3231');
  pickedUp.isSetAside = true;
  agenda.at(0, 0, HT.dov.id, () => {
    shop.buy(ago(205, HT.pia.id), pickedUp.refrigerant, HT.pia.id, { cylinder: pickedUp });
    pickedUp.isSetAside = false;
    const visited = ago(170, HT.dov.id);
    const missing = ounces(3.8);
    unit.contentG = unit.fullG - missing;
    const from = [{ cylinder: shop.cylinderFor(visited, unit.refrigerant, missing), massG: missing }];
    field.weighIn(visited, { unit, kind: 'adjust', from, hose: 'emptied', answer: 'full' });

    const asked = ago(125, HT.junia.id);
    const added = ounces(11.6);
    const supply = [{ cylinder: shop.cylinderFor(asked, cooler.refrigerant, added), massG: added }];
    field.weighIn(asked, { unit: cooler, kind: 'refill', from: supply });

    const started = ago(38, HT.pia.id);
    const cylinder = shop.cylinderFor(started, open.refrigerant, 400);
    field.openWeighIn(started, { unit: open, kind: 'adjust', cylinder });
  });
}
