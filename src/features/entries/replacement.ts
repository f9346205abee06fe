import Fraction from 'fraction.js';
import type { z } from 'zod';
import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import type { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { MASS_FACTORS, type MassUnit } from '../../../shared/units/factors.ts';
import { exactGramsOfTyped, type TypedMass } from '../../../shared/units/mass.ts';

type Reading = GroupView['readings'][number];
type Entry = GroupView['entries'][number];
export type GroupRequest = z.input<typeof entryGroupRequest>;

/** What a form can put right at once: one mass to or from one cylinder, with at most a reading before and after. */
export interface SimpleGroup {
  entry: Entry;
  cylinderId: string;
  /** The cylinder gives the mass, or takes it. */
  gives: boolean;
  readings: readonly Reading[];
  /** The mass is the difference of two readings, and follows them. */
  weighed: boolean;
}

export function simpleGroup(group: GroupView): SimpleGroup | null {
  const own = group.entries.filter(({ addedByServer }) => !addedByServer);
  const [entry] = own;
  if (!entry || own.length !== 1 || !entry.typed || group.openWeighIn || group.closesGroupId) return null;
  const ends = [entry.from, entry.to].filter(({ place }) => place === 'cylinder');
  const cylinderId = ends[0]?.id;
  if (!cylinderId || ends.length !== 1) return null;
  if (group.readings.length > 2 || group.readings.some((reading) => reading.cylinderId !== cylinderId)) return null;
  const moments = group.readings.map(({ moment }) => moment);
  const weighed = moments.includes('before') && moments.includes('after');
  return { entry, cylinderId, gives: entry.from.id === cylinderId, readings: group.readings, weighed };
}

export interface TypedReading {
  moment: string;
  typed: TypedMass;
}

/**
 * The mass that two readings give, exactly, in their own unit where they share one, else in grams. Below zero: it went
 * the other way round. A hose that was full at the start counts as content of the cylinder.
 */
export function massOfReadings(
  { gives }: Pick<SimpleGroup, 'gives'>,
  readings: readonly TypedReading[],
  hose: TypedMass | null,
): { value: string; unit: MassUnit; sign: -1 | 0 | 1 } | null {
  const before = readings.find(({ moment }) => moment === 'before')?.typed;
  const after = readings.find(({ moment }) => moment === 'after')?.typed;
  if (!before || !after) return null;
  const unit = before.unit === after.unit && (!hose || hose.unit === before.unit) ? before.unit : 'g';
  const grams = exactGramsOfTyped(before)
    .add(hose ? exactGramsOfTyped(hose) : 0)
    .sub(exactGramsOfTyped(after));
  const moved = (gives ? grams : grams.neg()).div(MASS_FACTORS[unit].perUnit);
  return { value: decimal(moved.abs()), unit, sign: moved.compare(0) as -1 | 0 | 1 };
}

/** A plain decimal, to nine places where it never ends. */
function decimal(value: Fraction): string {
  const text = value.toString(9);
  return text.includes('(') ? value.round(9).toString(9) : text;
}

export interface Replacement {
  groupId: string;
  entryId: string;
  readingIds: readonly string[];
  cylinderId: string;
  mass: TypedMass;
  /** As many as the original has, in its order. */
  readings: readonly TypedMass[];
  reason: string;
}

/** What the list of readings and the registers know that a group's own view does not say. */
export interface Known {
  toolIdOf: (readingId: string) => string | null;
  supervisedBy: string | null;
}

/** The right group as a request: the original with another mass, other readings or another cylinder. */
export function replacementRequest(
  group: GroupView,
  { entry, cylinderId: wrongId, readings }: SimpleGroup,
  right: Replacement,
  known: Known,
): GroupRequest {
  const end = ({ place, id, as }: Entry['from']) =>
    ({ place, ...(id ? { id: id === wrongId ? right.cylinderId : id } : {}), ...(as ? { as } : {}) }) as never;
  return {
    groupId: right.groupId,
    schema: 1,
    kind: group.kind,
    unitId: group.unitId,
    jobId: group.jobId,
    chargeSheetId: group.chargeSheetId,
    supervisedBy: known.supervisedBy,
    occurredAt: group.occurredAt,
    readings: readings.map((reading, index) => ({
      id: right.readingIds[index] as string,
      cylinderId: right.cylinderId,
      toolId: known.toolIdOf(reading.id),
      moment: reading.moment as 'before',
      mode: reading.mode as 'gross',
      value: right.readings[index]?.value ?? reading.value,
      unit: (right.readings[index]?.unit ?? reading.unit) as MassUnit,
      hoseFull: reading.hoseFull,
      hose: reading.hoseG === null ? null : { value: decimal(new Fraction(reading.hoseG)), unit: 'g' },
    })),
    entries: [
      {
        id: right.entryId,
        refrigerant: entry.refrigerant,
        mass: right.mass,
        from: end(entry.from),
        to: end(entry.to),
        howKnown: entry.howKnown as 'weighed',
      },
    ],
    statements: group.statements.map(({ id, is, by }) => ({ about: 'unit', id, is: is as 'full', by: by as null })),
    documents: group.documents.map((document) => documentWith(document, entry, right.mass)),
    reason: right.reason.trim() || null,
    note: group.note,
  };
}

/** A document as a group's view shows it. */
interface SeenDocument {
  kind: 'invoice';
  number: string;
  date: string;
  refrigerant: string | null;
  typed: TypedMass | null;
}

/** An invoice that carried the wrong mass carries the right one. */
function documentWith(seen: Record<string, unknown>, entry: Entry, mass: TypedMass) {
  const { kind, number, date, refrigerant, typed } = seen as unknown as SeenDocument;
  const same = typed && entry.typed && typed.value === entry.typed.value && typed.unit === entry.typed.unit;
  return { kind, number, date, refrigerant, mass: same ? mass : typed };
}
