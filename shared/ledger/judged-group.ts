import { microgramsOfTyped } from '../units/mass.ts';
import type { EmptyBy, EntryGroupRequest, GroupKind, HowKnown, UnitCondition } from './entry-group.schema.ts';
import { type MassByRefrigerant, splitByBook } from './mass-by-refrigerant.ts';
import { type Place, toPlace } from './place.ts';
import type { Scale } from './scale.ts';

export interface JudgedReading {
  readonly cylinderId: string;
  readonly moment: 'before' | 'after' | 'only';
  readonly mode: 'gross' | 'zeroed';
  /** What the scale showed; for `gross` with the tare in it. */
  readonly grossMicrograms: bigint;
  /** What the hose held if it was full at this reading, else 0. */
  readonly hoseFullMicrograms: bigint;
  readonly scale: Scale;
  /** Absent: nobody named the scale. */
  readonly toolId?: string | null;
  /** Milliseconds since 1970, UTC; absent: when its group occurred. */
  readonly at?: number;
}

export interface JudgedMass {
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
  readonly from: Place;
  readonly to: Place;
  readonly howKnown: HowKnown;
  /** The scale that weighed it, where `howKnown` is `weighed`; null: `ASSUMED_SCALE`. */
  readonly scale?: Scale | null;
}

export interface JudgedStatement {
  readonly about: 'unit';
  readonly id: string;
  readonly is: UnitCondition;
  readonly by?: EmptyBy | null;
}

/** A group as the judge reads it: what was entered, with the latest answer in its statements. */
export interface JudgedGroup {
  readonly id: string;
  /** The sequence of the group's own record: of two groups of one instant the earlier recorded comes first. */
  readonly sequence: number | bigint;
  /** Milliseconds since 1970, UTC. */
  readonly occurredAt: number;
  readonly kind: GroupKind;
  readonly jobId: string | null;
  readonly chargeSheetId: string | null;
  /** The weigh-in that it closes: its start reading belongs to these masses. */
  readonly closesGroupId?: string | null;
  /** Reversed by a later group. It and the reversal are left out of every timeline: their masses cancel. */
  readonly reversed?: boolean;
  readonly readings: readonly JudgedReading[];
  readonly masses: readonly JudgedMass[];
  readonly statements: readonly JudgedStatement[];
}

export interface TimelinePosition {
  readonly occurredAt: number;
  readonly sequence: number | bigint;
}

/** Negative, zero, positive, for sorting a timeline. */
export function compareInTimeline(one: TimelinePosition, other: TimelinePosition): number {
  if (one.occurredAt !== other.occurredAt) return one.occurredAt - other.occurredAt;
  return one.sequence < other.sequence ? -1 : one.sequence > other.sequence ? 1 : 0;
}

const isAt = (place: Place, kind: 'cylinder' | 'unit', id: string): boolean => place.place === kind && place.id === id;

export const touchesCylinder = (group: JudgedGroup, cylinderId: string): boolean =>
  group.readings.some((reading) => reading.cylinderId === cylinderId) ||
  group.masses.some((mass) => isAt(mass.from, 'cylinder', cylinderId) || isAt(mass.to, 'cylinder', cylinderId));

export const touchesUnit = (group: JudgedGroup, unitId: string): boolean =>
  group.statements.some((statement) => statement.id === unitId) ||
  group.masses.some((mass) => isAt(mass.from, 'unit', unitId) || isAt(mass.to, 'unit', unitId));

/** The cylinders and units whose timelines this group stands in. */
export function placesJudged(group: JudgedGroup): { cylinderIds: string[]; unitIds: string[] } {
  const cylinderIds = new Set(group.readings.map((reading) => reading.cylinderId));
  const unitIds = new Set(group.statements.map((statement) => statement.id));
  for (const place of group.masses.flatMap((mass) => [mass.from, mass.to])) {
    if (place.place === 'cylinder') cylinderIds.add(place.id);
    if (place.place === 'unit') unitIds.add(place.id);
  }
  return { cylinderIds: [...cylinderIds].sort(), unitIds: [...unitIds].sort() };
}

/** The groups that stand, in the order in which they are judged. */
export const timelineOf = (groups: readonly JudgedGroup[]): JudgedGroup[] =>
  groups.filter((group) => !group.reversed).toSorted(compareInTimeline);

/** An entered mass whose refrigerant may be left open, because it comes from a mixed cylinder. */
export type EnteredMass = Omit<JudgedMass, 'refrigerant'> & { readonly refrigerant: string | null };

/** A request as the judge reads it, but for the refrigerants that a mixed cylinder leaves open (`splitMass`). */
export type EnteredGroup = Omit<JudgedGroup, 'masses'> & { readonly masses: readonly EnteredMass[] };

/**
 * What a request says, in micrograms. A mass was weighed by the scale of the cylinder where it arrived if that was
 * weighed in this group, else by the scale of the cylinder that it left.
 */
export function enteredGroup(
  request: EntryGroupRequest,
  known: { sequence: number | bigint; scaleOf: (toolId: string | null) => Scale },
): EnteredGroup {
  const requested = request.readings ?? [];
  const scaleAt = (place: Place): Scale | null => {
    const reading = requested.find(({ cylinderId }) => isAt(place, 'cylinder', cylinderId));
    return reading ? known.scaleOf(reading.toolId ?? null) : null;
  };
  return {
    id: request.groupId,
    sequence: known.sequence,
    occurredAt: Date.parse(request.occurredAt),
    kind: request.kind,
    jobId: request.jobId ?? null,
    chargeSheetId: request.chargeSheetId ?? null,
    closesGroupId: request.closesGroupId ?? null,
    readings: requested.map((reading) => ({
      cylinderId: reading.cylinderId,
      moment: reading.moment,
      mode: reading.mode,
      grossMicrograms: microgramsOfTyped({ value: reading.value, unit: reading.unit }),
      hoseFullMicrograms: reading.hoseFull && reading.hose ? microgramsOfTyped(reading.hose) : 0n,
      scale: known.scaleOf(reading.toolId ?? null),
      toolId: reading.toolId ?? null,
      at: Date.parse(reading.at ?? request.occurredAt),
    })),
    masses: (request.entries ?? []).map((entry) => {
      const from = toPlace(entry.from);
      const to = toPlace(entry.to);
      const scale = entry.howKnown === 'weighed' ? (scaleAt(to) ?? scaleAt(from)) : null;
      return {
        refrigerant: entry.refrigerant ?? null,
        massMicrograms: microgramsOfTyped(entry.mass),
        from,
        to,
        howKnown: entry.howKnown,
        scale,
      };
    }),
    statements: (request.statements ?? []).map(({ about, id, is, by }) => ({ about, id, is, by: by ?? null })),
  };
}

/**
 * A mass whose refrigerant is open, divided by the book of the cylinder that it leaves: as it stands before the masses
 * of its group (`cylinderBookBeforeMasses`). Null where that cylinder holds nothing by its book.
 */
export function splitMass(mass: EnteredMass, bookOfSource: MassByRefrigerant): JudgedMass[] | null {
  const { refrigerant } = mass;
  if (refrigerant !== null) return [{ ...mass, refrigerant }];
  const parts = splitByBook(bookOfSource, mass.massMicrograms);
  if (!parts) return null;
  return Object.entries(parts).map(([part, massMicrograms]) => ({ ...mass, refrigerant: part, massMicrograms }));
}
