import type { Draws } from './draws.ts';

/** An id of the shape that clients make (UUID version 7, RFC 9562, 5.7), with the demo's own draws for its random part. */
export function demoId(at: Date, draws: Draws): string {
  const time = at.getTime().toString(16).padStart(12, '0');
  const variant = '89ab'[draws.whole(0, 3)];
  return `${time.slice(0, 8)}-${time.slice(8)}-7${draws.hex(3)}-${variant}${draws.hex(3)}-${draws.hex(12)}`;
}
