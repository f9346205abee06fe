import { describe, expect, it } from 'vitest';
import { decodeCursor, encodeCursor, presentPage } from './keyset.ts';

const codeOf = (work: () => unknown) => {
  try {
    work();
    return 'accepted';
  } catch (error) {
    return (error as { code: string }).code;
  }
};

describe('A cursor', () => {
  it('comes back as the position it was made of', () => {
    const cursor = encodeCursor('name', ['Ålesund "Nord"', 12, null]);
    expect(decodeCursor('name', cursor, 3)).toEqual(['Ålesund "Nord"', 12, null]);
  });

  it.each([
    ['of another sort', encodeCursor('number', ['a', 'b'])],
    ['with another number of columns', encodeCursor('name', ['a'])],
    ['that is no JSON', 'bm90IGpzb24'],
    ['that holds an object', Buffer.from('["name",{"a":1},"b"]').toString('base64url')],
    ['that holds a NUL', Buffer.from('["name","\\u0000","b"]').toString('base64url')],
    ['that is empty', ''],
  ])('%s is refused', (_what, cursor) => {
    expect(codeOf(() => decodeCursor('name', cursor, 2))).toBe('cursorNotValid');
  });
});

describe('A page', () => {
  const rows = ['a', 'b', 'c'].map((name) => ({ name }));
  const page = (limit: number) =>
    presentPage(
      rows,
      limit,
      'name',
      (row) => [row.name],
      (row) => row.name,
    );

  it('points behind the last row it shows when there is one more', () => {
    const { items, nextCursor } = page(2);
    expect(items).toEqual(['a', 'b']);
    expect(decodeCursor('name', String(nextCursor), 1)).toEqual(['b']);
  });

  it('ends the list when no row was left', () => {
    expect(page(3)).toEqual({ items: ['a', 'b', 'c'], nextCursor: null });
  });
});
