import {
  basisOn,
  type DifferenceUncertainty,
  type Issue,
  type ScaleReading,
  uncertaintyOf,
  withIssues,
} from '../ledger/book-basis.ts';

export interface Basis {
  /** The reading that the book rests on; null: a paper, so that tare and zero of the scale enter too. */
  readonly start: ScaleReading | null;
  readonly end: ScaleReading;
  /** What the end reading says the cylinder holds. */
  readonly contentG: number;
  readonly issues: readonly Issue[];
}

/** Uncertainty of D = (start - end) - sum of what was issued, by the very scales that were read. */
export const differenceUncertainty = ({ start, end, contentG, issues }: Basis): DifferenceUncertainty =>
  uncertaintyOf(withIssues(basisOn(start), issues), end, contentG);
