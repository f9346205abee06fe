import { describe, expect, it } from 'vitest';
import { dayAfter, endOfMonth, monthBefore, monthsBetween, monthsLater, startOfDay, startOfMonth } from './month.ts';

const utc = (at: number) => new Date(at).toISOString();

describe('A booking month', () => {
  it('is counted over the end of a year', () => {
    expect(monthsLater('2026-11', 3)).toBe('2027-02');
    expect(monthBefore('2026-01')).toBe('2025-12');
    expect(monthsBetween('2025-11', '2026-02')).toEqual(['2025-11', '2025-12', '2026-01', '2026-02']);
    expect(monthsBetween('2026-02', '2026-01')).toEqual([]);
  });

  it('begins and ends on the clock of the firm', () => {
    // Offsets: IANA time zone data. New York is at UTC-4 on 1 October and 1 November, at UTC-5 on 1 December.
    expect(utc(startOfMonth('2026-10', 'America/New_York'))).toBe('2026-10-01T04:00:00.000Z');
    expect(utc(endOfMonth('2026-10', 'America/New_York'))).toBe('2026-11-01T03:59:59.999Z');
    expect(utc(endOfMonth('2026-11', 'America/New_York'))).toBe('2026-12-01T04:59:59.999Z');
    expect(utc(startOfMonth('2026-10', 'Pacific/Kiritimati'))).toBe('2026-09-30T10:00:00.000Z');
    expect(utc(startOfMonth('2026-10', 'UTC'))).toBe('2026-10-01T00:00:00.000Z');
  });
});

describe('A day', () => {
  it('whose midnight the clocks skip begins the moment after', () => {
    // Santiago put its clocks forward at midnight of 6 September 2026 (IANA: first Sunday on or after 2 September).
    expect(utc(startOfDay('2026-09-06', 'America/Santiago'))).toBe('2026-09-06T04:00:00.000Z');
    expect(utc(startOfDay('2026-09-07', 'America/Santiago'))).toBe('2026-09-07T03:00:00.000Z');
  });

  it('is followed by the next, over the end of February', () => {
    expect(dayAfter('2028-02-28')).toBe('2028-02-29');
    expect(dayAfter('2026-02-28')).toBe('2026-03-01');
  });
});
