import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import type { StockCylinder } from './cylinder-plan.ts';
import { type DemoScale, gramsOf, type Typed, typedSteps, wholeSteps } from './demo-scale.ts';
import { type Diary, type Moment, minutesAfter } from './diary.ts';
import type { Draws } from './draws.ts';
import { entry, grossReading, inCylinder } from './group-parts.ts';

const DAY_MINUTES = 24 * 60;

export interface ShopFacts {
  diary: Diary;
  draws: Draws;
  reference: ReferenceData;
  now: Date;
  timeZone: string;
  supplierIds: readonly string[];
  reclaimerId: string;
  /** Who sees to invoices and certificates. */
  office: string;
  /** Whose van a person loads. */
  holderOf(personId: string): string;
  scaleOf(personId: string): DemoScale;
  shopScale: DemoScale;
  /** What each van carries; of other refrigerants one cylinder goes from hand to hand. */
  onEveryVan: string;
  /** So many calendar days from today, written as a day. */
  dayIn(calendarDays: number): string;
}

export interface PurchaseOptions {
  /** Put on the shop's scale at its receipt. */
  weighed?: boolean;
  /** So much less than the invoice says was filled in. */
  shortG?: number;
  /** The shell is so much heavier (below zero: lighter) than its stamp. */
  tareErrorLb?: number;
  /** This one, and not the next of its kind. */
  cylinder?: StockCylinder;
}

/** Bought on an invoice; or picked up by its label, and the office gets the invoice some days later. */
export function postPurchase(
  { diary, draws, supplierIds, shopScale, office, now, timeZone }: ShopFacts,
  { at, by }: Moment,
  purchase: { cylinder: StockCylinder; mass: Typed; invoice: number; isWeighed: boolean },
): void {
  const { cylinder, mass, isWeighed } = purchase;
  const { refrigerant } = cylinder;
  const byLabel = !isWeighed && draws.happens(0.3);
  const from = { place: 'supplier' as const, id: draws.pick(supplierIds) };
  const howKnown = byLabel ? ('label' as const) : ('invoice' as const);
  const date = dayInZone(at.getTime(), timeZone);
  const invoice = { kind: 'invoice' as const, number: String(purchase.invoice), date, refrigerant, mass };
  diary.post(
    { at, by },
    {
      kind: 'purchase',
      readings: isWeighed ? [grossReading(diary, at, { cylinder, scale: shopScale, moment: 'only' })] : [],
      entries: [entry(diary, at, { refrigerant, mass, from, to: inCylinder(cylinder), howKnown })],
      documents: byLabel ? [] : [invoice],
    },
  );
  const arrives = minutesAfter(at, 4 * DAY_MINUTES + 195);
  if (!byLabel || arrives > now) return;
  const note = `Invoice of cylinder ${cylinder.tag}, which was picked up by its label.`;
  diary.post({ at: arrives, by: office }, { kind: 'purchase', documents: [invoice], note });
}

/** Weighed at both ends; what the hose held is lost. */
export function transfer(
  { diary, shopScale: scale }: ShopFacts,
  moment: Moment,
  { from, to, massG }: { from: StockCylinder; to: StockCylinder; massG: number },
): void {
  const { at } = moment;
  const done = minutesAfter(at, 16);
  const mass = typedSteps(wholeSteps(massG, scale), scale);
  const hose = typedSteps(scale.hoseSteps, scale);
  const read = (when: Date, which: 'before' | 'after') =>
    [from, to].map((cylinder) => grossReading(diary, when, { cylinder, scale, moment: which }));
  const before = read(at, 'before');
  from.contentG -= gramsOf(mass) + gramsOf(hose);
  to.contentG += gramsOf(mass);
  const { refrigerant } = from;
  const places = { from: inCylinder(from), to: inCylinder(to) };
  const toAir = { from: inCylinder(from), to: { place: 'atmosphere' as const, as: 'hose' as const } };
  const entries = [
    entry(diary, done, { refrigerant, mass, ...places, howKnown: 'weighed' }),
    entry(diary, done, { refrigerant, mass: hose, ...toAir, howKnown: 'estimated' }),
  ];
  diary.post(moment, { kind: 'transfer', readings: [...before, ...read(done, 'after')], entries }, 18);
}

