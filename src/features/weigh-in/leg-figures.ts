import Fraction from 'fraction.js';
import type { TypedMass } from '../../../shared/ledger/entry-group.schema.ts';
import { gramsText } from '../../../shared/ledger/grams-text.ts';
import { grossVarianceG2, isBeyond, type Scale } from '../../../shared/ledger/scale.ts';
import { netMassUncertaintyG } from '../../../shared/scale/scale-uncertainty.ts';
import { microgramsOfTyped } from '../../../shared/units/mass.ts';
import { type KeyedReading, microgramsOf, typedOf } from './scale-reading.ts';
import type { HoseEnd, Leg, WeighIn } from './weigh-in-state.ts';

/** Everything a leg's arithmetic needs; the weigh back builds one from what was left open. */
export type WeighedPart = Pick<Leg, 'mode' | 'hose' | 'start'>;

export const hoseMicrograms = ({ hose }: Pick<Leg, 'hose'>): bigint =>
  hose.content === null ? 0n : microgramsOfTyped(hose.content);

/** Where the scale stood at the start; a zeroed one stood at nothing. */
function startMicrograms(part: WeighedPart): bigint | null {
  return part.mode === 'zeroed' ? 0n : microgramsOf(part.start);
}

/** What has left the cylinder by the scale: start less reading; a zeroed scale shows it as it is. */
export function dropMicrograms(part: WeighedPart, reading: KeyedReading): bigint | null {
  const read = microgramsOf(reading);
  const start = startMicrograms(part);
  if (read === null || start === null) return null;
  return part.mode === 'zeroed' ? read : start - read;
}

/**
 * What of that is in the unit. A hose that was full before the start reading adds its content when it is emptied into the
 * unit; one that was filled after it took its content out of the drop, unless it is emptied into the unit.
 */
export function intoUnitMicrograms(part: WeighedPart, dropped: bigint, hoseEnd: HoseEnd): bigint {
  const hose = hoseMicrograms(part);
  if (part.hose.full) return hoseEnd === 'emptied' ? dropped + hose : dropped;
  return hoseEnd === 'emptied' ? dropped : dropped - hose;
}

/** How far the scale has to fall so that `wanted` gets into the unit. */
function dropFor(part: WeighedPart, wanted: bigint, hoseEnd: HoseEnd): bigint {
  const hose = hoseMicrograms(part);
  if (part.hose.full) return hoseEnd === 'emptied' ? wanted - hose : wanted;
  return hoseEnd === 'emptied' ? wanted : wanted + hose;
}

/** What the cylinders before this one have put in. */
export function deliveredBefore(weighIn: WeighIn, legCount: number): bigint {
  return weighIn.legs.slice(0, legCount).reduce((sum, leg) => sum + (deliveredBy(leg) ?? 0n), 0n);
}

/** What a finished leg put into the unit; null while it is not finished. */
export function deliveredBy(leg: Leg): bigint | null {
  const dropped = dropMicrograms(leg, leg.now);
  if (leg.endAt === null || dropped === null) return null;
  return intoUnitMicrograms(leg, dropped, leg.hoseEnd ?? 'lost');
}

export interface Stop {
  /** What has still to come out of this cylinder's scale, from its start. Below zero: the hose alone holds more. */
  dropG: number;
  /** What the scale shows there; below zero on a zeroed scale. null without a start reading. */
  scaleG: number | null;
  /** Half the band around it: twice the standard uncertainty of one net mass (`formulas.md` has the method, GUM). */
  toleranceG: number;
}

const grams = (micrograms: bigint) => Number(micrograms) / 1e6;

/** Where this cylinder's scale has to stop, after what the others have put in. null without a target. */
export function stopOf(weighIn: WeighIn, scale: Scale): Stop | null {
  const leg = weighIn.legs.at(-1);
  if (!leg || weighIn.target === null) return null;
  const wanted = microgramsOfTyped(weighIn.target) - deliveredBefore(weighIn, weighIn.legs.length - 1);
  const drop = dropFor(leg, wanted, leg.hosePlan ?? 'lost');
  const start = startMicrograms(leg);
  const dropG = grams(drop);
  return {
    dropG,
    scaleG: start === null ? null : grams(start - drop),
    toleranceG: toleranceG(scale, dropG),
  };
}

