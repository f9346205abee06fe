import type { Outcome, Refusal } from '../../shared/problems/outcome.ts';
import { type ProblemCode, statusOfCode } from '../../shared/problems/problem-codes.ts';

interface ProblemOptions {
  /** Values for the sentence of the catalogue. */
  params?: Record<string, string | number>;
  errors?: readonly Refusal[];
  headers?: Record<string, string>;
  /** What went wrong inside; it reaches the log, never the answer. */
  cause?: unknown;
}

/**
 * A refused request: thrown anywhere below a route, answered in one place as `application/problem+json`. Anything
 * else that is thrown is a bug and answers 500.
 */
export class Problem extends Error {
  readonly code: string;
  readonly status: number;
  readonly params: Record<string, string | number>;
  readonly errors: readonly Refusal[];
  readonly headers: Record<string, string>;

  constructor(code: ProblemCode, options?: ProblemOptions);
  /** Codes of the rules, which are all 422. */
  constructor(code: string, options: ProblemOptions & { errors: readonly Refusal[] });
  constructor(code: string, { params = {}, errors = [], headers = {}, cause }: ProblemOptions = {}) {
    super(code, { cause });
    this.name = 'Problem';
    this.code = code;
    this.status = statusOfCode(code);
    this.params = params;
    this.errors = errors;
    this.headers = headers;
  }
}

/**
 * Refusals of a schema or rule as one 422. Its own code is theirs when they all agree (`reasonRequired`, say), so that
 * a client need not look into the list; else `requestNotValid`.
 */
export function problemOfRefusals(refusals: readonly Refusal[]): Problem {
  const first = refusals[0];
  const agreed = first !== undefined && refusals.every((refusal) => refusal.code === first.code);
  return agreed
    ? new Problem(first.code, { errors: refusals, params: first.params ?? {} })
    : new Problem('requestNotValid', { errors: refusals });
}

/** The value of a domain function's outcome, or its refusals thrown as a 422. */
export function valueOrProblem<T>(outcome: Outcome<T>): T {
  if (outcome.ok) return outcome.value;
  throw problemOfRefusals(outcome.refusals);
}
