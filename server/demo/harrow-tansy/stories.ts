import { gramsOf, type Typed } from '../demo-scale.ts';
import { laterBy, minutesAfter } from '../diary.ts';
import { entry, inUnit } from '../group-parts.ts';
import type { Workshop } from '../workshop.ts';
import { HT } from './firm.ts';

const lb = (value: string): Typed => ({ value, unit: 'lb' });
const ounces = (value: number): number => gramsOf({ value: String(value), unit: 'oz' });

/** What happened once in three years, each as it happens in a trade, most of it put right afterwards. */
export function planStories(workshop: Workshop): void {
  strangersInvoice(workshop);
  wrongTare(workshop);
  retrofit(workshop);
  underWarranty(workshop);
  customersCylinder(workshop);
  overshoot(workshop);
  shortFilled(workshop);
  notLegible(workshop);
  weighedBackInTheEvening(workshop);
  answeredLater(workshop);
  sentLate(workshop);
  wrongUnit(workshop);
}

/** Another contractor's night call: nobody knows whether the rooftop was full, until somebody measured. */
function strangersInvoice({ agenda, diary, register, ids }: Workshop): void {
  const unit = register.expect('LB-1', 650);
  let groupId = '';
  agenda.at(650, 9.5, HT.ilse.id, (moment) => {
    const at = minutesAfter(moment.at, -3 * 24 * 60);
    const mass = lb('1.25');
    const from = { place: 'otherContractor' as const, id: ids.party('dunmarrow') };
    const refrigerant = 'R-410A';
    const entries = [entry(diary, moment.at, { refrigerant, mass, from, to: inUnit(unit), howKnown: 'invoice' })];
    const date = at.toISOString().slice(0, 10);
    const documents = [{ kind: 'invoice' as const, number: '5513', date, refrigerant, mass }];
    const body = {
      kind: 'otherContractor' as const,
      unitId: unit.id,
      occurredAt: at.toISOString(),
      entries,
      documents,
    };
    groupId = diary.post(moment, body);
  });
  agenda.at(640, 14, HT.ilse.id, (moment) => {
    const statement = { about: 'unit' as const, id: unit.id, is: 'full' as const };
    const request = { groupId: diary.id(moment.at), schema: 1 as const, statement };
    diary.write(moment, { call: 'answerGroup', id: groupId, request });
  });
}

/** At its receipt a cylinder seems to hold too little; it is the stamp that is wrong. */
function wrongTare({ agenda, diary, shop }: Workshop): void {
  agenda.at(601, 7.2, HT.calder.id, (moment) => {
    const cylinder = shop.buy(moment, 'R-454B', null, { weighed: true, tareErrorLb: -0.34 });
    const corrected = laterBy(moment, 26 * 60);
    const tare = lb((Number(cylinder.tare.value) - 0.34).toFixed(2));
    const reason = 'Weighed empty shells of the same batch with the supplier: the stamp is 0.34 lb too heavy.';
    const validFrom = moment.at.toISOString();
    const request = { id: diary.id(corrected.at), tare, validFrom, reason };
    diary.write(corrected, { call: 'addTare', id: cylinder.id, request });
    cylinder.tare = tare;
  });
}

/** The fire house gives up R-22. */
function retrofit({ agenda, diary, register, shop, field }: Workshop): void {
  const unit = register.expect('FH-1', 420);
  agenda.promise(420, HT.dov.id, 3, (moment) => {
    const jobId = field.job(moment, { unit, kind: 'retrofit', title: 'R-22 to R-407C', hours: 7 });
    const massG = gramsOf(lb('7.18'));
    const cylinder = shop.recoveryCylinderFor(moment, 'R-22', massG);
    if (!cylinder) throw new Error('the R-22 has nowhere to go');
    field.recover(laterBy(moment, 10), { unit, jobId, into: [{ cylinder, massG }], isCompleted: true });
    field.foundEmpty(laterBy(moment, 120), { unit, jobId, by: 'vacuum' });
    const changed = laterBy(moment, 150);
    const validFrom = changed.at.toISOString();
    const other = { id: diary.id(changed.at), refrigerant: 'R-407C', validFrom, jobId };
    diary.write(changed, { call: 'addRefrigerant', id: unit.id, request: other });
    const fullCharge = { id: diary.id(changed.at), mass: lb('7'), method: 'measured' as const, validFrom, jobId };
    const reason = 'Charged to the subcooling of the retrofit sheet and weighed.';
    diary.write(laterBy(changed, 1), { call: 'addFullCharge', id: unit.id, request: { ...fullCharge, reason } });
    unit.refrigerant = 'R-407C';
    unit.fullG = gramsOf(lb('7'));
    unit.trouble = 0.7;
    const from = shop.supplyFor(laterBy(moment, 165), 'R-407C', unit.fullG);
    field.weighIn(laterBy(moment, 165), { unit, jobId, kind: 'fullRecharge', from, hose: 'emptied' });
  });
}

