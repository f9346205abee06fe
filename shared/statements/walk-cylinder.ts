import { ASSUMED_SCALE, grossVarianceG2, isBeyond, type Scale } from '../ledger/scale.ts';
import { verdictOf } from '../scale/reconcile.ts';
import {
  type DifferenceUncertainty,
  differenceUncertainty,
  type Issue,
  type ScaleReading,
} from './difference-uncertainty.ts';

export type Verdict = ReturnType<typeof verdictOf>;

export interface StepReading {
  readonly id: string;
  /** Milliseconds since 1970, UTC. */
  readonly at: number;
  /** Null: nobody named the scale, and `ASSUMED_SCALE` stands for it. */
  readonly toolId: string | null;
  readonly scale: Scale | null;
  readonly moment: 'before' | 'after' | 'only';
  readonly mode: 'gross' | 'zeroed';
  readonly grossMicrograms: bigint;
  /** What the hose held, if it was full at this reading; else 0. */
  readonly hoseMicrograms: bigint;
}

export interface StepMass {
  /** Above zero: into the cylinder. */
  readonly massMicrograms: bigint;
  readonly weighed: boolean;
  /** The scale of the cylinder at the other end, if that was weighed in the group. */
  readonly otherScale: Scale | null;
}

/** One group as one cylinder sees it. */
export interface CylinderStep {
  readonly groupId: string;
  /** The weigh-in that it closes: its start reading belongs to these masses. */
  readonly closesGroupId: string | null;
  readonly occurredAt: number;
  /** Tare of that day. */
  readonly tareMicrograms: bigint;
  readonly readings: readonly StepReading[];
  readonly masses: readonly StepMass[];
  /** What the judge has posted for this group, corrections included; above zero: into the cylinder. */
  readonly postedMicrograms: bigint;
  /** It was the first statement of what nothing explained: what was posted opens the book and is no difference. */
  readonly opens: boolean;
}

/** What one gross reading says against the book of its moment. */
export interface ReadingCheck {
  readonly readingId: string;
  readonly groupId: string;
  readonly at: number;
  readonly contentMicrograms: bigint;
  readonly bookMicrograms: bigint;
  /** Content less book: below zero, refrigerant is missing. */
  readonly differenceMicrograms: bigint;
  /** How much of it the judge has posted, so that the book follows the reading. */
  readonly postedMicrograms: bigint;
  readonly uncertainty: DifferenceUncertainty;
  /** Null: the reading opens the book. */
  readonly verdict: Verdict | null;
  /** The gross reading before it; null: none is known. The difference came about in between. */
  readonly previousAt: number | null;
  /** The reading that the book rested on; null: a paper. */
  readonly restsOnAt: number | null;
}

const gramsOf = (mass: bigint): number => Number(mass) / 1e6;
const sizeG = (mass: bigint): number => Math.abs(gramsOf(mass));

/** What stands since the book was last set by a reading. */
interface Standing {
  start: { reading: ScaleReading; at: number } | null;
  issues: Issue[];
}

/**
 * Holds each gross reading of a cylinder against its book, in the order of the timeline, each with the uncertainty of
 * everything that the book rests on since a reading last set it.
 *
 * @param steps groups that stand (nothing reversed), in order
 * @param bookBeforeMicrograms the book before the first of them
 */
export function walkCylinder(
  steps: readonly CylinderStep[],
  bookBeforeMicrograms: bigint,
): { checks: ReadingCheck[]; bookMicrograms: bigint } {
  const checks: ReadingCheck[] = [];
  const starts = new Map<string, ScaleReading>();
  let book = bookBeforeMicrograms;
  let standing: Standing = { start: null, issues: [] };
  let previousAt: number | null = null;
  for (const step of steps) {
    const gross = inOrder(step);
    const [earlier, later] = [gross.filter((each) => each.isEarlier), gross.filter((each) => !each.isEarlier)];
    let toPost = step.postedMicrograms;
    const check = (reading: StepReading, postedMicrograms: bigint): void => {
      const content = contentOf(step, reading);
      const end = scaleReading(reading);
      const difference = content - book;
      const { start, issues } = standing;
      const asked = { start: start?.reading ?? null, end, contentG: gramsOf(content), issues };
      const uncertainty = differenceUncertainty(asked);
      checks.push({
        readingId: reading.id,
        groupId: step.groupId,
        at: reading.at,
        contentMicrograms: content,
        bookMicrograms: book,
        differenceMicrograms: difference,
        postedMicrograms,
        uncertainty,
        verdict: step.opens ? null : verdictOf(sizeG(difference), uncertainty.standardG),
        previousAt,
        restsOnAt: start?.at ?? null,
      });
      book += postedMicrograms;
      if (postedMicrograms !== 0n || !start) standing = { start: { reading: end, at: reading.at }, issues: [] };
      previousAt = reading.at;
    };
    for (const { reading } of earlier) {
      const posted = postedAt(toPost, contentOf(step, reading) - book, reading, later.length === 0);
      toPost -= posted;
      check(reading, posted);
    }
    for (const mass of step.masses) book += mass.massMicrograms;
    const issues = issuesOf(step, starts);
    standing = { ...standing, issues: [...standing.issues, ...issues] };
    for (const { reading } of later) {
      check(reading, toPost);
      toPost = 0n;
    }
    // Without a reading of this cylinder (the opening of a unit's timeline, say) it only moves the book.
    book += toPost;
    const before = gross.find(({ reading }) => reading.moment === 'before')?.reading;
    if (before) starts.set(step.groupId, scaleReading(before));
  }
  return { checks, bookMicrograms: book };
}

