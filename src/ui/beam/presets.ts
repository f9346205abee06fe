import { type BeamMark, type BeamSegment, type BeamSpec, roundEnd } from './beam-spec.ts';

/** The unit that a beam counts in: grams that make one of it, and its name. From `useBeamUnit`. */
export interface BeamUnit {
  gramsPer: number;
  unit: string;
}

/** A mass with the words that go with it, figure and unit included. */
export interface Labelled {
  massG: number;
  label: string;
}

const only = <T>(part: T | null | undefined | false): T[] => (part ? [part] : []);

/** A mark so far out that it would squeeze everything else is drawn as an arrow at the end. */
const reach = (contentG: number, marks: readonly { massG: number }[]) =>
  marks.reduce((most, mark) => (mark.massG <= contentG * 2.6 ? Math.max(most, mark.massG) : most), contentG);

/** Factory charge and extra, the total at the poise, and the limits of the room. `extraG` below zero is taken away. */
export function chargeBeam(
  charge: {
    factory: Labelled;
    extra: Labelled;
    total: Labelled;
    /** Up to here nobody asks for the room. */
    noCheckUpTo?: Labelled | null;
    /** Nothing goes past it: the room's limit, the manual's largest charge. */
    stops?: readonly Labelled[];
  },
  { gramsPer, unit }: BeamUnit,
): BeamSpec {
  const { factory, extra, total, noCheckUpTo, stops = [] } = charge;
  const highest = Math.max(factory.massG, total.massG);
  const limits = [...stops, ...only(noCheckUpTo)];
  const end = roundEnd((Math.max(reach(highest, limits), highest) * 1.06) / gramsPer);
  const segments: BeamSegment[] =
    extra.massG < 0
      ? [
          { from: 0, to: total.massG / gramsPer, kind: 'rest', label: factory.label },
          { from: total.massG / gramsPer, to: factory.massG / gramsPer, kind: 'move', label: extra.label },
        ]
      : [
          ...(factory.massG > 0
            ? [{ from: 0, to: factory.massG / gramsPer, kind: 'rest' as const, label: factory.label }]
            : []),
          ...(extra.massG > 0
            ? [
                {
                  from: factory.massG / gramsPer,
                  to: total.massG / gramsPer,
                  kind: 'move' as const,
                  label: extra.label,
                },
              ]
            : []),
        ];
  return {
    domain: [0, end],
    unit,
    segments,
    poise: { at: total.massG / gramsPer, label: total.label, kind: extra.massG === 0 ? 'rest' : 'move' },
    marks: [
      ...stops.map((stop): BeamMark => ({ at: stop.massG / gramsPer, label: stop.label, kind: 'stop' })),
      ...only(noCheckUpTo).map(
        (limit): BeamMark => ({ at: limit.massG / gramsPer, label: limit.label, kind: 'limit' }),
      ),
    ],
  };
}

/** A cylinder as it stands on the scale: tare, heel and contents, up to its fill limit. */
export function cylinderBeam(
  cylinder: {
    tare?: Labelled | null;
    /** What stays in a cylinder called empty. */
    heel?: Labelled | null;
    contents: Labelled;
    /** Gross: tare and the largest net content. */
    fillLimit?: Labelled | null;
    gross?: Labelled | null;
  },
  { gramsPer, unit }: BeamUnit,
): BeamSpec {
  const { tare, heel, contents, fillLimit, gross } = cylinder;
  const tareG = tare?.massG ?? 0;
  const heelG = Math.min(heel?.massG ?? 0, contents.massG);
  const grossG = tareG + contents.massG;
  const end = roundEnd((Math.max(grossG, fillLimit?.massG ?? 0) * 1.04) / gramsPer);
  const segments: BeamSegment[] = [
    ...only(tare).map((part): BeamSegment => ({ from: 0, to: tareG / gramsPer, kind: 'free', label: part.label })),
    ...(heel && heelG > 0
      ? [{ from: tareG / gramsPer, to: (tareG + heelG) / gramsPer, kind: 'gone' as const, label: heel.label }]
      : []),
    ...(contents.massG > heelG
      ? [{ from: (tareG + heelG) / gramsPer, to: grossG / gramsPer, kind: 'rest' as const, label: contents.label }]
      : []),
  ];
  return {
    domain: [0, end],
    unit,
    segments,
    ...(gross ? { poise: { at: grossG / gramsPer, label: gross.label, kind: 'rest' as const } } : {}),
    marks: only(fillLimit).map((limit): BeamMark => ({ at: limit.massG / gramsPer, label: limit.label, kind: 'stop' })),
  };
}

