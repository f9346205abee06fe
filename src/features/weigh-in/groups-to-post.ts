import type { EntryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { wouldAsk } from '../../../shared/ledger/judge-unit.ts';
import { enteredGroup, type JudgedGroup } from '../../../shared/ledger/judged-group.ts';
import type { Scale } from '../../../shared/ledger/scale.ts';
import { emptyUnitState } from '../../../shared/ledger/unit-state.ts';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { microgramsOfGrams, microgramsOfTyped } from '../../../shared/units/mass.ts';
import { typedIntoUnit, type WeighedPart } from './leg-figures.ts';
import { type KeyedReading, typedOf } from './scale-reading.ts';
import type { HoseEnd, Leg, WeighIn } from './weigh-in-state.ts';

export interface PostContext {
  unitId: string;
  refrigerant: string;
  jobId: string | null;
}

type Readings = NonNullable<EntryGroupRequest['readings']>;
type Entries = NonNullable<EntryGroupRequest['entries']>;

/**
 * What a finished weigh-in posts, in order: the vacuum on the whole circuit, if there was one, in a group of its own,
 * then the readings and masses of every cylinder in one group.
 */
export function finishedGroups(weighIn: WeighIn, context: PostContext): EntryGroupRequest[] {
  const end = weighIn.legs.at(-1)?.endAt;
  if (!weighIn.purpose || !end) return [];
  const occurredAt = weighIn.occurredAt ?? end;
  return [
    ...vacuumGroup(weighIn, context, occurredAt),
    massGroup(weighIn, context, weighIn.ids.main, weighIn.legs, occurredAt),
  ];
}

/**
 * What is posted when the cylinder in hand is left on the scale and weighed back later: what was weighed so far, whole,
 * then the start reading alone.
 */
export function openGroups(weighIn: WeighIn, context: PostContext): EntryGroupRequest[] {
  const leg = weighIn.legs.at(-1);
  if (!weighIn.purpose || !leg?.startAt || leg.mode === 'zeroed') return [];
  const finished = weighIn.legs.slice(0, -1);
  const finishedAt = finished.at(-1)?.endAt;
  const earliest = finishedAt ?? leg.startAt;
  return [
    ...vacuumGroup(weighIn, context, earliest),
    ...(finishedAt ? [massGroup(weighIn, context, weighIn.ids.part, finished, finishedAt)] : []),
    {
      ...head(weighIn, context, weighIn.ids.open, leg.startAt),
      openWeighIn: true,
      readings: [startReading(leg)],
      note: weighIn.note.trim() || null,
    },
  ];
}

/** A vacuum on lines alone, or none, states nothing and posts nothing. */
function vacuumGroup(weighIn: WeighIn, { unitId, jobId }: PostContext, notAfter: string): EntryGroupRequest[] {
  if (weighIn.purpose !== 'fullRecharge' || weighIn.vacuum !== 'whole' || !weighIn.vacuumAt) return [];
  const occurredAt = Date.parse(weighIn.vacuumAt) <= Date.parse(notAfter) ? weighIn.vacuumAt : notAfter;
  return [
    {
      groupId: weighIn.ids.vacuum,
      schema: 1,
      kind: 'vacuum',
      unitId,
      jobId,
      occurredAt,
      statements: [{ about: 'unit', id: unitId, is: 'empty', by: 'vacuum' }],
    },
  ];
}

const head = (weighIn: WeighIn, { unitId, jobId }: PostContext, groupId: string, occurredAt: string) => ({
  groupId,
  schema: 1 as const,
  kind: weighIn.purpose ?? ('extraCharge' as const),
  unitId,
  jobId,
  chargeSheetId: weighIn.sheetId,
  occurredAt,
});

function massGroup(
  weighIn: WeighIn,
  context: PostContext,
  groupId: string,
  legs: readonly Leg[],
  occurredAt: string,
): EntryGroupRequest {
  const isLast = groupId === weighIn.ids.main;
  return {
    ...head(weighIn, context, groupId, occurredAt),
    readings: legs.flatMap((leg): Readings => [startReading(leg), endReading(leg)]),
    entries: legs.flatMap((leg) =>
      massesOf(leg, leg.now, leg.hoseEnd, leg.hoseInto, { ...context, cylinderId: leg.cylinderId, ids: leg.ids }),
    ),
    statements:
      isLast && weighIn.answer !== null ? [{ about: 'unit', id: context.unitId, is: weighIn.answer, by: null }] : [],
    reason: weighIn.reason.trim() || null,
    note: isLast ? weighIn.note.trim() || null : null,
  };
}

function startReading(leg: Leg): Readings[number] {
  const typed = leg.mode === 'zeroed' ? { value: '0', unit: zeroUnit(leg) } : typedOf(leg.start);
  if (!typed) throw new RangeError('A weigh-in without its start reading is not posted');
  const hose = leg.hose.content;
  return {
    id: leg.ids.before,
    cylinderId: leg.cylinderId,
    toolId: leg.toolId,
    at: leg.startAt,
    moment: 'before',
    mode: leg.mode,
    ...typed,
    hoseFull: leg.hose.full && hose !== null,
    hose,
  };
}

const zeroUnit = (leg: Leg) => typedOf(leg.now)?.unit ?? 'g';

function endReading(leg: Leg): Readings[number] {
  const typed = typedOf(leg.now);
  if (!typed) throw new RangeError('A weigh-in without its end reading is not posted');
  return {
    id: leg.ids.after,
    cylinderId: leg.cylinderId,
    toolId: leg.toolId,
    at: leg.endAt,
    moment: 'after',
    mode: leg.mode,
    value: leg.mode === 'zeroed' && Number(typed.value) > 0 ? `-${typed.value}` : typed.value,
    unit: typed.unit,
  };
}

interface MassContext extends PostContext {
  cylinderId: string;
  ids: { mass: string; hose: string };
}

/** The mass into the unit, and the hose's content where it went elsewhere. Emptied into the unit it is part of the mass. */
function massesOf(
  part: WeighedPart,
  end: KeyedReading,
  hoseEnd: HoseEnd | null,
  hoseInto: string | null,
  { unitId, refrigerant, cylinderId, ids }: MassContext,
): Entries {
  const from = { place: 'cylinder' as const, id: cylinderId };
  const mass = typedIntoUnit(part, end, hoseEnd ?? 'lost');
  const entries: Entries = mass
    ? [{ id: ids.mass, refrigerant, mass, from, to: { place: 'unit', id: unitId }, howKnown: 'weighed' }]
    : [];
  const { content } = part.hose;
  if (content === null || hoseEnd === null || hoseEnd === 'emptied' || Number(content.value) === 0) return entries;
  const to =
    hoseEnd === 'recovered' && hoseInto
      ? { place: 'cylinder' as const, id: hoseInto }
      : { place: 'atmosphere' as const, as: 'hose' as const };
  return [...entries, { id: ids.hose, refrigerant, mass: content, from, to, howKnown: 'estimated' }];
}

export interface WeighBack {
  groupId: string;
  ids: { after: string; mass: string; hose: string };
  end: KeyedReading;
  endAt: string;
  toolId: string | null;
  hoseEnd: HoseEnd | null;
  hoseInto: string | null;
  answer: WeighIn['answer'];
  reason: string;
  note: string;
}

export interface OpenStart {
  groupId: string;
  cylinderId: string;
  kind: EntryGroupRequest['kind'];
  chargeSheetId: string | null;
  /** The closing group keeps it. */
  startedAt: string;
  start: KeyedReading;
  hose: Leg['hose'];
}

/** What was weighed by an open weigh-in, as the arithmetic of a leg sees it. */
export const partOf = ({ start, hose }: OpenStart): WeighedPart => ({ mode: 'gross', start, hose });

/** The group that closes an open weigh-in: its after reading and the masses, dated as the start. */
export function closingGroup(open: OpenStart, back: WeighBack, context: PostContext): EntryGroupRequest {
  const typed = typedOf(back.end);
  if (!typed) throw new RangeError('A weigh-in without its end reading is not posted');
  return {
    groupId: back.groupId,
    schema: 1,
    kind: open.kind,
    unitId: context.unitId,
    jobId: context.jobId,
    chargeSheetId: open.chargeSheetId,
    occurredAt: open.startedAt,
    closesGroupId: open.groupId,
    readings: [
      {
        id: back.ids.after,
        cylinderId: open.cylinderId,
        toolId: back.toolId,
        at: back.endAt,
        moment: 'after',
        mode: 'gross',
        ...typed,
      },
    ],
    entries: massesOf(partOf(open), back.end, back.hoseEnd, back.hoseInto, {
      ...context,
      cylinderId: open.cylinderId,
      ids: back.ids,
    }),
    statements: back.answer === null ? [] : [{ about: 'unit', id: context.unitId, is: back.answer, by: null }],
    reason: back.reason.trim() || null,
    note: back.note.trim() || null,
  };
}

/**
 * Would the judge ask whether the unit is full after this group? The client knows the book, not the uncertainty that it
 * has gathered, so it asks a little more often than the server; an answer given is never wrong.
 */
export function asksIfFull(
  unit: Pick<Unit, 'id' | 'refrigerant' | 'fullCharge' | 'book'>,
  group: EntryGroupRequest,
  known: { emptied: boolean; fullChargeG: number | null; scaleOf: (toolId: string | null) => Scale },
): boolean {
  const at = Date.parse(group.occurredAt);
  const stated = known.fullChargeG ?? unit.fullCharge?.massG ?? null;
  const judged = enteredGroup(group, { sequence: 0, scaleOf: known.scaleOf });
  return wouldAsk(
    {
      unitId: unit.id,
      refrigerants: [{ refrigerant: unit.refrigerant, validFrom: 0 }],
      fullCharges:
        stated === null
          ? []
          : [{ refrigerant: unit.refrigerant, massMicrograms: microgramsOfGrams(stated), validFrom: 0, jobId: null }],
    },
    {
      ...emptyUnitState,
      lastPosition: { occurredAt: at, sequence: 0 },
      known: known.emptied || unit.book.known,
      book: known.emptied
        ? {}
        : Object.fromEntries(unit.book.byRefrigerant.map((one) => [one.refrigerant, microgramsOfGrams(one.massG)])),
    },
    judged as JudgedGroup,
  );
}

/** All that goes into the unit by this group, in grams. */
export function intoUnitG(group: EntryGroupRequest): number {
  const masses = (group.entries ?? []).filter((entry) => entry.to.place === 'unit');
  return Number(masses.reduce((sum, { mass }) => sum + microgramsOfTyped(mass), 0n)) / 1e6;
}
