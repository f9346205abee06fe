/** Writes a path as a JSON Pointer (RFC 6901); the empty path points at the whole document. */
export function jsonPointer(path: readonly PropertyKey[]): string {
  return path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}
