import fc from 'fast-check';
import type { CylinderRegister } from '../cylinder-state.ts';
import type { JudgedGroup, JudgedMass, JudgedReading, JudgedStatement } from '../judged-group.ts';
import { atmosphere, cylinderPlace, type Place, unitPlace } from '../place.ts';
import type { Scale } from '../scale.ts';
import type { UnitRegister } from '../unit-state.ts';

/** A world of five cylinders and three units, in which anything is entered in any order of time. */
export const TARE = 7_700_000_000n;
const g = (grams: number): bigint => BigInt(Math.round(grams * 1e6));
const SCALES: Scale[] = [
  { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 },
  { resolutionG: 1, repeatabilityG: 2, spanErrorRelative: 0.001, offsetG: 3 },
];

export const cylinderRegisters: CylinderRegister[] = [
  ['C1', 'R-410A'],
  ['C2', 'R-410A'],
  ['C3', 'R-32'],
  ['R1', 'R-410A'],
  ['R2', 'R-32'],
].map(([cylinderId = '', refrigerant = '']) => ({
  cylinderId,
  refrigerant,
  nonRefillable: cylinderId === 'C3',
  collar: {
    // Two with a stamped limit, the others by what is in them: a mixture then takes less.
    stampedLimitMicrograms: cylinderId === 'C3' || cylinderId === 'C1' ? g(9_000) : null,
    waterCapacityMicrograms: g(10_600),
    servicePressureKPaGauge: cylinderId === 'R1' ? 1_793 : 4_200,
    jurisdiction: 'US' as const,
    retestOverdueFrom: cylinderId === 'R2' ? Date.UTC(1970, 1, 1) : null,
  },
  tares: [{ validFrom: 0, tareMicrograms: TARE }],
}));
const FILLED: Record<string, string> = { C1: 'R-410A', C2: 'R-410A', C3: 'R-32' };

export const unitRegisters: UnitRegister[] = [
  { unitId: 'U1', fullCharge: 1_290 },
  { unitId: 'U2', fullCharge: 2_000 },
  { unitId: 'U3', fullCharge: null },
].map(({ unitId, fullCharge }) => ({
  unitId,
  refrigerants: [{ refrigerant: 'R-410A', validFrom: 0 }],
  fullCharges:
    fullCharge === null ? [] : [{ refrigerant: 'R-410A', massMicrograms: g(fullCharge), validFrom: 0, jobId: null }],
}));

export type GroupDraft = Omit<JudgedGroup, 'sequence'>;
export type Event =
  | { readonly does: 'post'; readonly group: GroupDraft }
  | { readonly does: 'reverse'; readonly groupId: string }
  | { readonly does: 'answer'; readonly groupId: string; readonly statement: JudgedStatement }
  | { readonly does: 'tare'; readonly cylinderId: string; readonly validFrom: number; readonly tareMicrograms: bigint }
  | {
      readonly does: 'fullCharge';
      readonly unitId: string;
      readonly validFrom: number;
      readonly massMicrograms: bigint;
    };

const massG = fc.oneof(
  fc.integer({ min: 1, max: 700 }),
  fc.integer({ min: 1, max: 12 }),
  fc.double({ min: 0.5, max: 900, noNaN: true }),
);
const scale = fc.constantFrom(...SCALES);
const unitId = fc.constantFrom('U1', 'U2', 'U3');
const job = fc.constantFrom(null, null, 'J1', 'J2');

const statementOf = (id: string): fc.Arbitrary<JudgedStatement> =>
  fc.oneof(
    fc.constantFrom(...(['full', 'notFull', 'moreThanFull', 'notKnown'] as const)).map((is) => {
      return { about: 'unit' as const, id, is, by: null };
    }),
    fc.constantFrom(...(['recovery', 'vacuum', 'foundFlat', 'open', null] as const)).map((by) => {
      return { about: 'unit' as const, id, is: 'empty' as const, by };
    }),
  );
const maybe = <T>(value: fc.Arbitrary<T>): fc.Arbitrary<T[]> =>
  fc.option(value, { nil: null }).map((one) => (one === null ? [] : [one]));