/** A new outdoor unit comes with its own charge. */
function underWarranty({ agenda, diary, register, shop, field }: Workshop): void {
  const unit = register.expect('B102', 380);
  agenda.promise(380, HT.pia.id, 3, (moment) => {
    const factory = unit.model?.factoryCharge ?? lb('2');
    const jobId = field.job(moment, { unit, kind: 'serviceWithLeak', title: 'Compressor, under warranty', hours: 7 });
    const massG = unit.contentG * 0.96;
    const cylinder = shop.recoveryCylinderFor(moment, unit.refrigerant, massG);
    if (!cylinder) throw new Error('no room for the charge of B102');
    field.recover(laterBy(moment, 10), { unit, jobId, into: [{ cylinder, massG }], isCompleted: true });
    const arrived = laterBy(moment, 130);
    const mass = {
      refrigerant: unit.refrigerant,
      mass: factory,
      from: { place: 'factory' as const },
      to: inUnit(unit),
    };
    const entries = [entry(diary, arrived.at, { ...mass, howKnown: 'factory' })];
    diary.post(arrived, { kind: 'warrantyReplacement', unitId: unit.id, jobId, entries });
    unit.contentG = gramsOf(factory);
    const on = laterBy(moment, 190);
    const from = shop.supplyFor(on, unit.refrigerant, unit.fullG - unit.contentG);
    field.weighIn(on, { unit, jobId, kind: 'extraCharge', from, hose: 'emptied' });
  });
}

/** The grocer had a cylinder of its own in the machine room. */
function customersCylinder({ agenda, diary, register, ids }: Workshop): void {
  const unit = register.expect('CU-1', 331);
  agenda.promise(331, HT.bram.id, 1, (moment) => {
    const from = { place: 'customer' as const, id: ids.customer('grocer') };
    const mass = { refrigerant: 'R-404A', mass: lb('2.4'), from, to: inUnit(unit) };
    diary.post(moment, {
      kind: 'refill',
      unitId: unit.id,
      entries: [entry(diary, moment.at, { ...mass, howKnown: 'weighed' })],
      statements: [{ about: 'unit', id: unit.id, is: 'full' }],
      note: 'Out of the customer’s own cylinder, on our scale.',
    });
    unit.contentG = unit.fullG;
  });
}

/** Too much goes in, is seen at once and taken out again. */
function overshoot({ agenda, register, shop, field }: Workshop): void {
  const unit = register.expect('TH-3', 295);
  agenda.promise(295, HT.dov.id, 1, (moment) => {
    const jobId = field.job(moment, { unit, kind: 'serviceWithLeak', title: 'Low on charge', hours: 2 });
    unit.contentG = unit.fullG;
    const from = [{ cylinder: shop.cylinderFor(moment, unit.refrigerant, 200), massG: ounces(5.5) }];
    field.weighIn(moment, { unit, jobId, kind: 'adjust', from, answer: 'moreThanFull' });
    const massG = ounces(2.5);
    const out = laterBy(moment, 40);
    const cylinder = shop.recoveryCylinderFor(out, unit.refrigerant, massG);
    if (!cylinder) throw new Error('no room for an overcharge');
    field.recover(out, { unit, jobId, kind: 'overchargeRemoved', into: [{ cylinder, massG }], isCompleted: false });
    unit.contentG = unit.fullG;
  });
}

function shortFilled({ agenda, shop }: Workshop): void {
  agenda.at(166, 7.1, HT.calder.id, (moment) => {
    shop.buy(moment, 'R-410A', null, { weighed: true, shortG: gramsOf(lb('0.62')) });
  });
}

