import { pressureRatingHolds } from '../../shared/cylinder-fill/cylinder-limits.ts';
import { heldIn, limitOf } from '../../shared/ledger/cylinder-state.ts';
import type { EntryGroupRequest, GroupKind } from '../../shared/ledger/entry-group.schema.ts';
import { gramsText } from '../../shared/ledger/grams-text.ts';
import { fillsAgain, isFill } from '../../shared/ledger/judge-cylinder.ts';
import type { JudgedGroup } from '../../shared/ledger/judged-group.ts';
import { type MassByRefrigerant, massOf, refrigerantsOf, totalOf } from '../../shared/ledger/mass-by-refrigerant.ts';
import { cylinderPlace, type PlaceFields, type PlaceKind, samePlace } from '../../shared/ledger/place.ts';
import { CALENDAR, isInCalendar } from '../../shared/lists/list.schema.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import { requireRefrigerant } from '../../shared/reference/require-row.ts';
import { LARGEST_MICROGRAMS, microgramsOfTyped, type TypedMass } from '../../shared/units/mass.ts';
import { isStoredMassUnit, STORED_MASS_UNITS } from '../../shared/units/stored-mass.ts';
import { belongsRefusal } from '../jobs/job-of-unit.ts';
import { bookAfter, bookBefore, movedMasses } from './books-after.ts';
import type { JudgedPosting, Posting } from './judge-posting.ts';
import type { PostingFacts, StoredGroup } from './posting-facts.ts';

/** A clock that is this far ahead is an ordinary clock. */
export const CLOCK_ALLOWANCE_MS = 2 * 60_000;
/** A device whose clock is ahead may say so; beyond this the client asks its person. */
const LARGEST_SKEW_MS = 60 * 60_000;

export interface Asked {
  body: EntryGroupRequest;
  /** Where the body stands in the request: `` or `/replacement`. */
  at: string;
  /** The weigh-in that it closes, if there is one of that id. */
  opening: StoredGroup | null;
  now: Date;
  facts: PostingFacts;
  reference: Pick<ReferenceData, 'findRefrigerant'>;
}

/** What can be refused before anything is judged: times, references, refrigerants, masses, places, the weigh-in. */
export function requestRefusals(asked: Asked): Refusal[] {
  const outside = calendarRefusals(asked);
  if (outside.length > 0) return outside;
  return [
    ...timeRefusals(asked),
    ...referenceRefusals(asked),
    ...massRefusals(asked),
    ...placeRefusals(asked),
    ...closingRefusals(asked),
  ];
}

/** Times and days that no calendar of ours has. */
function calendarRefusals({ body, at }: Asked): Refusal[] {
  const said = [
    { path: '/occurredAt', given: body.occurredAt },
    { path: '/deviceSentAt', given: body.deviceSentAt ?? null },
    ...(body.readings ?? []).map((reading, index) => ({ path: `/readings/${index}/at`, given: reading.at ?? null })),
    ...(body.documents ?? []).map(({ date }, index) => ({ path: `/documents/${index}/date`, given: date })),
  ];
  return outsideCalendar(said, at);
}

/** What a device says of its clock, of a request that posts no group of its own. */
export const deviceTimeRefusals = (body: { deviceSentAt?: string | null | undefined }): Refusal[] =>
  outsideCalendar([{ path: '/deviceSentAt', given: body.deviceSentAt ?? null }], '');

function outsideCalendar(said: readonly { path: string; given: string | null }[], at: string): Refusal[] {
  const allowed = [CALENDAR.first, CALENDAR.last];
  return said
    .filter(({ given }) => given !== null && !isInCalendar(given))
    .map(({ path, given }) => ({ code: 'outOfCalendar', path: `${at}${path}`, given, allowed, params: CALENDAR }));
}

function timeRefusals({ body, at, now }: Asked): Refusal[] {
  const skew = body.deviceSentAt ? Date.parse(body.deviceSentAt) - now.getTime() : 0;
  const allowance = CLOCK_ALLOWANCE_MS + Math.min(Math.max(skew, 0), LARGEST_SKEW_MS);
  const latest = new Date(now.getTime() + allowance);
  const times = [
    { path: '/occurredAt', instant: body.occurredAt },
    ...(body.readings ?? []).flatMap((reading, index) =>
      reading.at ? [{ path: `/readings/${index}/at`, instant: reading.at }] : [],
    ),
  ];
  return times.flatMap(({ path, instant }): Refusal[] => {
    const given = { path: `${at}${path}`, given: instant };
    if (Date.parse(instant) > latest.getTime()) {
      return [{ ...given, code: 'inFuture', allowed: now.toISOString() }];
    }
    return Date.parse(instant) < 0 ? [{ ...given, code: 'beforeRecords', allowed: '1970-01-01T00:00:00Z' }] : [];
  });
}

