import { asReturned } from '../calculations/decimals.ts';
import { done, type Outcome } from '../problems/outcome.ts';
import { snap12, snapSum } from '../units/round.ts';
import type { ReconcileRequest, ReconcileResponse } from './reconcile.schema.ts';
import { varianceG2 } from './scale-uncertainty.ts';

/**
 * D = (start - end) - sum of what was issued, and whether the scale explains it: u2 = (2 + 2 n) x that of one reading,
 * all readings independent, and the span error on what left the cylinder (as if the issued masses were known from
 * elsewhere: it cancels on one and the same scale, but nobody is to be blamed for a scale).
 */
export function reconcile(request: ReconcileRequest): Outcome<ReconcileResponse> {
  const leftG = snapSum(request.startGrossG, -request.endGrossG);
  const differenceG = snapSum(request.startGrossG, -request.endGrossG, ...request.issuedG.map((issued) => -issued));
  const standardG = Math.sqrt(varianceG2(request, 2 + 2 * request.issuedG.length, leftG));
  return done({
    differenceG: asReturned(differenceG, 'g'),
    standardUncertaintyG: asReturned(standardG, 'g'),
    verdict: verdictOf(Math.abs(differenceG), standardG),
  });
}

/** Also for month close: the size of a difference against its standard uncertainty. */
export function verdictOf(sizeG: number, standardG: number): ReconcileResponse['verdict'] {
  const size = snap12(sizeG);
  if (size < snap12(2 * standardG)) return 'withinScales';
  return size <= snap12(3 * standardG) ? 'lookAgain' : 'notExplained';
}