const reading = (cylinderId: string, moment: JudgedReading['moment'], contentG: number, by: Scale): JudgedReading => ({
  cylinderId,
  moment,
  mode: 'gross',
  grossMicrograms: TARE + g(contentG),
  hoseFullMicrograms: 0n,
  scale: by,
});
const weighed = (refrigerant: string, mass: number, from: Place, to: Place, by: Scale): JudgedMass => ({
  refrigerant,
  massMicrograms: g(mass),
  from,
  to,
  howKnown: 'weighed',
  scale: by,
});

type Parts = Pick<GroupDraft, 'kind' | 'readings' | 'masses' | 'statements'>;

/** Out of a cylinder, always with a start reading that holds what goes out: such a group is never refused. */
const outOfCylinder: fc.Arbitrary<Parts> = fc
  .record({
    from: fc.constantFrom('C1', 'C2', 'C3'),
    to: fc.oneof(unitId.map(unitPlace), fc.constant(cylinderPlace('R1'))),
    mass: massG,
    spare: fc.oneof(fc.integer({ min: 0, max: 8 }), fc.integer({ min: 0, max: 9_000 })),
    hose: fc.constantFrom(0, 0, 28),
    after: fc.option(fc.integer({ min: -40, max: 40 }), { nil: null }),
    scale,
  })
  .chain(({ from, to, mass, spare, hose, after, scale: by }) => {
    const refrigerant = FILLED[from] ?? '';
    const source = cylinderPlace(from);
    const lost = { ...weighed(refrigerant, hose || 1, source, atmosphere('hose'), by), howKnown: 'estimated' as const };
    const readings = [reading(from, 'before', mass + hose + spare, by)];
    if (after !== null) readings.push(reading(from, 'after', Math.max(0, spare + after), by));
    const masses = [weighed(refrigerant, mass, source, to, by), ...(hose ? [lost] : [])];
    const statements = to.place === 'unit' ? maybe(statementOf(to.id)) : fc.constant([]);
    return statements.map((said) => ({ kind: 'refill' as const, readings, masses, statements: said }));
  });

const outOfUnit: fc.Arbitrary<Parts> = fc
  .record({
    from: unitId,
    to: fc.constantFrom<Place>(cylinderPlace('R1'), cylinderPlace('R2'), atmosphere('measured')),
    refrigerant: fc.constantFrom('R-410A', 'R-410A', 'R-410A', 'R-32'),
    mass: massG,
    read: fc.option(fc.integer({ min: 0, max: 6_000 }), { nil: null }),
    scale,
  })
  .chain(({ from, to, refrigerant, mass, read, scale: by }) => {
    const readings = read !== null && to.place === 'cylinder' ? [reading(to.id, 'after', read, by)] : [];
    const masses = [weighed(refrigerant, mass, unitPlace(from), to, by)];
    return maybe(statementOf(from)).map((statements) => ({ kind: 'recovery' as const, readings, masses, statements }));
  });

const saidOnly: fc.Arbitrary<Parts> = unitId
  .chain(statementOf)
  .map((said) => ({ kind: 'vacuum', readings: [], masses: [], statements: [said] }));

const weighing: fc.Arbitrary<Parts> = fc
  .record({ id: fc.constantFrom('C1', 'C2', 'C3', 'R1', 'R2'), read: fc.integer({ min: -20, max: 9_500 }), scale })
  .map(({ id, read, scale: by }) => {
    return { kind: 'weighing', readings: [reading(id, 'only', read, by)], masses: [], statements: [] };
  });

const intoPlace: fc.Arbitrary<Parts> = fc
  .record({
    to: fc.constantFrom<Place>(cylinderPlace('C1'), cylinderPlace('C3'), unitPlace('U1'), unitPlace('U2')),
    mass: massG,
    read: fc.option(fc.integer({ min: 0, max: 9_000 }), { nil: null }),
    isStart: fc.boolean(),
    scale,
  })
  .map(({ to, mass, read, isStart, scale: by }) => {
    const cylinder = to.place === 'cylinder' ? to.id : null;
    const refrigerant = cylinder === null ? 'R-410A' : (FILLED[cylinder] ?? '');
    const from: Place =
      cylinder !== null
        ? { place: 'supplier', id: 'S' }
        : isStart
          ? { place: 'opening' }
          : { place: 'otherContractor', id: 'X' };
    const readings = cylinder !== null && read !== null ? [reading(cylinder, 'only', read, by)] : [];
    const masses = [{ ...weighed(refrigerant, mass, from, to, by), howKnown: 'invoice' as const }];
    return { kind: 'purchase', readings, masses, statements: [] };
  });