function referenceRefusals({ body, at, facts, reference }: Asked): Refusal[] {
  const refusals: Refusal[] = [];
  const need = (exists: boolean, path: string, given: string): void => {
    if (!exists) refusals.push({ code: 'notKnownHere', path: `${at}${path}`, given });
  };
  const { unitId, jobId, chargeSheetId, supervisedBy } = body;
  if (unitId) need(facts.units.has(unitId), '/unitId', unitId);
  if (supervisedBy) need(facts.people.has(supervisedBy), '/supervisedBy', supervisedBy);
  const belongings = [
    ['/jobId', jobId, facts.jobs],
    ['/chargeSheetId', chargeSheetId, facts.chargeSheets],
  ] as const;
  for (const [path, id, known] of belongings) {
    if (id) refusals.push(...belongsRefusal({ path: `${at}${path}`, id, unitId }, known.get(id)));
  }
  body.readings?.forEach(({ cylinderId, toolId }, index) => {
    need(facts.cylinders.has(cylinderId), `/readings/${index}/cylinderId`, cylinderId);
    if (toolId) need(facts.scales.has(toolId), `/readings/${index}/toolId`, toolId);
  });
  body.statements?.forEach(({ id }, index) => {
    need(facts.units.has(id), `/statements/${index}/id`, id);
  });
  body.entries?.forEach((entry, index) => {
    for (const end of ['from', 'to'] as const) {
      const { id } = entry[end];
      if (id) need(placeExists(entry[end], facts), `/entries/${index}/${end}/id`, id);
    }
    const { refrigerant } = entry;
    if (refrigerant) {
      const known = requireRefrigerant(reference, refrigerant, `${at}/entries/${index}/refrigerant`);
      if (!known.ok) refusals.push(...known.refusals);
    }
  });
  return refusals;
}

function placeExists({ place, id }: PlaceFields, { cylinders, units, parties }: PostingFacts): boolean {
  if (!id) return true;
  if (place === 'cylinder') return cylinders.has(id);
  return place === 'unit' ? units.has(id) : parties.has(`${place}:${id}`);
}

/** Whole micrograms above zero and at most 4,000 t: what the books can hold. */
function massRefusals({ body, at }: Asked): Refusal[] {
  const masses: { path: string; typed: TypedMass; mayBeZero: boolean }[] = [
    ...(body.entries ?? []).map(({ mass }, index) => {
      return { path: `/entries/${index}/mass/value`, typed: mass, mayBeZero: false };
    }),
    ...(body.readings ?? []).map(({ value, unit }, index) => {
      return { path: `/readings/${index}/value`, typed: { value, unit }, mayBeZero: true };
    }),
    ...(body.readings ?? []).flatMap(({ hose }, index) =>
      hose ? [{ path: `/readings/${index}/hose/value`, typed: hose, mayBeZero: true }] : [],
    ),
    ...(body.documents ?? []).flatMap(({ mass }, index) =>
      mass ? [{ path: `/documents/${index}/mass/value`, typed: mass, mayBeZero: false }] : [],
    ),
  ];
  return masses.flatMap(({ path, typed, mayBeZero }): Refusal[] => {
    const mass = microgramsOfTyped(typed);
    const where = { path: `${at}${path}`, given: `${typed.value} ${typed.unit}` };
    if (!isStoredMassUnit(typed.unit)) {
      return [{ ...where, code: 'notAllowedValue', given: typed.unit, allowed: STORED_MASS_UNITS }];
    }
    if (mass > LARGEST_MICROGRAMS || mass < -LARGEST_MICROGRAMS) {
      return [{ ...where, code: 'massTooLarge', allowed: '4000 t' }];
    }
    return mass === 0n && !mayBeZero ? [{ ...where, code: 'massNotPositive', allowed: '0.000001 g' }] : [];
  });
}

/** Where refrigerant enters the log by a word, not from a place: each with the groups that may say it. */
const BY_WORD: Partial<Record<PlaceKind, readonly GroupKind[]>> = {
  factory: ['factoryCharge', 'warrantyReplacement'],
  opening: ['opening'],
};

function placeRefusals({ body, at }: Asked): Refusal[] {
  const { kind } = body;
  return (body.entries ?? []).flatMap((entry, index) =>
    (['from', 'to'] as const).flatMap((end): Refusal[] => {
      const { place, as } = entry[end];
      const where = { path: `${at}/entries/${index}/${end}`, given: as ? `${place} (${as})` : place };
      const isJudged = as === 'inferred' || as === 'beforeOurCare';
      if (isJudged && kind !== 'monthClose') return [{ ...where, code: 'placeOnlyByServer' }];
      const kinds = BY_WORD[place];
      return kinds && !kinds.includes(kind) ? [{ ...where, code: 'placeNotOfThisKind', allowed: kinds }] : [];
    }),
  );
}

