import {
  type BookBasis,
  basisOn,
  type DifferenceUncertainty,
  type Issue,
  type ScaleReading,
  setsBook,
  uncertaintyOf,
  withIssues,
} from '../ledger/book-basis.ts';
import { issuesOf, type StepReading, scaleReading, type WeighedGroup } from '../ledger/cylinder-issues.ts';
import { ASSUMED_SCALE, grossVarianceG2, isBeyond } from '../ledger/scale.ts';
import { verdictOf } from '../scale/reconcile.ts';

export type Verdict = ReturnType<typeof verdictOf>;

/** One group as one cylinder sees it. */
export interface CylinderStep extends WeighedGroup {
  readonly occurredAt: number;
  /** Tare of that day. */
  readonly tareMicrograms: bigint;
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
  readonly restsOn: { readonly reading: ScaleReading; readonly at: number } | null;
  /** How many of the walk's issues came before that reading, and how many before this one. */
  readonly issuesBefore: { readonly start: number; readonly end: number };
}

export interface CylinderWalk {
  readonly checks: ReadingCheck[];
  /** Every mass, in order, as it is known. */
  readonly issues: readonly Issue[];
  readonly bookMicrograms: bigint;
}

const gramsOf = (mass: bigint): number => Number(mass) / 1e6;
const sizeG = (mass: bigint): number => Math.abs(gramsOf(mass));

/** What stands since the book was last set by a reading. */
interface Standing {
  readonly restsOn: ReadingCheck['restsOn'];
  readonly basis: BookBasis;
  readonly issuesBefore: number;
}

/**
 * Holds each gross reading of a cylinder against its book, in the order of the timeline, each with the uncertainty of
 * everything that the book rests on since a reading last set it.
 *
 * @param steps groups that stand (nothing reversed), in order
 * @param bookBeforeMicrograms the book before the first of them
 */
export function walkCylinder(steps: readonly CylinderStep[], bookBeforeMicrograms: bigint): CylinderWalk {
  const checks: ReadingCheck[] = [];
  const issues: Issue[] = [];
  const starts = new Map<string, ScaleReading>();
  let book = bookBeforeMicrograms;
  let standing: Standing = { restsOn: null, basis: basisOn(null), issuesBefore: 0 };
  let previousAt: number | null = null;
  for (const step of steps) {
    const gross = inOrder(step);
    const [earlier, later] = [gross.filter((each) => each.isEarlier), gross.filter((each) => !each.isEarlier)];
    let toPost = step.postedMicrograms;
    const check = (reading: StepReading, postedMicrograms: bigint): void => {
      const content = contentOf(step, reading);
      const end = scaleReading(reading);
      const difference = content - book;
      const { restsOn } = standing;
      const uncertainty = uncertaintyOf(standing.basis, end, gramsOf(content));
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
        restsOn,
        issuesBefore: { start: standing.issuesBefore, end: issues.length },
      });
      book += postedMicrograms;
      if (setsBook(postedMicrograms, difference, restsOn === null)) {
        standing = { restsOn: { reading: end, at: reading.at }, basis: basisOn(end), issuesBefore: issues.length };
      }
      previousAt = reading.at;
    };
    for (const { reading } of earlier) {
      const posted = postedAt(toPost, contentOf(step, reading) - book, reading, later.length === 0);
      toPost -= posted;
      check(reading, posted);
    }
    for (const mass of step.masses) book += mass.massMicrograms;
    const own = issuesOf(step, starts);
    issues.push(...own);
    standing = { ...standing, basis: withIssues(standing.basis, own) };
    for (const { reading } of later) {
      check(reading, toPost);
      toPost = 0n;
    }
    // Without a reading of this cylinder (the opening of a unit's timeline, say) it only moves the book.
    book += toPost;
    const before = gross.find(({ reading }) => reading.moment === 'before')?.reading;
    if (before) starts.set(step.groupId, scaleReading(before));
  }
  return { checks, issues, bookMicrograms: book };
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
