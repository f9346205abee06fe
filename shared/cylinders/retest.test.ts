import { describe, expect, it } from 'vitest';
import { isRetestOverdue, retestOverdueFrom } from './retest.ts';

/** Source: 49 CFR 180.205(c); case D04: last tested 2021-11, allowed on 2026-11-30, blocked on 2026-12-01. */
describe('A re-test', () => {
  it('is due by month and year: overdue from the first day after its month, whatever its day', () => {
    for (const due of ['2026-11-01', '2026-11-15', '2026-11-30']) {
      expect([isRetestOverdue(due, '2026-11-30'), isRetestOverdue(due, '2026-12-01')]).toEqual([false, true]);
    }
    expect(isRetestOverdue('2026-02-28', '2026-03-01')).toBe(true);
    expect(retestOverdueFrom('2026-12-31')).toBe('2027-01-01');
  });

  it('is not overdue where no day is known', () => {
    expect(isRetestOverdue(null, '2026-12-01')).toBe(false);
  });
});
