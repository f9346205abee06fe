/** One reason why something asked for is not done. `path` is a JSON Pointer into the request (RFC 6901). */
export interface Refusal {
  /** Key of the message catalogue under `problem.`, and the `code` of the answer. */
  code: string;
  path: string;
  given?: string | number | boolean | null;
  allowed?: string | number | readonly (string | number)[] | null;
  /** Values for the message, units included where the message does not name them. */
  params?: Record<string, string | number>;
}

/** What a domain function returns: the value, or every refusal that was found. Never half of each. */
export type Outcome<T> = { ok: true; value: T } | { ok: false; refusals: readonly Refusal[] };

export const done = <T>(value: T): Outcome<T> => ({ ok: true, value });
export const refused = (...refusals: Refusal[]): Outcome<never> => ({ ok: false, refusals });
