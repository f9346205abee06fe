/**
 * Every whole-request refusal and its HTTP status. Codes that only appear inside `errors` (a rule or schema that one
 * field breaks) are not listed here: they are always part of a 422. Each code has a sentence in the message catalogue
 * under `problem.<code>`; a test compares the two.
 */
export const PROBLEM_STATUS = {
  malformedRequest: 400,
  malformedJson: 400,
  signInRequired: 401,
  wrongCredentials: 401,
  tokenNotValid: 401,
  notPermitted: 403,
  noActiveFirm: 403,
  otherOrigin: 403,
  notFound: 404,
  methodNotAllowed: 405,
  idReused: 409,
  alreadyExists: 409,
  inUse: 409,
  sealKeyLost: 409,
  exportNotDone: 409,
  exportExpired: 410,
  stale: 412,
  seenChanged: 412,
  bodyTooLarge: 413,
  importTooLarge: 413,
  unsupportedMediaType: 415,
  requestNotValid: 422,
  versionRequired: 428,
  tooManyRequests: 429,
  tooManySignIns: 429,
  tooManyExports: 429,
  internal: 500,
  busy: 503,
  notReady: 503,
} as const satisfies Record<string, number>;

export type ProblemCode = keyof typeof PROBLEM_STATUS;

/** The status of a code: 422 for everything that a rule or a schema refuses. */
export function statusOfCode(code: string): number {
  return (PROBLEM_STATUS as Record<string, number>)[code] ?? 422;
}
