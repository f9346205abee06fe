/** One keyset page of a list, as the server answers it. */
export interface PageOf<T> {
  items: T[];
  nextCursor: string | null;
}

/** The parts of an infinite query that every keyset list shares. */
export const keysetPages = {
  initialPageParam: null as string | null,
  getNextPageParam: (page: { nextCursor: string | null }) => page.nextCursor,
};

/** All rows that have arrived so far, as one list. */
export const rowsOf = <T>(data: { pages: readonly PageOf<T>[] } | undefined): T[] =>
  data?.pages.flatMap((page) => page.items) ?? [];
