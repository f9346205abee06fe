import { ENTRY_SORTS } from '../../../shared/entries/entry.schema.ts';
import { GROUP_KINDS } from '../../../shared/ledger/entry-group.schema.ts';
import { PLACE_KINDS } from '../../../shared/ledger/place.ts';
import type { EntryListQuery } from '../../api/entries.ts';

/** The filters as they stand in the address, so that a filtered log can be passed on as a link. */
const NAMES = ['month', 'refrigerant', 'place', 'personId', 'kind', 'cylinderId', 'unitId', 'without'] as const;
export type FilterName = (typeof NAMES)[number];

const oneOf = <T extends string>(allowed: readonly T[], text: string | null): T | undefined =>
  allowed.find((value) => value === text);

/** Reads the address; what it does not know it leaves out, so that an old link still opens. */
export function readFilters(search: URLSearchParams): EntryListQuery {
  const text = (name: FilterName) => search.get(name) || undefined;
  return {
    month: /^\d{4}-(0[1-9]|1[0-2])$/.test(text('month') ?? '') ? text('month') : undefined,
    refrigerant: text('refrigerant'),
    place: oneOf(PLACE_KINDS, search.get('place')),
    personId: text('personId'),
    kind: oneOf(GROUP_KINDS, search.get('kind')),
    cylinderId: text('cylinderId'),
    unitId: text('unitId'),
    without: oneOf(['reversed'] as const, search.get('without')),
    sort: oneOf(ENTRY_SORTS, search.get('sort')) ?? '-sequence',
  };
}

/** The address with one filter set anew, or taken away; whatever else stands in it stays, except the open entry. */
export function withFilter(search: URLSearchParams, name: FilterName | 'sort', value: string): URLSearchParams {
  const next = new URLSearchParams(search);
  if (value === '') next.delete(name);
  else next.set(name, value);
  next.delete('entry');
  return next;
}

export function withoutFilters(search: URLSearchParams): URLSearchParams {
  const next = new URLSearchParams(search);
  for (const name of [...NAMES, 'entry']) next.delete(name);
  return next;
}

export const filterCount = (query: EntryListQuery): number => NAMES.filter((name) => query[name] !== undefined).length;

/** The last booking months, newest first, from the month of `now`: `2026-11`. */
export function recentMonths(now: Date, count = 36): string[] {
  return Array.from({ length: count }, (_, back) => {
    const month = new Date(Date.UTC(now.getFullYear(), now.getMonth() - back, 1));
    return month.toISOString().slice(0, 7);
  });
}