/** As `stopOf`, for a weigh-in that was left open: one cylinder, gross. */
export function stopOfOpen(part: WeighedPart, target: TypedMass | null, hoseEnd: HoseEnd, scale: Scale): Stop | null {
  const start = startMicrograms(part);
  if (target === null || start === null) return null;
  const drop = dropFor(part, microgramsOfTyped(target), hoseEnd);
  return { dropG: grams(drop), scaleG: grams(start - drop), toleranceG: toleranceG(scale, grams(drop)) };
}

export const toleranceG = (scale: Scale, netG: number): number => 2 * netMassUncertaintyG(scale, netG);

export interface Progress {
  /** Out of the cylinder by this reading. */
  droppedG: number;
  /** Still to come out before the stop; below zero once it is passed. null without a target. */
  toGoG: number | null;
  state: 'before' | 'reached' | 'past' | 'noTarget';
}

/** How far the reading is from the stop. null while the window holds no reading that makes sense here. */
export function progressOf(leg: Leg, stop: Stop | null, tareG: number | null): Progress | null {
  const dropped = dropMicrograms(leg, leg.now);
  const read = microgramsOf(leg.now);
  if (dropped === null || read === null) return null;
  // Half a number on the scale of a cylinder is less than the empty cylinder weighs: the rest is still being keyed in.
  if (leg.mode === 'gross' && tareG !== null && grams(read) < tareG * 0.98) return null;
  const droppedG = grams(dropped);
  if (!stop) return { droppedG, toGoG: null, state: 'noTarget' };
  const toGoG = Number((stop.dropG - droppedG).toFixed(6));
  const state = toGoG > stop.toleranceG ? 'before' : toGoG >= -stop.toleranceG ? 'reached' : 'past';
  return { droppedG, toGoG, state };
}

export type LegFault = 'noReading' | 'endAboveStart' | 'belowTare' | 'hoseMoreThanDrop';

/** Why this end reading cannot stand, if it cannot. */
export function faultOfEnd(
  part: WeighedPart,
  end: KeyedReading,
  hoseEnd: HoseEnd,
  tareG: number | null,
): LegFault | null {
  const dropped = dropMicrograms(part, end);
  const read = microgramsOf(end);
  if (dropped === null || read === null) return 'noReading';
  if (part.mode === 'gross' && tareG !== null && grams(read) < tareG * 0.98) return 'belowTare';
  if (dropped < 0n) return 'endAboveStart';
  return intoUnitMicrograms(part, dropped, hoseEnd) < 0n ? 'hoseMoreThanDrop' : null;
}

/** The mass into the unit as typed: in the scale's own unit where all parts are in it, else in grams to the microgram. */
export function typedIntoUnit(part: WeighedPart, end: KeyedReading, hoseEnd: HoseEnd): TypedMass | null {
  const dropped = dropMicrograms(part, end);
  const endTyped = typedOf(end);
  const startTyped = part.mode === 'zeroed' ? null : typedOf(part.start);
  if (dropped === null || endTyped === null) return null;
  const mass = intoUnitMicrograms(part, dropped, hoseEnd);
  if (mass <= 0n) return null;
  const { content, full } = part.hose;
  const hoseCounts = content !== null && (full ? hoseEnd === 'emptied' : hoseEnd !== 'emptied');
  const { unit } = endTyped;
  const oneUnit = (startTyped === null || startTyped.unit === unit) && (!hoseCounts || content.unit === unit);
  if (!oneUnit) return { value: gramsText(mass), unit: 'g' };
  const drop = startTyped ? new Fraction(startTyped.value).sub(endTyped.value) : new Fraction(endTyped.value);
  const hose = hoseCounts ? new Fraction(content.value).mul(full ? 1 : -1) : new Fraction(0);
  return { value: drop.add(hose).toString(), unit };
}

/**
 * Reading less book in grams, where the two differ by more than the scale explains: that difference is posted first.
 * null where the reading agrees, is zeroed (states nothing), or is not there yet.
 */
export function gapAtStartG(leg: Leg, cylinder: { tareG: number; contentG: number }, scale: Scale): number | null {
  const gross = leg.mode === 'gross' ? microgramsOf(leg.start) : null;
  if (gross === null) return null;
  const stated = gross - BigInt(Math.round(cylinder.tareG * 1e6)) + (leg.hose.full ? hoseMicrograms(leg) : 0n);
  const content = stated > 0n ? stated : 0n;
  const gap = content - BigInt(Math.round(cylinder.contentG * 1e6));
  return isBeyond(gap, grossVarianceG2(scale, content)) ? grams(gap) : null;
}