/** The rest of a one-way cylinder goes into one for recovery; a rented one goes back to its supplier with its heel. */
export function postGivenUp(
  facts: ShopFacts,
  moment: Moment,
  cylinder: StockCylinder,
  into: StockCylinder | null,
): void {
  const { diary, draws, shopScale: scale, supplierIds } = facts;
  const steps = wholeSteps(cylinder.contentG, scale);
  const mass = typedSteps(steps, scale);
  const first = grossReading(diary, moment.at, { cylinder, scale, moment: into ? 'before' : 'only' });
  cylinder.contentG = into ? cylinder.contentG - gramsOf(mass) : 0;
  if (into) into.contentG += gramsOf(mass);
  const done = minutesAfter(moment.at, 9);
  const to = into ? inCylinder(into) : { place: 'supplier' as const, id: draws.pick(supplierIds) };
  const { refrigerant } = cylinder;
  const moved = { refrigerant, mass, from: inCylinder(cylinder), to, howKnown: 'weighed' as const };
  const readings = into ? [first, grossReading(diary, done, { cylinder, scale, moment: 'after' })] : [first];
  const entries = steps > 0 ? [entry(diary, done, moved)] : [];
  diary.post(moment, { kind: into ? 'heelRemoved' : 'return', readings, entries }, 12);
}

/** What was recovered goes to the reclaimer; some weeks later the office enters what was certified. */
export function postReclaim(
  { diary, draws, shopScale: scale, reclaimerId, timeZone, office }: ShopFacts,
  moment: Moment,
  cylinder: StockCylinder,
  certifiedAt: Date | null,
): void {
  const { refrigerant } = cylinder;
  const mass = netReading(cylinder, scale);
  const reclaimer = { place: 'reclaimer' as const, id: reclaimerId };
  const sent = { refrigerant, mass, from: inCylinder(cylinder), to: reclaimer, howKnown: 'weighed' as const };
  const number = `DN-${draws.whole(10_000, 99_999)}`;
  const date = dayInZone(moment.at.getTime(), timeZone);
  diary.post(moment, {
    kind: 'reclaim',
    readings: [grossReading(diary, moment.at, { cylinder, scale, moment: 'only' })],
    entries: [entry(diary, moment.at, sent)],
    documents: [{ kind: 'deliveryNote', number, date, refrigerant, mass }],
  });
  cylinder.contentG = 0;
  if (!certifiedAt) return;
  const offG = gramsOf(mass) * draws.between(0.008, 0.035);
  const oil = { refrigerant, mass: typedSteps(Math.max(1, wholeSteps(offG, scale)), scale), from: reclaimer };
  const difference = { place: 'reclaimerDifference' as const };
  const certificate = `RC-${draws.whole(1_000, 9_999)}`;
  diary.post(
    { at: certifiedAt, by: office },
    {
      kind: 'certificate',
      entries: [entry(diary, certifiedAt, { ...oil, to: difference, howKnown: 'certificate' })],
      documents: [{ kind: 'certificate', number: certificate, date: dayInZone(certifiedAt.getTime(), timeZone) }],
      note: `Oil, air and moisture taken off delivery ${number}.`,
    },
  );
}

/** Gross less the stamped tare, as somebody works it out beside the scale. */
function netReading(cylinder: StockCylinder, scale: DemoScale): Typed {
  const gross = typedSteps(wholeSteps(cylinder.tareG + cylinder.contentG, scale), scale);
  if (gross.unit !== cylinder.tare.unit) return typedSteps(wholeSteps(cylinder.contentG, scale), scale);
  const net = Number(gross.value) - Number(cylinder.tare.value);
  return { value: net.toFixed(3).replace(/0$/, ''), unit: gross.unit };
}

export function registerCylinder(
  { diary, supplierIds, dayIn }: ShopFacts,
  moment: Moment,
  cylinder: StockCylinder,
): void {
  const { id, tag, kind, refrigerant, contentState, servicePressureKPaGauge, heldBy, retestInDays } = cylinder;
  const rented = cylinder.isRented && supplierIds[0] ? { kind: 'party' as const, id: supplierIds[0] } : null;
  const request = {
    id,
    tag,
    kind,
    refrigerant,
    contentState,
    owner: rented ?? { kind: 'ours' as const },
    tare: { id: diary.id(moment.at), mass: cylinder.tare, validFrom: moment.at.toISOString() },
    waterCapacity: cylinder.waterCapacity ?? null,
    servicePressureKPaGauge: servicePressureKPaGauge ?? null,
    retestDue: retestInDays === undefined ? null : dayIn(retestInDays),
    heldBy,
    batch: cylinder.batch ?? null,
  };
  diary.write(moment, { call: 'createCylinder', request });
}
