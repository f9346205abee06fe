import { BLANK_COLLAR, type CylinderRegister } from './cylinder-state.ts';
import type { EmptyBy, HowKnown, UnitCondition } from './entry-group.schema.ts';
import type { JudgedGroup, JudgedMass, JudgedReading, JudgedStatement } from './judged-group.ts';
import { cylinderPlace, type Place, type PlaceFields, toPlace, unitPlace } from './place.ts';
import type { Scale } from './scale.ts';
import type { DatedFullCharge, UnitRegister } from './unit-state.ts';

/** Builders for tests: they fill in what a promise is not about. Grams; R-410A; a scale of d = 5 g; tare 7,700 g. */
export const g = (grams: number): bigint => BigInt(Math.round(grams * 1e6));
export const R410A = 'R-410A';
export const FIVE_GRAM_SCALE: Scale = { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 };
const TARE_G = 7_700;
const DAY_MS = 86_400_000;
export const day = (number: number): number => Date.UTC(2026, 2, number, 10);

export const place = (symbol: string): Place => {
  if (/^[CRN]\d$/.test(symbol)) return cylinderPlace(symbol);
  if (/^U\d?$/.test(symbol)) return unitPlace(symbol);
  const [kind, as] = symbol.split(':');
  const parties = ['supplier', 'customer', 'otherContractor', 'reclaimer'];
  return toPlace({ place: kind, id: parties.includes(kind ?? '') ? kind : null, as: as ?? null } as PlaceFields);
};

/** `moved('C1 -> U', 90)`. */
export function moved(
  arrow: string,
  massG: number,
  over: { refrigerant?: string; howKnown?: HowKnown; scale?: Scale } = {},
): JudgedMass {
  const [from = '', to = ''] = arrow.split(' -> ');
  const { refrigerant = R410A, howKnown = 'weighed', scale = FIVE_GRAM_SCALE } = over;
  return { refrigerant, massMicrograms: g(massG), from: place(from), to: place(to), howKnown, scale };
}
export const read = (
  cylinderId: string,
  moment: JudgedReading['moment'],
  netG: number,
  over: Partial<JudgedReading> = {},
): JudgedReading => ({
  cylinderId,
  moment,
  mode: 'gross',
  grossMicrograms: g(netG + TARE_G),
  hoseFullMicrograms: 0n,
  scale: FIVE_GRAM_SCALE,
  ...over,
});
export const says = (id: string, is: UnitCondition, by: EmptyBy | null = null): JudgedStatement => ({
  about: 'unit',
  id,
  is,
  by,
});

/** A group on a day of March 2026; its sequence follows the day, so that builders need not count. */
export function group(id: string, onDay: number, parts: Partial<JudgedGroup> = {}): JudgedGroup {
  const plain = { kind: 'refill' as const, jobId: null, chargeSheetId: null, readings: [], masses: [], statements: [] };
  return { id, sequence: onDay, occurredAt: day(onDay), ...plain, ...parts };
}

export const cylinderRegister = (cylinderId: string, over: Partial<CylinderRegister> = {}): CylinderRegister => ({
  cylinderId,
  refrigerant: R410A,
  nonRefillable: false,
  collar: BLANK_COLLAR,
  tares: [{ validFrom: day(0) - 90 * DAY_MS, tareMicrograms: g(TARE_G) }],
  ...over,
});
export const unitRegister = (
  unitId: string,
  fullChargeG: number | null,
  over: Partial<UnitRegister> = {},
): UnitRegister => ({
  unitId,
  refrigerants: [{ refrigerant: R410A, validFrom: 0 }],
  fullCharges: fullChargeG === null ? [] : [fullCharge(fullChargeG, 0)],
  ...over,
});
export const fullCharge = (massG: number, validFrom: number, jobId: string | null = null): DatedFullCharge => ({
  refrigerant: R410A,
  massMicrograms: g(massG),
  validFrom,
  jobId,
});
/** A unit's book opened at this mass on the first day. */
export const openedAt = (unitId: string, massG: number): JudgedGroup =>
  group(`opening-${unitId}`, 1, {
    kind: 'opening',
    masses: [moved(`opening -> ${unitId}`, massG, { howKnown: 'estimated' })],
  });
export const filledWith = (cylinderId: string, massG: number, refrigerant = R410A): JudgedGroup =>
  group(`opening-${cylinderId}`, 1, {
    kind: 'opening',
    masses: [moved(`opening -> ${cylinderId}`, massG, { refrigerant, howKnown: 'estimated' })],
  });