/** How much of what was posted for the group belongs to its first reading; the last one takes what is left. */
function postedAt(toPost: bigint, gap: bigint, reading: StepReading, isLast: boolean): bigint {
  if (toPost === 0n || isLast || toPost === gap) return toPost;
  const scale = reading.scale ?? ASSUMED_SCALE;
  return isBeyond(gap, grossVarianceG2(scale, reading.grossMicrograms)) ? gap : 0n;
}

/** Whether a reading stands before the masses of its group, as the judge orders them. */
export function standsBeforeMasses(
  step: Pick<CylinderStep, 'masses'>,
  { moment }: Pick<StepReading, 'moment'>,
): boolean {
  const takes = step.masses.some(({ massMicrograms }) => massMicrograms < 0n);
  const brings = step.masses.some(({ massMicrograms }) => massMicrograms > 0n);
  return moment === 'before' || (moment === 'only' && takes && !brings);
}

function inOrder(step: CylinderStep): { reading: StepReading; isEarlier: boolean }[] {
  const order = ['before', 'only', 'after'];
  return step.readings
    .filter(({ mode }) => mode === 'gross')
    .toSorted((a, b) => order.indexOf(a.moment) - order.indexOf(b.moment))
    .map((reading) => ({ reading, isEarlier: standsBeforeMasses(step, reading) }));
}

/** Gross less tare; the hose counts where it was full before the masses. Never below nothing. */
export function contentOf({ tareMicrograms }: Pick<CylinderStep, 'tareMicrograms'>, reading: StepReading): bigint {
  const hose = reading.moment === 'after' ? 0n : reading.hoseMicrograms;
  const content = reading.grossMicrograms - tareMicrograms + hose;
  return content < 0n ? 0n : content;
}

export function scaleReading({ id, at, toolId, scale, grossMicrograms }: StepReading): ScaleReading {
  return {
    // One figure of one scale at one moment is one reading, also where two groups wrote it down.
    key: toolId === null ? id : `${toolId} ${at} ${grossMicrograms}`,
    scaleKey: toolId ?? 'not named',
    scale: scale ?? ASSUMED_SCALE,
    grossG: gramsOf(grossMicrograms),
  };
}

/** How each mass of the group is known. */
export function issuesOf(step: CylinderStep, starts: ReadonlyMap<string, ScaleReading>): Issue[] {
  const gross = step.readings.filter(({ mode }) => mode === 'gross');
  const own = gross.find(({ moment }) => moment === 'before');
  const before = own ? scaleReading(own) : step.closesGroupId ? starts.get(step.closesGroupId) : undefined;
  const after = gross.find(({ moment }) => moment === 'after');
  const weighed = step.masses.filter((mass) => mass.weighed);
  const notWeighed = step.masses.filter((mass) => !mass.weighed).map((): Issue => ({ weighed: 'no' }));
  if (weighed.length === 0) return notWeighed;
  if (before && after) return [{ weighed: 'here', before, after: scaleReading(after) }, ...notWeighed];
  const zeroed = step.readings.find(({ mode }) => mode === 'zeroed')?.scale ?? gross[0]?.scale ?? null;
  return [
    ...weighed.map(
      ({ otherScale, massMicrograms }): Issue => ({
        weighed: 'elsewhere',
        scale: zeroed ?? otherScale ?? ASSUMED_SCALE,
        massG: sizeG(massMicrograms),
      }),
    ),
    ...notWeighed,
  ];
}
