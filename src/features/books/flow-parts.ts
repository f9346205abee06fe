import type { BooksResponse } from '../../../shared/books/books.schema.ts';
import type { CameIn, WentOut } from '../../../shared/books/equation.ts';

/** rest: there before or after; move: came in or went out; gone: lost; open: a difference, in plain sight. */
export type FlowKind = 'rest' | 'move' | 'gone' | 'open';

export interface FlowPart {
  key: string;
  part: CameIn | WentOut;
  kind: FlowKind;
  /** Above zero. */
  massG: number;
  entryCount: number;
  /** Stands on the other side of the picture: more was taken back than went, or a scale showed more than the book. */
  turned: boolean;
}

const KINDS: Partial<Record<CameIn | WentOut, FlowKind>> = {
  onHandStart: 'rest',
  onHandEnd: 'rest',
  lost: 'gone',
  cylinderDifference: 'open',
  supplierShortFill: 'open',
  otherDifference: 'open',
  missing: 'open',
};

/**
 * The two sides of the books as the picture draws them. A part below zero is drawn at the other side with its size, so
 * that the two sides stay equal and nothing is drawn as a negative width.
 */
export function flowSides({ cameIn, wentOut }: BooksResponse['equation']): { left: FlowPart[]; right: FlowPart[] } {
  const partOf = ({ part, massG, entryCount }: { part: CameIn | WentOut; massG: number; entryCount: number }) => ({
    key: part,
    part,
    kind: KINDS[part] ?? ('move' as const),
    massG: Math.abs(massG),
    entryCount,
    turned: massG < 0,
  });
  const came = cameIn.map(partOf);
  const went = wentOut.map(partOf);
  const drawn = (parts: readonly FlowPart[]) => parts.filter(({ massG }) => massG > 0);
  return {
    left: drawn([...came.filter(({ turned }) => !turned), ...went.filter(({ turned }) => turned)]),
    right: drawn([...went.filter(({ turned }) => !turned), ...came.filter(({ turned }) => turned)]),
  };
}
