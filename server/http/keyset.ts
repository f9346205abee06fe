import { Buffer } from 'node:buffer';
import { problemOfRefusals } from './problem.ts';

/** One row's place in a sorted list: the values of the sort columns, the unique one last. */
export type KeysetPosition = readonly (string | number | null)[];

/**
 * An opaque cursor. It names the sort and filter that it belongs to (`of`), so that one list's cursor is refused by
 * another instead of skipping rows.
 */
export function encodeCursor(of: string, position: KeysetPosition): string {
  return Buffer.from(JSON.stringify([of, ...position])).toString('base64url');
}

/** @throws Problem 422 `cursorNotValid` at `/cursor` */
export function decodeCursor(of: string, cursor: string, columns: number): KeysetPosition {
  const position = readCursor(cursor);
  if (position === null || position[0] !== of || position.length !== columns + 1) {
    throw problemOfRefusals([{ code: 'cursorNotValid', path: '/cursor' }]);
  }
  return position.slice(1);
}

function readCursor(cursor: string): KeysetPosition | null {
  try {
    const parsed: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
    if (!Array.isArray(parsed)) return null;
    const plain = parsed.every((part) => part === null || typeof part === 'number' || isPlainText(part));
    return plain ? (parsed as KeysetPosition) : null;
  } catch {
    return null;
  }
}

const isPlainText = (part: unknown): boolean => typeof part === 'string' && !/\p{Cs}|\0/u.test(part);

/**
 * Shapes rows that were read with `limit + 1`: the extra row only says that there is a next page.
 * @param of names sort and filter, the same as given to `decodeCursor`
 */
export function presentPage<Row, Item>(
  rows: readonly Row[],
  limit: number,
  of: string,
  positionOf: (row: Row) => KeysetPosition,
  present: (row: Row) => Item,
): { items: Item[]; nextCursor: string | null } {
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  const nextCursor = rows.length > limit && last !== undefined ? encodeCursor(of, positionOf(last)) : null;
  return { items: shown.map(present), nextCursor };
}
