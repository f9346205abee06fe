import type { BookKind, Flow } from './flows.ts';

/** What was in cylinders at the start of a period, and what came into them. */
export const CAME_IN = [
  'onHandStart',
  'bought',
  'recovered',
  'opened',
  'fromCustomers',
  'fromContractors',
  'fromReclaimer',
] as const;
/** Where it went, and what is there at the end. */
export const WENT_OUT = [
  'onHandEnd',
  'intoUnits',
  'returned',
  'toReclaimer',
  'destroyed',
  'toCustomers',
  'toContractors',
  'lost',
  'cylinderDifference',
  'supplierShortFill',
  'otherDifference',
  'missing',
] as const;
export type CameIn = (typeof CAME_IN)[number];
export type WentOut = (typeof WENT_OUT)[number];

export interface EquationPart<Name extends string> {
  readonly part: Name;
  /** Above zero, except where more was taken back than went. */
  readonly massMicrograms: bigint;
  readonly entryCount: number;
}

/** On hand at the start and what came in is what went out and on hand at the end: exactly, because entries move masses. */
export interface Equation {
  readonly cameIn: readonly EquationPart<CameIn>[];
  readonly wentOut: readonly EquationPart<WentOut>[];
  readonly totalMicrograms: bigint;
}

type Side = { readonly side: 'in'; readonly part: CameIn } | { readonly side: 'out'; readonly part: WentOut };
const cameIn = (part: CameIn): Side => ({ side: 'in', part });
const wentOut = (part: WentOut): Side => ({ side: 'out', part });
const LOST = wentOut('lost');

/** By what stands at the other end, into a cylinder and out of one; what has one side only counts net there. */
const SIDES: Record<Exclude<BookKind, 'cylinder'>, { into: Side; out: Side }> = {
  supplier: { into: cameIn('bought'), out: wentOut('returned') },
  unit: { into: cameIn('recovered'), out: wentOut('intoUnits') },
  opening: { into: cameIn('opened'), out: cameIn('opened') },
  factory: { into: cameIn('opened'), out: cameIn('opened') },
  customer: { into: cameIn('fromCustomers'), out: wentOut('toCustomers') },
  otherContractor: { into: cameIn('fromContractors'), out: wentOut('toContractors') },
  reclaimer: { into: cameIn('fromReclaimer'), out: wentOut('toReclaimer') },
  destroyed: { into: wentOut('destroyed'), out: wentOut('destroyed') },
  'atmosphere:hose': { into: LOST, out: LOST },
  'atmosphere:measured': { into: LOST, out: LOST },
  'atmosphere:inferred': { into: LOST, out: LOST },
  'atmosphere:beforeOurCare': { into: LOST, out: LOST },
  cylinderDifference: { into: wentOut('cylinderDifference'), out: wentOut('cylinderDifference') },
  supplierShortFill: { into: wentOut('supplierShortFill'), out: wentOut('supplierShortFill') },
  unitDifference: { into: wentOut('otherDifference'), out: wentOut('otherDifference') },
  reclaimerDifference: { into: wentOut('otherDifference'), out: wentOut('otherDifference') },
  missing: { into: wentOut('missing'), out: wentOut('missing') },
};

/**
 * The cylinders' side of the books, without what came to nothing. A difference counts net, as something that went out: below zero where readings
 * showed more than the book.
 */
export function equationOf(flows: readonly Flow[], onHandStartMicrograms: bigint): Equation {
  const parts = new Map<CameIn | WentOut, EquationPart<CameIn | WentOut>>();
  const add = ({ part }: { part: CameIn | WentOut }, massMicrograms: bigint, entryCount: number): void => {
    const earlier = parts.get(part);
    parts.set(part, {
      part,
      massMicrograms: (earlier?.massMicrograms ?? 0n) + massMicrograms,
      entryCount: (earlier?.entryCount ?? 0) + entryCount,
    });
  };
  let onHandEnd = onHandStartMicrograms;
  for (const { fromKind, toKind, massMicrograms, entryCount } of flows) {
    if (toKind === 'cylinder' && fromKind !== 'cylinder') {
      const { into } = SIDES[fromKind];
      onHandEnd += massMicrograms;
      add(into, into.side === 'in' ? massMicrograms : -massMicrograms, entryCount);
    }
    if (fromKind === 'cylinder' && toKind !== 'cylinder') {
      const { out } = SIDES[toKind];
      onHandEnd -= massMicrograms;
      add(out, out.side === 'out' ? massMicrograms : -massMicrograms, entryCount);
    }
  }
  add({ part: 'onHandStart' }, onHandStartMicrograms, 0);
  add({ part: 'onHandEnd' }, onHandEnd, 0);
  const inOrder = <Name extends CameIn | WentOut>(names: readonly Name[]): EquationPart<Name>[] =>
    names
      .flatMap((name) => (parts.get(name) as EquationPart<Name> | undefined) ?? [])
      .filter(({ part, massMicrograms }) => massMicrograms !== 0n || part === 'onHandStart' || part === 'onHandEnd');
  const came = inOrder(CAME_IN);
  return {
    cameIn: came,
    wentOut: inOrder(WENT_OUT),
    totalMicrograms: came.reduce((sum, { massMicrograms }) => sum + massMicrograms, 0n),
  };
}