const DAY_MS = 86_400_000;

/** Groups at times of their own, some reversed, some answered later, and revisions of registers. */
export const randomTimeline: fc.Arbitrary<Event[]> = fc
  .record({
    parts: fc.array(
      fc.record({
        parts: fc.oneof(outOfCylinder, outOfCylinder, outOfUnit, saidOnly, weighing, intoPlace),
        jobId: job,
        hasSheet: fc.boolean(),
        reversed: fc.integer({ min: 0, max: 9 }).map((one) => one === 0),
        answer: fc.option(fc.constantFrom('full', 'notFull', 'moreThanFull'), { nil: null, freq: 4 }),
      }),
      { minLength: 2, maxLength: 12 },
    ),
    days: fc.uniqueArray(fc.integer({ min: 1, max: 400 }), { minLength: 12, maxLength: 12 }),
    tare: fc.option(fc.record({ day: fc.integer({ min: 1, max: 400 }), lessG: fc.integer({ min: 1, max: 300 }) }), {
      nil: null,
    }),
    fullCharge: fc.option(
      fc.record({ unitId, day: fc.integer({ min: 1, max: 400 }), mass: fc.integer({ min: 500, max: 2_500 }) }),
      { nil: null },
    ),
  })
  .map(({ parts, days, tare, fullCharge }) => {
    const events: Event[] = [];
    parts.forEach(({ parts: group, jobId, hasSheet, reversed, answer }, index) => {
      const id = `g${index}`;
      const occurredAt = (days[index] ?? 0) * DAY_MS;
      events.push({
        does: 'post',
        group: { ...group, id, occurredAt, jobId, chargeSheetId: hasSheet ? 'sheet' : null },
      });
      const about = group.masses.find(({ to }) => to.place === 'unit')?.to;
      if (answer !== null && about?.place === 'unit' && group.statements.length === 0) {
        events.push({ does: 'answer', groupId: id, statement: { about: 'unit', id: about.id, is: answer, by: null } });
      }
      if (reversed) events.push({ does: 'reverse', groupId: id });
    });
    if (tare) {
      const revised = { validFrom: tare.day * DAY_MS, tareMicrograms: TARE - g(tare.lessG) };
      events.push({ does: 'tare', cylinderId: 'C1', ...revised });
    }
    if (fullCharge) {
      const revised = { validFrom: fullCharge.day * DAY_MS, massMicrograms: g(fullCharge.mass) };
      events.push({ does: 'fullCharge', unitId: fullCharge.unitId, ...revised });
    }
    return events;
  });

/** The events in another order of arrival: by the keys, but an answer or a reversal never before its group. */
export function arriving(events: readonly Event[], keys: readonly number[]): Event[] {
  const keyed = events.map((event, index) => ({ event, key: keys[index % keys.length] ?? 0, index }));
  const shuffled = keyed.toSorted((a, b) => a.key - b.key || a.index - b.index).map(({ event }) => event);
  const follows = (event: Event): string | null => ('groupId' in event ? event.groupId : null);
  const inOrder: Event[] = [];
  for (const event of shuffled) {
    if (follows(event) !== null) continue;
    inOrder.push(event);
  }
  for (const event of shuffled) {
    const groupId = follows(event);
    if (groupId === null) continue;
    const earliest = inOrder.findIndex((one) => one.does === 'post' && one.group.id === groupId);
    const answers = inOrder.findLastIndex((one) => one.does === 'answer' && one.groupId === groupId);
    const position = Math.max(earliest, event.does === 'reverse' ? answers : -1) + 1;
    const spare = inOrder.length - position;
    const key = keys[(shuffled.indexOf(event) + 7) % keys.length] ?? 0;
    const isAnswered = inOrder.findIndex((one) => one.does === 'reverse' && one.groupId === groupId);
    const latest = event.does === 'answer' && isAnswered >= 0 ? isAnswered - position : spare;
    inOrder.splice(position + (latest > 0 ? key % (latest + 1) : 0), 0, event);
  }
  return inOrder;
}