/** A wall unit whose plate nobody can read: what it ought to hold is not known, and nothing is made up. */
function notLegible({ agenda, days, register, shop, field }: Workshop): void {
  const unit = register.expect('T-1', 131);
  agenda.promise(131, HT.junia.id, 2, (moment) => {
    register.takeOver(moment, unit, days.day(131));
    const from = [{ cylinder: shop.cylinderFor(moment, unit.refrigerant, 220), massG: ounces(6.2) }];
    const note = 'No make, no model, plate painted over. Charged by superheat until it ran well.';
    field.weighIn(laterBy(moment, 60), { unit, kind: 'adjust', from, answer: 'notKnown', note });
  });
}

/** Called away in the middle; the end reading comes in the evening and belongs to the morning. */
function weighedBackInTheEvening({ agenda, register, shop, field }: Workshop): void {
  const unit = register.expect('A101', 63);
  agenda.promise(63, HT.junia.id, 3, (moment) => {
    const massG = ounces(4.4);
    unit.contentG = unit.fullG - massG;
    const from = [{ cylinder: shop.cylinderFor(moment, unit.refrigerant, massG), massG }];
    const [{ cylinder } = { cylinder: shop.require('7712') }] = from;
    const groupId = field.openWeighIn(moment, { unit, kind: 'adjust', cylinder });
    const closes = { groupId, startedAt: moment.at };
    field.weighIn(laterBy(moment, 7 * 60), { unit, kind: 'adjust', from, closes, answer: 'full' });
  });
}

/** Nobody said whether it was full; the office asked the next day. */
function answeredLater({ agenda, diary, register, shop, field }: Workshop): void {
  const unit = register.expect('RT-1', 46);
  let groupId = '';
  agenda.promise(46, HT.pia.id, 1, (moment) => {
    const massG = ounces(21);
    unit.contentG = unit.fullG - massG;
    groupId = field.weighIn(moment, { unit, kind: 'adjust', from: shop.supplyFor(moment, unit.refrigerant, massG) });
  });
  agenda.at(45, 9, HT.ilse.id, (moment) => {
    const statement = { about: 'unit' as const, id: unit.id, is: 'full' as const };
    const request = { groupId: diary.id(moment.at), schema: 1 as const, statement };
    diary.write(moment, { call: 'answerGroup', id: groupId, request });
  });
}

/**
 * A refill lay on a phone without signal for two days; in the meantime the van was weighed, and the cylinder seemed to
 * lack what had gone into the unit.
 */
function sentLate({ agenda, register, shop, field }: Workshop): void {
  const unit = register.expect('A203', 22);
  let cylinder = shop.require('7712');
  agenda.promise(22, HT.junia.id, 1, (moment) => {
    const massG = ounces(9.3);
    unit.contentG = unit.fullG - massG;
    cylinder = shop.cylinderFor(moment, unit.refrigerant, massG);
    const work = { unit, kind: 'adjust' as const, from: [{ cylinder, massG }], answer: 'full' as const };
    const note = 'No signal in the basement, then forgot the phone in the van.';
    field.weighIn(moment, { ...work, note, sentAfterMinutes: 47 * 60 });
  });
  agenda.at(21, 17.9, HT.junia.id, (moment) => shop.weigh(moment, [cylinder]));
}

/** Entered for the apartment next door; the office withdraws it and enters the right one in its place. */
function wrongUnit({ agenda, diary, register, shop, field }: Workshop): void {
  const [wrong, right] = [register.expect('A103', 13), register.expect('A104', 13)];
  let groupId = '';
  agenda.promise(13, HT.dov.id, 1, (moment) => {
    const massG = ounces(5.1);
    right.contentG = right.fullG;
    const from = [{ cylinder: shop.cylinderFor(moment, wrong.refrigerant, massG), massG }];
    groupId = field.weighIn(moment, { unit: wrong, kind: 'adjust', from, answer: 'full' });
    wrong.contentG = wrong.fullG;
  });
  agenda.at(12, 8.4, HT.calder.id, (moment) => {
    const { readings = [], entries = [], ...body } = diary.bodyOf(groupId);
    const replacement = {
      ...body,
      groupId: diary.id(moment.at),
      unitId: right.id,
      readings: (readings ?? []).map((reading) => ({ ...reading, id: diary.id(moment.at) })),
      entries: (entries ?? []).map((moved) => ({ ...moved, id: diary.id(moment.at), to: inUnit(right) })),
      statements: [{ about: 'unit' as const, id: right.id, is: 'full' as const }],
    };
    const reason = 'Apartment 104 it was; 103 has not been visited.';
    const request = { groupId: diary.id(moment.at), schema: 1 as const, reason, replacement };
    diary.write(moment, { call: 'reverseGroup', id: groupId, request });
  });
}
