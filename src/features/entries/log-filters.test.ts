import { describe, expect, it } from 'vitest';
import { entryListQuery } from '../../../shared/entries/entry.schema.ts';
import { filterCount, readFilters, recentMonths, withFilter, withoutFilters } from './log-filters.ts';

const read = (search: string) => readFilters(new URLSearchParams(search));

describe('The filters of the log', () => {
  it('come from the address and are what the server takes', () => {
    const filters = read(
      'month=2026-11&refrigerant=R-410A&place=atmosphere&kind=recovery&sort=-occurredAt&without=reversed',
    );
    expect(filters).toMatchObject({ month: '2026-11', place: 'atmosphere', kind: 'recovery', sort: '-occurredAt' });
    expect(entryListQuery.safeParse(filters).success).toBe(true);
  });

  it('leave out what an old or mistyped link names, instead of breaking the page', () => {
    const filters = read('month=2026-13&place=moon&kind=gift&sort=mass');
    expect([filters.month, filters.place, filters.kind, filters.sort]).toEqual([
      undefined,
      undefined,
      undefined,
      '-sequence',
    ]);
    expect(filterCount(filters)).toBe(0);
  });

  it('change one at a time; the entry that was open does not stay in the address', () => {
    const next = withFilter(new URLSearchParams('month=2026-11&entry=88'), 'place', 'unit');
    expect(next.toString()).toBe('month=2026-11&place=unit');
    expect(withFilter(next, 'month', '').toString()).toBe('place=unit');
    expect(withoutFilters(new URLSearchParams('month=2026-11&place=unit&sort=sequence')).toString()).toBe(
      'sort=sequence',
    );
  });

  it('offer the months back from this one, over the turn of the year', () => {
    expect(recentMonths(new Date(2026, 1, 28), 4)).toEqual(['2026-02', '2026-01', '2025-12', '2025-11']);
  });
});