function closingRefusals({ body, at, opening }: Asked): Refusal[] {
  if (!body.closesGroupId) return [];
  const path = `${at}/closesGroupId`;
  const given = body.closesGroupId;
  if (!opening) return [{ code: 'notKnownHere', path, given }];
  if (!opening.openWeighIn || opening.reversed || opening.closedByGroupId) {
    return [{ code: 'weighInNotOpen', path, given }];
  }
  const refusals: Refusal[] = [];
  if (Date.parse(body.occurredAt) !== opening.occurredAt) {
    const allowed = new Date(opening.occurredAt).toISOString();
    refusals.push({ code: 'keepsOccurredAt', path: `${at}/occurredAt`, given: body.occurredAt, allowed });
  }
  if ((body.unitId ?? null) !== opening.unitId) {
    refusals.push({ code: 'ofAnotherUnit', path: `${at}/unitId`, given: body.unitId ?? null, allowed: opening.unitId });
  }
  const [start] = opening.readings;
  if (
    start &&
    !body.readings?.some(({ moment, cylinderId }) => moment === 'after' && cylinderId === start.cylinderId)
  ) {
    refusals.push({ code: 'closesItsCylinder', path: `${at}/readings`, allowed: start.cylinderId });
  }
  return refusals;
}

/**
 * What may happen but needs its reason: a second refrigerant in a cylinder, contents past its limit or of more pressure
 * than it bears, a non-refillable cylinder refilled, one filled past its re-test. Asked of the group that brings it about; a correction of an earlier one is not asked.
 */
export function reasonRefusals(
  posting: Posting,
  judged: JudgedPosting,
  facts: PostingFacts,
  reason: string | null | undefined,
): Refusal[] {
  if (reason?.trim() || !judged.added) return [];
  const { group } = judged.added;
  const path = `${posting.addedAt ?? ''}/reason`;
  const moved = movedMasses(judged.changes, group, posting.reversed);
  return judged.places.flatMap(({ place }): Refusal[] => {
    const cylinder = place.place === 'cylinder' ? facts.cylinders.get(place.id) : undefined;
    if (!cylinder) return [];
    const before = bookBefore(place, facts);
    const after = bookAfter(place, before, moved);
    const arriving = arrivalsAt(cylinder.register.cylinderId, group, judged);
    const tag = { place: cylinder.tag };
    const refusals: Refusal[] = [];
    for (const second of secondRefrigerants(before, after, arriving)) {
      const held = refrigerantsOf(after).filter((refrigerant) => refrigerant !== second);
      refusals.push({ code: 'reasonForSecondRefrigerant', path, given: second, allowed: held.join(', '), params: tag });
    }
    const { collar, nonRefillable } = cylinder.register;
    const limitMicrograms = limitOf(cylinder.register, heldIn(after));
    const content = totalOf(after);
    if (limitMicrograms !== null && content > limitMicrograms && content > totalOf(before) && arriving.length > 0) {
      const figures = { given: gramsText(content), allowed: gramsText(limitMicrograms) };
      refusals.push({ code: 'reasonForPastLimit', path, ...figures, params: tag });
    }
    const fills = group.masses.filter(({ to }) => samePlace(to, place));
    const isFilled = fills.some(({ from }) => isFill(from.place));
    if (nonRefillable && isFilled) refusals.push({ code: 'reasonForRefill', path, params: tag });
    const { servicePressureKPaGauge, jurisdiction, retestOverdueFrom } = collar;
    // Who only says what is in it has put nothing in: that is flagged and not asked.
    const putIn = fills.filter(({ from }) => from.place !== 'opening' && from.place !== 'missing');
    for (const refrigerant of new Set(putIn.map((mass) => mass.refrigerant))) {
      if (pressureRatingHolds(servicePressureKPaGauge, [refrigerant], jurisdiction) !== false) continue;
      refusals.push({ code: 'reasonForPressure', path, given: refrigerant, params: tag });
    }
    const isFilledAgain = fills.some(({ from }) => fillsAgain(from.place, cylinder.state?.opened ?? true));
    if (isFilledAgain && retestOverdueFrom !== null && group.occurredAt >= retestOverdueFrom) {
      refusals.push({ code: 'reasonForRetest', path, params: tag });
    }
    return refusals;
  });
}

/** Refrigerants that the group itself brings into the cylinder, in the order of their entries. */
function arrivalsAt(cylinderId: string, group: JudgedGroup, judged: JudgedPosting): string[] {
  const place = cylinderPlace(cylinderId);
  const own = judged.changes.filter(({ correctsGroupId }) => correctsGroupId === null);
  return [...group.masses, ...own].filter(({ to }) => samePlace(to, place)).map(({ refrigerant }) => refrigerant);
}

/** Of several that come into an empty cylinder at once, the first is not the second. */
function secondRefrigerants(
  before: MassByRefrigerant,
  after: MassByRefrigerant,
  arriving: readonly string[],
): string[] {
  const isNew = (refrigerant: string) => massOf(before, refrigerant) <= 0n && massOf(after, refrigerant) > 0n;
  const order = [...new Set(arriving)].filter(isNew);
  const holdsOther = refrigerantsOf(after).some(
    (refrigerant) => !order.includes(refrigerant) && massOf(after, refrigerant) > 0n,
  );
  return holdsOther ? order : order.slice(1);
}