/**
 * Charging against the scale: from the start towards the stop, the poise at the reading. It runs from left to right
 * whatever the figures do: a cylinder on the scale becomes lighter, a zeroed scale goes below zero.
 */
export function weighInBeam(
  weighIn: {
    start: Labelled;
    /** The reading now; null before the first. */
    now: Labelled | null;
    stop: Labelled;
    /** Half the tolerance band around the stop. */
    toleranceG: number;
    /** What has gone in, named. */
    gone: string;
  },
  { gramsPer, unit }: BeamUnit,
): BeamSpec {
  const { start, now, stop, toleranceG, gone } = weighIn;
  const direction = stop.massG < start.massG ? -1 : 1;
  const span = Math.max(Math.abs(stop.massG - start.massG), toleranceG * 2, 1);
  const past = now ? Math.max(0, (now.massG - stop.massG) * direction) : 0;
  const from = start.massG - direction * span * 0.04;
  const to = stop.massG + direction * Math.max(span * 0.16, toleranceG * 2, past * 1.15);
  return {
    domain: [from / gramsPer, to / gramsPer],
    unit,
    segments:
      now && now.massG !== start.massG
        ? [{ from: start.massG / gramsPer, to: now.massG / gramsPer, kind: 'move', label: gone }]
        : [],
    ...(now ? { poise: { at: now.massG / gramsPer, label: now.label, kind: 'move' as const } } : {}),
    marks: [
      { at: start.massG / gramsPer, label: start.label, kind: 'note' },
      { at: stop.massG / gramsPer, label: stop.label, kind: 'target' },
    ],
    band: { from: (stop.massG - toleranceG) / gramsPer, to: (stop.massG + toleranceG) / gramsPer },
  };
}

/** A unit: what its book holds, what it has lost since it was full, and its full charge as a mark. */
export function unitBeam(
  unit: { book: Labelled; lost?: Labelled | null; fullCharge?: Labelled | null },
  { gramsPer, unit: unitName }: BeamUnit,
): BeamSpec {
  const { book, lost, fullCharge } = unit;
  const bookG = Math.max(book.massG, 0);
  const lostG = Math.max(lost?.massG ?? 0, 0);
  const end = roundEnd((Math.max(bookG + lostG, fullCharge?.massG ?? 0, 1) * 1.08) / gramsPer);
  return {
    domain: [0, end],
    unit: unitName,
    segments: [
      { from: 0, to: bookG / gramsPer, kind: 'rest', label: book.label },
      ...(lost && lostG > 0
        ? [{ from: bookG / gramsPer, to: (bookG + lostG) / gramsPer, kind: 'gone' as const, label: lost.label }]
        : []),
    ],
    marks: only(fullCharge).map((mark): BeamMark => ({ at: mark.massG / gramsPer, label: mark.label, kind: 'target' })),
  };
}

/** A period as an equation: what was there and came in lies on the beam, where it went hangs under it. */
export function periodBeam(
  period: {
    cameIn: readonly (Labelled & { kind: 'rest' | 'move' })[];
    wentOut: readonly (Labelled & { kind: 'rest' | 'move' | 'gone' })[];
  },
  { gramsPer, unit }: BeamUnit,
): BeamSpec {
  const stack = <K extends BeamSegment['kind']>(parts: readonly (Labelled & { kind: K })[]): BeamSegment[] => {
    let at = 0;
    return parts.map((part) => {
      const from = at;
      at += Math.max(part.massG, 0) / gramsPer;
      return { from, to: at, kind: part.kind, label: part.label };
    });
  };
  const segments = stack(period.cameIn);
  const counter = stack(period.wentOut);
  const most = Math.max(segments.at(-1)?.to ?? 0, counter.at(-1)?.to ?? 0);
  return { domain: [0, roundEnd(most * 1.02)], unit, segments, counter };
}
