import { CLOCK_ALLOWANCE_MS } from '../entries/posting-refusals.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfRefusals } from '../http/problem.ts';

/**
 * What holds from later on is entered when it holds.
 * @throws Problem 422 `inFuture`, with what was given and the time of the server
 */
export function refuseFuture({ now }: Pick<Parts, 'now'>, validFrom: string): void {
  if (Date.parse(validFrom) <= now().getTime() + CLOCK_ALLOWANCE_MS) return;
  const figures = { given: validFrom, allowed: now().toISOString() };
  throw problemOfRefusals([{ code: 'inFuture', path: '/validFrom', ...figures }]);
}
