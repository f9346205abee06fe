/** The address with one parameter set anew, or taken away where it is empty. */
export function withParam(before: URLSearchParams, name: string, value: string): URLSearchParams {
  const next = new URLSearchParams(before);
  if (value === '') next.delete(name);
  else next.set(name, value);
  return next;
}
